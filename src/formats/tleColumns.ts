import { dayNumber } from "../time/index.ts";
import { broken, type MessageEpoch, type Remarks } from "./message.ts";
import { isAscii, readNumber } from "./values.ts";

/**
 * The columns of two-line elements: where each field stands and how its characters are read.
 * Source: common practice, no source (described in Hoots and Roehrich 1980, Spacetrack Report 3, and in AIAA 2006-6753).
 */

/** A number as its columns have it, and its value. */
export interface ElementNumber {
  /** Without the blanks around it; an implied point is not in it. */
  readonly text: string;
  readonly value: number;
}

/** Columns of the fields, counted from 1, both ends included. */
export const columns = {
  catalogueNumber: [3, 7],
  classification: [8, 8],
  designator: [10, 17],
  epochColumns: [19, 32],
  meanMotionDotRevPerDay2: [34, 43],
  meanMotionDdotRevPerDay3: [45, 52],
  bstarPerEarthRadius: [54, 61],
  ephemerisType: [63, 63],
  elementSetNumber: [65, 68],
  inclinationDeg: [9, 16],
  ascendingNodeDeg: [18, 25],
  eccentricity: [27, 33],
  pericentreArgumentDeg: [35, 42],
  meanAnomalyDeg: [44, 51],
  meanMotionRevPerDay: [53, 63],
  revolutionAtEpoch: [64, 68],
} as const;

export type Field = keyof typeof columns;

const blankColumns = { 1: [2, 9, 18, 33, 44, 53, 62, 64], 2: [2, 8, 17, 26, 34, 43, 52] } as const;

/** The last digit of a line: the sum of its digits, a minus sign counting 1, modulo 10. */
export function lineChecksum(line: string): number {
  let sum = 0;
  for (let i = 0; i < 68; i++) {
    const code = line.charCodeAt(i);
    if (code >= 0x30 && code <= 0x39) sum += code - 0x30;
    else if (code === 0x2d) sum += 1;
  }
  return sum % 10;
}

/** A line ready for its columns. Errors: invalid-message, naming the line and the column. */
export function prepared(raw: string, which: 1 | 2, remarks: Remarks): string {
  const where = `TLE, line ${which}`;
  const place = [`line${which}`];
  const line = (raw.charCodeAt(0) === 0xfeff ? raw.slice(1) : raw).trimEnd();
  const tab = line.indexOf("\t");
  if (tab >= 0) throw broken(`${where}, column ${tab + 1}`, "\t", "blanks instead of a tab: the columns count", place);
  if (!isAscii(line)) throw broken(where, line, "ASCII characters only", place);
  if (line[0] !== `${which}`) throw broken(where, line, `the line that begins with ${which}`, place);
  if (line.length !== 69) {
    const sum = line.length === 68 ? `; the checksum is missing, it would be ${lineChecksum(line)}` : "";
    throw broken(where, line, `69 characters; there are ${line.length}${sum}`, place);
  }
  for (const column of blankColumns[which]) {
    if (line[column - 1] !== " ") throw broken(`${where}, column ${column}`, line[column - 1]!, "a blank", place);
  }
  const computed = lineChecksum(line);
  if (line[68] !== `${computed}`) {
    throw broken(`${where}, column 69`, line[68]!, `the checksum ${computed} of this line`, place);
  }
  const upper = line.toUpperCase();
  if (upper !== line) remarks.add(`${where}: small letters were read as capital ones.`);
  return upper;
}

/** Reads the fields of a prepared line. */
export class Columns {
  private readonly line: string;
  private readonly which: 1 | 2;

  constructor(line: string, which: 1 | 2) {
    this.line = line;
    this.which = which;
  }

  raw(field: Field): string {
    const [first, last] = columns[field];
    return this.line.slice(first - 1, last);
  }

  refuse(field: Field, expected: string): Error {
    const [first, last] = columns[field];
    const where = `TLE, line ${this.which}, columns ${first} to ${last}`;
    return broken(where, this.raw(field), expected, [`line${this.which}`]);
  }

