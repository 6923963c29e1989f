import {
  addSeconds,
  dayNumber,
  defaultLeapSeconds,
  formatInstant,
  parseInstant,
  type Scale,
  secondsBetween,
} from "../../src/time/index.ts";
import type { Row } from "./row.ts";

const table = defaultLeapSeconds;
/** Modified Julian date of 1970-01-01. */
const mjdOf1970 = 40_587;

const read = (text: string, scale: Scale) => parseInstant(text, scale, table);

/** How far a scale reads ahead of TAI: the same reading comes that much earlier in it. */
const aheadOfTai = (scale: Scale, text: string): number => secondsBetween(read(text, scale), read(text, "TAI"));

function positiveSteps(): number {
  const until = dayNumber(2017, 1, 1);
  return table.steps.filter(({ day }) => day <= until && table.secondsInDay(day - 1) === 86_401).length;
}

/** The second of its minute of a fraction of a UTC day, as printed. */
function secondOfMinute(mjd: number): number {
  const day = Math.floor(mjd);
  const midnight = { seconds: (day - mjdOf1970) * 86_400 + table.offsetOnDay(day - mjdOf1970), picoseconds: 0 };
  const text = formatInstant(addSeconds(midnight, (mjd - day) * table.secondsInDay(day - mjdOf1970)), "UTC", table);
  if (!text.includes("T23:59:")) throw new Error(`expected the last minute of a day, found ${text}`);
  return Number(text.slice(17, -1));
}

/** TAI - UTC by the rate of 1968 at the start of 1972; the days are counted by the project's calendar. */
function beforeTheSteps(): number {
  const days = dayNumber(1972, 1, 1) - dayNumber(1966, 1, 1);
  return 4.21317 + days * 0.002592;
}

const newYear2017 = { seconds: dayNumber(2017, 1, 1) * 86_400, picoseconds: 0 };
const taiSeconds = (text: string): number => secondsBetween(newYear2017, read(text, "UTC"));

/** Distances of the time scales and the steps of UTC. */
export const timeScales: readonly Row[] = [
  {
    id: "T16",
    what: "TT - TAI",
    inputs: {},
    published: 32.184,
    got: () => aheadOfTai("TT", "2026-03-01T00:00:00"),
    tolerance: 0,
    unit: "s",
    source: "IAU; ERFA TTMTAI",
    standing: "read",
    place: "time: parseInstant in TT and TAI",
  },
  {
    id: "T17",
    what: "GPS - TAI",
    inputs: { epoch: "1980-01-06", dat_then: 19 },
    published: -19,
    got: () => aheadOfTai("GPS", "1980-01-06T00:00:00"),
    tolerance: 0,
    unit: "s",
    source: "IS-GPS-200 20.3.3.5.2.4; Vallado Ex 3-7 (GPS = TAI-19)",
    standing: "read",
    place: "time: parseInstant in GPS and TAI",
  },
  {
    id: "S01",
    what: "positive leap seconds, 1972 to 2017",
    inputs: {},
    published: 27,
    got: positiveSteps,
    tolerance: 0,
    unit: "count",
    source: "IERS Bulletin C; ERFA dat.c",
    standing: "read",
    place: "time: defaultLeapSeconds, secondsInDay",
  },
  {
    id: "S02",
    what: "TAI - UTC in 2003, 2008 and 2017",
    inputs: { days: "2003-06-01, 2008-01-17, 2017-09-01" },
    published: [32, 33, 37],
    got: () => [dayNumber(2003, 6, 1), dayNumber(2008, 1, 17), dayNumber(2017, 9, 1)].map((d) => table.offsetOnDay(d)),
    tolerance: 0,
    unit: "s",
    source: "ERFA eraDat tests",
    standing: "read",
    place: "time: LeapSecondTable.offsetOnDay",
  },
  {
    id: "S03",
    what: "0.99999 of 86 401 s",
    inputs: { mjd: 49_533.99999, ndp: 5 },
    published: 60.13599,
    got: () => secondOfMinute(49_533.99999),
    tolerance: 1e-5,
    unit: "s of minute 23:59",
    source: "ERFA eraD2dtf test",
    standing: "read",
    place: "time: secondsInDay, addSeconds, formatInstant",
  },
  {
    id: "S04",
    what: "TAI of 23:59:60 and 00:00:00",
    inputs: { utc: "2016-12-31T23:59:60Z, 2017-01-01T00:00:00Z", countedFrom: "2017-01-01 TAI" },
    published: [36, 37],
    got: () => [taiSeconds("2016-12-31T23:59:60Z"), taiSeconds("2017-01-01T00:00:00Z")],
    tolerance: 0,
    unit: "s",
    source: "IERS Bulletin C 52",
    standing: "from memory",
    place: "time: parseInstant inside a leap second",
  },
  {
    id: "S05",
    what: "NTP seconds of the last step, 2017-01-01",
    inputs: {},
    published: 3_692_217_600,
    got: () => (table.steps.at(-1)!.day - dayNumber(1900, 1, 1)) * 86_400,
    tolerance: 0,
    unit: "s",
    source: "IERS/IANA leap-seconds.list",
    standing: "from memory",
    place: "time: LeapSecondTable.steps, dayNumber",
  },
  {
    id: "S06",
    what: "TAI - UTC of 1972-01-01 by 1968 rate",
    inputs: { offset: 4.21317, fromMjd: 39_126, rate: 0.002592 },
    published: 9.892242,
    got: beforeTheSteps,
    tolerance: 5e-7,
    unit: "s",
    source: "tai-utc.dat (1968 Feb 1 line)",
    standing: "from memory",
    place: "time: dayNumber; offset and rate are inputs, for UTC before 1972 is refused",
  },
];
