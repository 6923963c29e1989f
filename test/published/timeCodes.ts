import {
  dayNumber,
  defaultLeapSeconds,
  parseInstant,
  readTimeCode,
  secondsBetween,
  type TimeCodeFormat,
  writeTimeCode,
} from "../../src/time/index.ts";
import type { Row } from "./row.ts";

/**
 * The time codes of CCSDS 301.0-B-4. Codes stand here as their octets in hexadecimal, ASCII codes as their characters'
 * numbers: every one must agree.
 */

const table = defaultLeapSeconds;
const utc = (text: string) => parseInstant(text, "UTC", table);
const moment = "2006-01-15T21:24:37.5Z";

const octets = (hexadecimal: string): number[] =>
  (hexadecimal.match(/../g) ?? []).map((pair) => Number.parseInt(pair, 16));
const characters = (text: string): number[] => [...text].map((character) => character.charCodeAt(0));
const code = (format: TimeCodeFormat, text = moment): string => writeTimeCode(utc(text), format, table).timeCode;

const cuc = (coarseOctets: number, fineOctets: number, epoch: string | null = null): TimeCodeFormat => ({
  code: "CUC",
  coarseOctets,
  fineOctets,
  epoch: epoch === null ? null : utc(epoch),
  pField: true,
});
const cds = (dayOctets: 2 | 3, subMillisecondOctets: 0 | 2 | 4, epochDay: number | null = null): TimeCodeFormat => ({
  code: "CDS",
  dayOctets,
  subMillisecondOctets,
  epochDay,
  pField: true,
});
const ccs = (variant: "month-day" | "day-of-year", subsecondOctets: number): TimeCodeFormat => ({
  code: "CCS",
  variant,
  subsecondOctets,
  pField: true,
});
const ascii = (name: "ASCII-A" | "ASCII-B"): TimeCodeFormat => ({ code: name, digits: 1, terminator: true });
const gpsZero = "1980-01-06T00:00:00Z";

/** Julian years from 1958 to the code of all ones and one more. */
function yearsOfCuc(): number {
  const last = readTimeCode("1cffffffff", cuc(4, 0), table);
  const first = { seconds: dayNumber(1958, 1, 1) * 86_400, picoseconds: 0 };
  return (secondsBetween(first, last) + 1) / (365.25 * 86_400);
}

/** Microseconds between two neighbouring codes. */
function stepOfCuc(): number {
  const [a, b] = ["1e5a5d1c360000", "1e5a5d1c360001"].map((text) => readTimeCode(text, cuc(4, 2), table));
  return secondsBetween(a!, b!) * 1e6;
}

const place = "time: writeTimeCode";
const edition = "CCSDS 301.0-B-4 (Nov 2010)";

const coded = (id: string, what: string, section: string, published: string, got: () => string): Row => ({
  id,
  what,
  inputs: { utc: moment },
  published: octets(published),
  got: () => octets(got()),
  tolerance: 0,
  unit: "octets",
  source: `${edition} ${section}`,
  standing: "derived",
  place,
  note: `${published}, built from the standard's layout`,
});

export const timeCodes: readonly Row[] = [
  {
    id: "C01",
    what: "days from 1958-01-01 to 1970-01-01",
    inputs: {},
    published: 4383,
    got: () => dayNumber(1970, 1, 1) - dayNumber(1958, 1, 1),
    tolerance: 0,
    unit: "d",
    source: `${edition} epoch`,
    standing: "read",
    place: "time: dayNumber",
  },
  coded("C02", "CUC P-fields: 4+0, 4+2, 4+3, level 2 4+2", "3.2.2", "1c1e1f2e", () =>
    [cuc(4, 0), cuc(4, 2), cuc(4, 3), cuc(4, 2, gpsZero)].map((format) => code(format).slice(0, 2)).join(""),
  ),
  coded("C03", "CUC 4+2", "3.2", "1e5a5d1c368000", () => code(cuc(4, 2))),
  coded(
    "C04",
    "CUC 5+4, P-field of two octets",
    "3.2.2 (octet 2: ext, 2 bits extra coarse, 3 bits extra fine, 2 reserved)",
    "9f24005a5d1c3680000000",
    () => code(cuc(5, 4)),
  ),
  coded("C05", "CDS, 16-bit day, milliseconds", "3.3", "40448a04981bfc", () => code(cds(2, 0))),
  coded(
    "C06",
    "CDS with microseconds, with picoseconds",
    "3.3",
    "41448a04981bfc007b42448a04981bfc075bcd15",
    () => code(cds(2, 2), "2006-01-15T21:24:37.500123Z") + code(cds(2, 4), "2006-01-15T21:24:37.500123456789Z"),
  ),
  coded("C08", "CDS P-fields: 24-bit day, own epoch", "3.3.2", "4448", () =>
    [cds(3, 0), cds(2, 0, dayNumber(2000, 1, 1))].map((format) => code(format).slice(0, 2)).join(""),
  ),
  coded("C09", "CCS by month, one subsecond octet", "3.4", "512006011521243750", () => code(ccs("month-day", 1))),
  coded("C10", "CCS by day of year", "3.4", "5820060015212437", () => code(ccs("day-of-year", 0))),
  {
    id: "C11",
    what: "ASCII codes A and B",
    inputs: { utc: moment },
    published: characters("2006-01-15T21:24:37.5Z2006-015T21:24:37.5Z"),
    got: () => characters(code(ascii("ASCII-A")) + code(ascii("ASCII-B"))),
    tolerance: 0,
    unit: "characters",
    source: `${edition} 3.5.1`,
    standing: "derived",
    place,
  },
  {
    id: "C12",
    what: "CUC: range of 4 octets, step of 2 fine ones",
    inputs: {},
    published: [136.1, 15.26],
    got: () => [yearsOfCuc(), stepOfCuc()],
    tolerance: 0.05,
    unit: "yr, us",
    source: edition,
    standing: "read",
    place: "time: writeTimeCode, readTimeCode",
  },
  coded("C13", "CUC 4+3 since the zero of GPS time (level 2)", "3.2 level 2", "2f30f58023800000", () =>
    code(cuc(4, 3, gpsZero)),
  ),
];
