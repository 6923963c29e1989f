import { geodeticToFixed } from "../../src/bodies/index.ts";
import {
  defaultLeapSeconds,
  formatInstant,
  parseInstant,
  type Scale,
  tdbMinusTt,
  topocentricTdbMinusTt,
} from "../../src/time/index.ts";
import { C2, DEGREE, GM_EARTH, LB, LG } from "../../src/units/index.ts";
import type { Row } from "./row.ts";

const table = defaultLeapSeconds;
const day = 86_400_000_000_000_000n;

/** A text in one scale as text in another. */
const inScale = (text: string, from: Scale, to: Scale): string =>
  formatInstant(parseInstant(text, from, table), to, table);

/** Picoseconds of the day of a text, exact. */
function picosecondsOfDay(text: string): bigint {
  const [, hour, minute, second, decimals] = /T(\d\d):(\d\d):(\d\d)\.(\d{12})/.exec(text)!;
  const seconds = BigInt(hour!) * 3600n + BigInt(minute!) * 60n + BigInt(second!);
  return seconds * 1_000_000_000_000n + BigInt(decimals!);
}

/** A part of 2006-01-15 (JD 2453750.5), nine decimals of a day, in one scale to the part of the day in another. */
function fractionIn(billionths: number, from: Scale, to: Scale): number {
  const ps = (BigInt(billionths) * day) / 1_000_000_000n;
  const seconds = ps / 1_000_000_000_000n;
  const two = (n: bigint): string => String(n).padStart(2, "0");
  const time = `${two(seconds / 3600n)}:${two((seconds / 60n) % 60n)}:${two(seconds % 60n)}`;
  const decimals = String(ps % 1_000_000_000_000n).padStart(12, "0");
  const text = inScale(`2006-01-15T${time}.${decimals}${from === "UTC" ? "Z" : ""}`, from, to);
  return Number(picosecondsOfDay(text)) / Number(day);
}

const secondsPast = (text: string, hour: number, minute: number): number =>
  Number(picosecondsOfDay(text) - BigInt(hour * 3600 + minute * 60) * 1_000_000_000_000n) / 1e12;

/** UTC of the worked example in a scale, seconds past 21:25:00. */
const example = (scale: Scale): number => secondsPast(inScale("2006-01-15T21:24:37.5Z", "UTC", scale), 21, 25);

/** Julian millennia from J2000.0 of a Julian date in two parts. */
const millennia = (whole: number, part: number): number => (whole - 2_451_545 + part) / 365_250;

/** The site of the worked example, 19 28 52.5 north, 155 55 59.6 west, height 0. */
function exampleTdb(): number {
  const [longitude, latitude] = [-(155 + 55 / 60 + 59.6 / 3600) * DEGREE, (19 + 28 / 60 + 52.5 / 3600) * DEGREE];
  const [x, y, z] = geodeticToFixed(latitude, longitude, 0);
  const ut1 = (21 * 3600 + 24 * 60 + 37.5 + 0.3341) / 86_400;
  const place = { longitude, axisDistance: Math.hypot(x!, y!), equatorDistance: z! };
  return example("TDB") + topocentricTdbMinusTt(millennia(2_453_750.5, 0.892_855_139), ut1, place);
}

/** How much more a scale counts than another in a Julian year from 2000-01-01T12:00:00 TT, s. */
function yearlyGain(scale: Scale, against: Scale): number {
  const ahead = (text: string): number => {
    const [a, b] = [scale, against].map((name) => inScale(text, "TT", name));
    return Number(picosecondsOfDay(a!) - picosecondsOfDay(b!)) / 1e12;
  };
  return ahead("2000-12-31T18:00:00") - ahead("2000-01-01T12:00:00");
}

/** TDB - TCB when TCB reads 1977-01-01T00:00:32.184, s. */
function originGap(): number {
  const text = "1977-01-01T00:00:32.184000000000";
  return Number(picosecondsOfDay(inScale(text, "TCB", "TDB")) - picosecondsOfDay(text)) / 1e12;
}

const estimates = "IAU NSFA current best estimates / defining constants list (IAU 2009 system)";
const worked =
  'SOFA Time Scale and Calendar Tools, sec. "Examples" (UTC 2006/01/15 21:24:37.5, lat +19 28 52.5, lon W155 55 59.6, DUT1 +0.3341)';