  /** A number with a decimal point. */
  decimal(field: Field, expected: string, test: (value: number) => boolean): ElementNumber {
    const text = this.raw(field).trim();
    const value = /^[+-]?\d*\.\d*$/.test(text) ? readNumber(text) : null;
    if (value === null || !test(value)) throw this.refuse(field, expected);
    return { text, value };
  }

  /** Digits without sign or point; blanks are 0 where they may be. */
  whole(field: Field, mayBeBlank: boolean): ElementNumber {
    const text = this.raw(field).trim();
    if (text === "" && mayBeBlank) return { text, value: 0 };
    if (!/^\d+$/.test(text)) throw this.refuse(field, "a whole number, with blanks or zeros before it");
    return { text, value: Number(text) };
  }

  /** Sign, five digits after an implied point, sign and digit of a power of ten: "-11606-4" is -0.11606e-4. */
  exponential(field: Field): ElementNumber {
    const raw = this.raw(field);
    const m = /^([ +-])( *)(\d+)([ +-])(\d)$/.exec(raw);
    if (!m || m[2]!.length + m[3]!.length !== 5) {
      throw this.refuse(
        field,
        'sign, five digits, sign and digit of the power of ten, such as "-11606-4" or " 00000+0"',
      );
    }
    const sign = m[1] === "-" ? "-" : "";
    const power = m[4] === "-" ? "-" : "";
    return { text: raw.trim(), value: Number(`${sign}0.${m[3]!.padStart(5, "0")}e${power}${m[5]}`) };
  }

  /** Seven digits after an implied point. */
  eccentricity(): ElementNumber {
    const raw = this.raw("eccentricity");
    if (!/^ *\d+$/.test(raw)) throw this.refuse("eccentricity", "seven digits, without the point before them");
    return { text: raw.trim(), value: Number(`0.${raw.trim().padStart(7, "0")}`) };
  }

  catalogueNumber(): ElementNumber {
    const text = this.raw("catalogueNumber").trim();
    const m = /^(?:\d{1,5}|([A-HJ-NP-Z])(\d{4}))$/.exec(text);
    if (!m) throw this.refuse("catalogueNumber", "digits, or a letter other than I and O and four digits");
    const letter = m[1];
    if (letter === undefined) return { text, value: Number(text) };
    return { text, value: ("ABCDEFGHJKLMNPQRSTUVWXYZ".indexOf(letter) + 10) * 10_000 + Number(m[2]) };
  }

  epoch(): { epochColumns: string; epoch: MessageEpoch } {
    const raw = this.raw("epochColumns");
    const m = /^(\d\d)([ \d]{2}\d)\.(\d{1,8}) *$/.exec(raw);
    if (!m)
      throw this.refuse("epochColumns", "two digits of the year, a day of year, a point and up to eight decimals");
    const short = Number(m[1]);
    const year = short < 57 ? 2000 + short : 1900 + short;
    const day = Number(m[2]!.replaceAll(" ", "0"));
    const last = dayNumber(year + 1, 1, 1) - dayNumber(year, 1, 1);
    if (day < 1 || day > last) throw this.refuse("epochColumns", `a day of year from 1 to ${last} in ${year}`);
    // A hundred-millionth of a day is 864 microseconds, so that six decimals of a second are exact.
    const microseconds = Number(m[3]!.padEnd(8, "0")) * 864;
    const second = Math.floor(microseconds / 1e6);
    const two = (n: number): string => String(n).padStart(2, "0");
    const time = `${two(Math.floor(second / 3600))}:${two(Math.floor(second / 60) % 60)}:${two(second % 60)}`;
    const decimals = String(microseconds % 1e6).padStart(6, "0");
    const text = `${year}-${String(day).padStart(3, "0")}T${time}.${decimals}`;
    return { epochColumns: raw.trimEnd(), epoch: { text, timeSystem: "UTC" } };
  }
}
