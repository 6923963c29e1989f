import { invariant } from "../problem/index.ts";
import { broken, type MessageEpoch, type ReadMessage, Remarks } from "./message.ts";
import { Columns, columns, type ElementNumber, type Field, lineChecksum, prepared } from "./tleColumns.ts";

/**
 * Two-line elements. Columns, implied points and exponents, checksum and the turn of the century (57 to 99 are 19xx, 00 to
 * 56 are 20xx): common practice, no source (described in Hoots and Roehrich 1980, Spacetrack Report 3, and in AIAA 2006-6753,
 * appendix). Catalogue numbers beyond 99 999 begin with a letter, I and O left out: common practice, no source.
 */

/** Elements are mean elements of SGP4, in TEME of the epoch's date. */
export interface Tle {
  /** "25544", "  837" as "837", "T0005" is 270 005. */
  readonly catalogueNumber: ElementNumber;
  /** "U", "C", "S"; "" when its column is blank. */
  readonly classification: string;
  /** International designator, "98067A"; "" when blank. */
  readonly designator: string;
  /** As the columns have it: year of two digits and day of year. */
  readonly epochColumns: string;
  /** The same, exactly, as day of year and time of day, UTC. */
  readonly epoch: MessageEpoch;
  /** Half of the first derivative, as the line has it. */
  readonly meanMotionDotRevPerDay2: ElementNumber;
  /** A sixth of the second derivative, as the line has it. */
  readonly meanMotionDdotRevPerDay3: ElementNumber;
  readonly bstarPerEarthRadius: ElementNumber;
  /** A blank column is 0. */
  readonly ephemerisType: ElementNumber;
  /** Blank columns are 0. */
  readonly elementSetNumber: ElementNumber;
  readonly inclinationDeg: ElementNumber;
  readonly ascendingNodeDeg: ElementNumber;
  readonly eccentricity: ElementNumber;
  readonly pericentreArgumentDeg: ElementNumber;
  readonly meanAnomalyDeg: ElementNumber;
  readonly meanMotionRevPerDay: ElementNumber;
  /** Blank columns are 0. */
  readonly revolutionAtEpoch: ElementNumber;
}

/**
 * Reads two lines. Trailing blanks, line ends and a byte-order mark are let pass; small letters with a remark.
 * Errors: invalid-message with the place ["line1"] or ["line2"], naming the columns: wrong checksum (both digits), lines
 * swapped, two catalogue numbers, tabs, a number that is none, text behind column 69.
 */
export function parseTle(line1: string, line2: string): ReadMessage<Tle> {
  const remarks = new Remarks();
  const start1 = line1.charCodeAt(0) === 0xfeff ? line1[1] : line1[0];
  if (start1 === "2" && line2.startsWith("1")) {
    throw broken("TLE, line 1", line1, "the line that begins with 1: the two lines are swapped", ["line1"]);
  }
  const first = new Columns(prepared(line1, 1, remarks), 1);
  const second = new Columns(prepared(line2, 2, remarks), 2);
  const catalogueNumber = first.catalogueNumber();
  const again = second.catalogueNumber();
  if (again.value !== catalogueNumber.value) {
    throw second.refuse("catalogueNumber", `the catalogue number of line 1 (${catalogueNumber.text})`);
  }
  const classification = first.raw("classification").trim();
  if (!/^[A-Z]?$/.test(classification)) throw first.refuse("classification", "a letter or a blank");
  const any = () => true;
  const angle = (value: number) => value >= 0 && value <= 360;
  const angleExpected = "an angle from 0 to 360 with a decimal point (deg)";
  const message: Tle = {
    catalogueNumber,
    classification,
    designator: first.raw("designator").trimEnd(),
    ...first.epoch(),
    meanMotionDotRevPerDay2: first.decimal("meanMotionDotRevPerDay2", "a number with a decimal point", any),
    meanMotionDdotRevPerDay3: first.exponential("meanMotionDdotRevPerDay3"),
    bstarPerEarthRadius: first.exponential("bstarPerEarthRadius"),
    ephemerisType: first.whole("ephemerisType", true),
    elementSetNumber: first.whole("elementSetNumber", true),
    inclinationDeg: second.decimal(
      "inclinationDeg",
      "an angle from 0 to 180 with a decimal point (deg)",
      (value) => value >= 0 && value <= 180,
    ),
    ascendingNodeDeg: second.decimal("ascendingNodeDeg", angleExpected, angle),
    eccentricity: second.eccentricity(),
    pericentreArgumentDeg: second.decimal("pericentreArgumentDeg", angleExpected, angle),
    meanAnomalyDeg: second.decimal("meanAnomalyDeg", angleExpected, angle),
    meanMotionRevPerDay: second.decimal(
      "meanMotionRevPerDay",
      "a number above 0 with a decimal point (revolutions a day)",
      (value) => value > 0,
    ),
    revolutionAtEpoch: second.whole("revolutionAtEpoch", true),
  };
  return { message, remarks: remarks.list };
}

/** The two lines of a record, each of 69 columns with its checksum; parseTle reads them back to an equal record. */
export function writeTle(tle: Tle): { line1: string; line2: string } {
  const line1 = assembled("1", [
    ["catalogueNumber", tle.catalogueNumber.text],
    ["classification", tle.classification],
    ["designator", tle.designator.padEnd(8)],
    ["epochColumns", tle.epochColumns.padEnd(14)],
    ["meanMotionDotRevPerDay2", tle.meanMotionDotRevPerDay2.text],
    ["meanMotionDdotRevPerDay3", tle.meanMotionDdotRevPerDay3.text],
    ["bstarPerEarthRadius", tle.bstarPerEarthRadius.text],
    ["ephemerisType", tle.ephemerisType.text],
    ["elementSetNumber", tle.elementSetNumber.text],
  ]);
  const line2 = assembled("2", [
    ["catalogueNumber", tle.catalogueNumber.text],
    ["inclinationDeg", tle.inclinationDeg.text],
    ["ascendingNodeDeg", tle.ascendingNodeDeg.text],
    ["eccentricity", tle.eccentricity.text],
    ["pericentreArgumentDeg", tle.pericentreArgumentDeg.text],
    ["meanAnomalyDeg", tle.meanAnomalyDeg.text],
    ["meanMotionRevPerDay", tle.meanMotionRevPerDay.text],
    ["revolutionAtEpoch", tle.revolutionAtEpoch.text],
  ]);
  return { line1, line2 };
}

function assembled(number: string, fields: readonly (readonly [Field, string])[]): string {
  let line = number;
  for (const [field, text] of fields) {
    const [first, last] = columns[field];
    invariant(text.length <= last - first + 1, `${field} fits its columns`);
    line = line.padEnd(first - 1) + text.padStart(last - first + 1);
  }
  const full = line.padEnd(68);
  return `${full}${lineChecksum(full)}`;
}