const workedInputs = { utc: "2006-01-15T21:24:37.5", site: "19.48125 N 155.933222 W h=0", dut1: 0.3341 };

const worked4 = (id: string, scale: Scale, published: number, got: () => number): Row => ({
  id,
  what: `worked example: ${scale} seconds past 21:25:00`,
  inputs: workedInputs,
  published,
  got,
  tolerance: 6e-7,
  unit: "s",
  source: worked,
  standing: "read",
  place: "time: parseInstant, formatInstant",
});

const vector = (id: string, routine: string, from: Scale, to: Scale, billionths: number, published: number): Row => ({
  id,
  what: `${from} to ${to}, part of the day`,
  inputs: { [from.toLowerCase()]: [2_453_750.5, billionths / 1e9] },
  published,
  got: () => fractionIn(billionths, from, to),
  tolerance: 1e-12,
  unit: "d",
  source: `ERFA ${routine} test`,
  standing: "read",
  place: "time: parseInstant, formatInstant",
});

/** Zero of a navigation system's scale in UTC, as seconds of the UTC day. */
const zeroInUtc = (text: string, scale: Scale): number => Number(picosecondsOfDay(inScale(text, scale, "UTC"))) / 1e12;

/** Scales that tick at rates of their own, those of the navigation systems, and the constants between them. */
export const coordinateTimes: readonly Row[] = [
  {
    id: "K03",
    what: "L_G, if taken from the potential of 2015 instead",
    inputs: { W0_old: 62_636_856, W0_new: 62_636_853.4 },
    published: 2.9e-17,
    got: () => 62_636_856 / C2 - 62_636_853.4 / C2,
    tolerance: 5e-19,
    unit: "1",
    source: "IAG 2015 Res. 1; NSFA list W0=62636853.4",
    standing: "derived",
    place: "units: C2",
    note: "Why L_G is never computed again: 2.5 ps a day.",
  },
  {
    id: "K04",
    what: "L_B as L_C + L_G - L_C L_G",
    inputs: { L_C: 1.48082686741e-8, L_G: 6.969290134e-10 },
    published: 1.550519768e-8,
    got: () => 1.48082686741e-8 + LG - 1.48082686741e-8 * LG,
    tolerance: 5e-18,
    unit: "1",
    source: "IAU 2006 Res. B3; NSFA (L_C=1.48082686741e-8)",
    standing: "read",
    place: "units: LG; the constant in use is row T18",
  },
  {
    id: "K06",
    what: "TDB-compatible GM of the Earth, GM (1 - L_B)",
    inputs: { GM: 3.986004418e14 },
    published: 398_600_435_600_000,
    got: () => GM_EARTH * (1 - LB),
    tolerance: 5e7,
    unit: "m3/s2",
    source: estimates,
    standing: "read",
    place: "units: GM_EARTH, LB",
  },
  {
    id: "K07",
    what: "TDB-compatible GM of the Sun, GM (1 - L_B)",
    inputs: { GMS: 1.32712442099e20 },
    published: 1.32712440041e20,
    got: () => 1.32712442099e20 * (1 - LB),
    tolerance: 5e8,
    unit: "m3/s2",
    source: estimates,
    standing: "read",
    place: "units: LB",
  },
  {
    id: "T18",
    what: "L_B and TDB0 as used",
    inputs: {},
    published: [1.550519768e-8, -6.55e-5],
    got: () => [LB, originGap()],
    tolerance: [0, 1e-12],
    unit: "1, s",
    source: "IAU 2006 Res. B3",
    standing: "read",
    place: "units: LB; time: parseInstant in TCB, formatInstant in TDB",
  },
  {
    id: "T01",
    what: "TDB - TT at a place, 787 terms",
    inputs: { jd: [2_448_939.5, 0.123], ut: 0.76543, elong_rad: 5.0123, u_km: 5525.242, v_km: 3190 },
    published: -0.001280368005936999,
    got: () => {
      const t = millennia(2_448_939.5, 0.123);
      const place = { longitude: 5.0123, axisDistance: 5_525_242, equatorDistance: 3_190_000 };
      return tdbMinusTt(t) + topocentricTdbMinusTt(t, 0.76543, place);
    },
    tolerance: 1e-15,
    unit: "s",
    source: "ERFA/SOFA eraDtdb test vector",
    standing: "read",
    place: "time: tdbMinusTt, topocentricTdbMinusTt",
  },
  worked4("T02a", "TAI", 10.5, () => example("TAI")),
  worked4("T02b", "TT", 42.684, () => example("TT")),
  worked4("T02c", "TCG", 43.32269, () => example("TCG")),
  worked4("T02d", "TDB", 42.684373, exampleTdb),
  vector("T03", "eraTttcg", "TT", "TCG", 892_482_639, 0.8924900312508587),
  vector("T04", "eraTcgtt", "TCG", "TT", 892_862_531, 0.8928551387488817),
  vector("T05", "eraTcbtdb", "TCB", "TDB", 893_019_599, 0.8928551362746343),
  vector("T06", "eraTdbtcb", "TDB", "TCB", 892_855_137, 0.8930195997253657),
  vector("T07", "eraTaitt", "TAI", "TT", 892_482_639, 0.892855139),
  vector("T08", "eraTaiutc", "TAI", "UTC", 892_482_639, 0.8921006945555555),
  vector("T09", "eraUtctai", "UTC", "TAI", 892_100_694, 0.8924826384444444),
  {
    id: "T11",
    what: "GPS time of UTC 16:43:00, TAI - UTC 32 s",
    inputs: { utc: "16:43:00", dat: 32 },
    published: 13,
    got: () => secondsPast(inScale("2004-05-14T16:43:00Z", "UTC", "GPS"), 16, 43),
    tolerance: 0,
    unit: "s past 16:43:00",
    source: "Vallado, Fundamentals of Astrodynamics and Applications 5th ed. Ex. 3-7",
    standing: "read",
    place: "time: parseInstant in UTC, formatInstant in GPS",
  },
  {
    id: "T14",
    what: "TCB - TDB, gain in a Julian year",
    inputs: {},
    published: 0.4893,
    got: () => yearlyGain("TCB", "TDB"),
    tolerance: 5e-5,
    unit: "s/yr",
    source: 'USNO Circ. 179 ("about 0.49 s/yr")',
    standing: "from memory",
    place: "time: formatInstant in TCB and TDB",
  },
  {
    id: "T15",
    what: "TCG - TT, gain in a Julian year",
    inputs: {},
    published: 22,
    got: () => yearlyGain("TCG", "TT") * 1e3,
    tolerance: 0.05,
    unit: "ms/yr",
    source: "IERS Conv. ch.10 (22 ms/yr)",
    standing: "from memory",
    place: "time: formatInstant in TCG and TT",
  },
  {
    id: "T19",
    what: "zero of Galileo system time in UTC",
    inputs: { gst: "1999-08-22T00:00:00" },
    published: 86_387,
    got: () => zeroInUtc("1999-08-22T00:00:00", "GST"),
    tolerance: 0,
    unit: "s of 1999-08-21",
    source: "Galileo OS SIS ICD 5.1.2: 13 s before midnight",
    standing: "from memory",
    place: "time: parseInstant in GST",
  },
  {
    id: "T20",
    what: "zero of BeiDou time in UTC",
    inputs: { bdt: "2006-01-01T00:00:00" },
    published: 0,
    got: () => zeroInUtc("2006-01-01T00:00:00", "BDT"),
    tolerance: 0,
    unit: "s of 2006-01-01",
    source: "BDS-SIS-ICD 3.3: 00:00:00 on 1 January 2006 UTC",
    standing: "from memory",
    place: "time: parseInstant in BDT",
  },
  {
    id: "T21",
    what: "GLONASS time - UTC",
    inputs: { utc: "2026-03-01T12:00:00Z" },
    published: 10_800,
    got: () => Number(picosecondsOfDay(inScale("2026-03-01T12:00:00Z", "UTC", "GLONASS"))) / 1e12 - 43_200,
    tolerance: 0,
    unit: "s",
    source: "GLONASS ICD 5.1 (2008), 3.3.3: UTC(SU) + 3 h, with leap seconds",
    standing: "from memory",
    place: "time: formatInstant in GLONASS",
  },
];
