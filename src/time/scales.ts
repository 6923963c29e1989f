import { Problem } from "../problem/index.ts";
import { calendarDate, dayNumber, daysInMonth, isLeapYear } from "./calendar.ts";
import { type CoordinateTime, coordinateTimeMinusTt, instantOfCoordinateTime, shifted } from "./coordinateTimes.ts";
import type { Instant } from "./instant.ts";
import type { LeapSecondTable } from "./leapSeconds.ts";

/** Time scales in which an instant can be written. */
export const scales = ["UTC", "TAI", "TT", "TCG", "TDB", "TCB", "GPS", "GST", "BDT", "GLONASS"] as const;
export type Scale = (typeof scales)[number];

interface Offset {
  readonly seconds: number;
  readonly picoseconds: number;
}

const ttMinusTai: Offset = { seconds: 32, picoseconds: 184_000_000_000 };

/**
 * Scale - TAI for the scales that keep a fixed distance: whole seconds and picoseconds. The navigation systems' by their
 * integer rules. The coordinate times stand here with the part that is as that of TT.
 * Source: IAU 1991 Resolution A4 (TT), IS-GPS-200 20.3.3.5.2.4 (GPS), Galileo OS SIS ICD 5.1.2 (GST) and BDS-SIS-ICD 3.3
 * (BDT), the sections of the last two from memory.
 */
const fixedOffsets: Readonly<Record<Exclude<Scale, "UTC" | "GLONASS">, Offset>> = {
  TAI: { seconds: 0, picoseconds: 0 },
  TT: ttMinusTai,
  TCG: ttMinusTai,
  TDB: ttMinusTai,
  TCB: ttMinusTai,
  GPS: { seconds: -19, picoseconds: 0 },
  GST: { seconds: -19, picoseconds: 0 },
  BDT: { seconds: -33, picoseconds: 0 },
};

const isCoordinateTime = (scale: Scale): scale is CoordinateTime =>
  scale === "TDB" || scale === "TCB" || scale === "TCG";

/** GLONASS time - UTC, s: Moscow's standard time, leap seconds included. Source: GLONASS ICD 5.1 (2008), 3.3.3, from memory. */
const glonassMinusUtc = 10_800;

const firstDay = dayNumber(1972, 1, 1);
const afterLastDay = dayNumber(2101, 1, 1);

const shape = /^(\d{4})-(?:(\d{2})-(\d{2})|(\d{3}))T(\d{2}):(\d{2}):(\d{2})(?:\.(\d+))?(Z?)$/;

function unreadable(received: unknown, expected: string): Problem {
  return new Problem("invalid-instant", `"${String(received).slice(0, 80)}" cannot be read: ${expected}.`, [
    { place: [], received, expected },
  ]);
}

/** What is wrong with a text that has not the shape of an instant. */
function whyNotAnInstant(text: string, scale: Scale): string {
  if (/^\d{4}-(\d{2}-\d{2}|\d{3})$/.test(text)) return "a time of day as well, for example T00:00:00Z";
  if (/[+-]\d{2}:?\d{2}$/.test(text) && /T/.test(text))
    return "UTC, ending in Z, instead of a local time with an offset";
  if (/^\d{4}-\d{2}-\d{2} /.test(text)) return 'the letter "T" between date and time';
  if (/T\d{2}:\d{2}Z?$/.test(text)) return "seconds as well, for example T12:00:00Z";
  if (/\d,\d/.test(text)) return "a decimal point, not a comma";
  if (/[tz]/.test(text) && shape.test(text.toUpperCase())) return 'capital letters "T" and "Z"';
  return scale === "UTC"
    ? "ISO 8601 with up to 12 decimals and Z, for example 2026-03-01T00:00:00.5Z or 2026-060T00:00:00Z"
    : "ISO 8601 with up to 12 decimals and no Z, for example 2026-03-01T00:00:37";
}

/** Day numbers of the first of each month, 1972 to 2100 and one more. */
const monthStarts = Int32Array.from({ length: 12 * 129 + 1 }, (_, i) =>
  dayNumber(1972 + Math.floor(i / 12), 1 + (i % 12), 1),
);

const powersOfTen = Float64Array.from({ length: 13 }, (_, i) => Number(`1e${i}`));

/**
 * A UTC text of the usual shape, YYYY-MM-DDTHH:MM:SS with up to 12 decimals and Z, by its character codes. Null for all
 * that needs a closer look: what is wrong, other shapes, and the last second of a day.
 */
function readUsualUtc(text: string, leapSeconds: LeapSecondTable): Instant | null {
  const end = text.length - 1;
  if (!(end >= 19 && end <= 32) || end === 20 || text.charCodeAt(end) !== 90) return null;
  if (text.charCodeAt(4) !== 45 || text.charCodeAt(7) !== 45 || text.charCodeAt(10) !== 84) return null;
  if (text.charCodeAt(13) !== 58 || text.charCodeAt(16) !== 58) return null;
  const y3 = text.charCodeAt(0) - 48;
  const y2 = text.charCodeAt(1) - 48;
  const y1 = text.charCodeAt(2) - 48;
  const y0 = text.charCodeAt(3) - 48;
  const m1 = text.charCodeAt(5) - 48;
  const m0 = text.charCodeAt(6) - 48;
  const d1 = text.charCodeAt(8) - 48;
  const d0 = text.charCodeAt(9) - 48;
  const h1 = text.charCodeAt(11) - 48;
  const h0 = text.charCodeAt(12) - 48;
  const n1 = text.charCodeAt(14) - 48;
  const n0 = text.charCodeAt(15) - 48;
  const s1 = text.charCodeAt(17) - 48;
  const s0 = text.charCodeAt(18) - 48;
  // The sign bit of d | 9 - d is set where d is no digit.
  let bad = y3 | (9 - y3) | y2 | (9 - y2) | y1 | (9 - y1) | y0 | (9 - y0) | m1 | (9 - m1) | m0 | (9 - m0);
  bad |= d1 | (9 - d1) | d0 | (9 - d0) | h1 | (9 - h1) | h0 | (9 - h0);
  bad |= n1 | (9 - n1) | n0 | (9 - n0) | s1 | (9 - s1) | s0 | (9 - s0);
  let picoseconds = 0;
  if (end > 20) {
    if (text.charCodeAt(19) !== 46) return null;
    // Two halves of at most six digits, so that each is a small integer.
    let upper = 0;
    let lower = 0;
    const middle = Math.min(end, 26);
    for (let i = 20; i < middle; i++) {
      const digit = text.charCodeAt(i) - 48;
      bad |= digit | (9 - digit);
      upper = 10 * upper + digit;
    }
    for (let i = middle; i < end; i++) {
      const digit = text.charCodeAt(i) - 48;
      bad |= digit | (9 - digit);
      lower = 10 * lower + digit;
    }
    picoseconds = upper * powersOfTen[32 - middle]! + lower * powersOfTen[32 - end]!;
  }
  const year = 1000 * y3 + 100 * y2 + 10 * y1 + y0;
  const month = 10 * m1 + m0;
  const hour = 10 * h1 + h0;
  const minute = 10 * n1 + n0;
  const second = 10 * s1 + s0;
  if (bad < 0 || year < 1972 || year > 2100 || month < 1 || month > 12) return null;
  if (hour > 23 || minute > 59 || second > 59) return null;
  const dayOfMonth = 10 * d1 + d0;
  const monthIndex = 12 * (year - 1972) + month - 1;
  const day = monthStarts[monthIndex]! + dayOfMonth - 1;
  if (dayOfMonth < 1 || day >= monthStarts[monthIndex + 1]!) return null;
  const secondOfDay = 3600 * hour + 60 * minute + second;
  // Whether 23:59:59 existed is for the leap-second table to say.
  if (secondOfDay === 86_399) return null;
  return { seconds: day * 86_400 + secondOfDay + leapSeconds.offsetOnDay(day), picoseconds };
}

/**
 * Reads ISO 8601, calendar date or day of year, up to 12 decimals, in the given scale. UTC ends in Z, other scales have
 * no suffix. 23:59:60 is read where the table has a leap second; in GLONASS time it is 02:59:60 of the next day.
 * Accuracy: to the picosecond; TDB and TCB are those of the geocentre, by the series of tdbMinusTt.
 * Errors: invalid-instant (shape, day, time that never was), instant-out-of-range (before 1972 or after 2100).
 */
export function parseInstant(text: string, scale: Scale, leapSeconds: LeapSecondTable): Instant {
  return (scale === "UTC" ? readUsualUtc(text, leapSeconds) : null) ?? parseAnyInstant(text, scale, leapSeconds);
}

/** The same without the short way for usual texts. */
export function parseAnyInstant(text: string, scale: Scale, leapSeconds: LeapSecondTable): Instant {
  const m = shape.exec(text);
  if (!m) throw unreadable(text, whyNotAnInstant(text, scale));
  const [, yearText, monthText, dayText, ordinalText, hourText, minuteText, secondText, decimals = "", suffix] = m;
  if (scale === "UTC" && suffix !== "Z") {
    throw unreadable(text, 'Z at the end for UTC, or { "at": ..., "scale": ... } for another scale');
  }
  if (scale !== "UTC" && suffix === "Z") throw unreadable(text, `no Z: it stands for UTC, and the scale is ${scale}`);
  if (decimals.length > 12) throw unreadable(text, "at most 12 decimals of a second (picoseconds)");
  const year = Number(yearText);
  const month = Number(monthText);
  let day: number;
  if (ordinalText !== undefined) {
    const ordinal = Number(ordinalText);
    const last = isLeapYear(year) ? 366 : 365;
    if (ordinal < 1 || ordinal > last) throw unreadable(text, `a day of year from 001 to ${last} in ${year}`);
    day = dayNumber(year, 1, 1) + ordinal - 1;
  } else {
    if (month < 1 || month > 12) throw unreadable(text, "a month from 01 to 12");
    const last = daysInMonth(year, month);
    if (Number(dayText) < 1 || Number(dayText) > last) {
      throw unreadable(text, `a day from 01 to ${last} in ${yearText}-${monthText}`);
    }
    day = dayNumber(year, month, Number(dayText));
  }
  if (scale === "UTC" && day < firstDay) throw outOfRange(text);
  const hour = Number(hourText);
  const minute = Number(minuteText);
  const second = Number(secondText);
  if (hour > 23) throw unreadable(text, "an hour from 00 to 23");
  if (minute > 59) throw unreadable(text, "a minute from 00 to 59");
  const secondOfDay = hour * 3600 + minute * 60 + second;
  const picoseconds = decimals === "" ? 0 : Number(decimals.padEnd(12, "0"));
  if (scale === "GLONASS") return readGlonass(text, day, secondOfDay, second, picoseconds, leapSeconds);
  if (scale !== "UTC") {
    if (second > 59) throw unreadable(text, `a second from 00 to 59: ${scale} has no leap seconds`);
    const offset = fixedOffsets[scale];
    const ps = picoseconds - offset.picoseconds;
    const borrow = ps < 0 ? 1 : 0;
    const seconds = day * 86_400 + secondOfDay - offset.seconds - borrow;
    const label = { seconds, picoseconds: ps + borrow * 1e12 };
    return requireCovered(isCoordinateTime(scale) ? instantOfCoordinateTime(scale, label) : label, text, leapSeconds);
  }
  const length = leapSeconds.secondsInDay(day);
  if (second > 59 && !(second === 60 && hour === 23 && minute === 59 && length === 86_401)) {
    throw unreadable(text, "a second from 00 to 59: there was no leap second at that time");
  }
  if (secondOfDay >= length)
    throw unreadable(text, "a second that existed: this day ended with a negative leap second");
  const seconds = day * 86_400 + secondOfDay + leapSeconds.offsetOnDay(day);
  return requireCovered({ seconds, picoseconds }, text, leapSeconds);
}

/** GLONASS time: UTC three hours on, so the leap second that ends a UTC day is 02:59:60. */
function readGlonass(
  text: string,
  day: number,
  secondOfDay: number,
  second: number,
  picoseconds: number,
  leapSeconds: LeapSecondTable,
): Instant {
  const before = secondOfDay < glonassMinusUtc || (second === 60 && secondOfDay === glonassMinusUtc);
  const utcDay = before ? day - 1 : day;
  const utcSecond = secondOfDay - glonassMinusUtc + (before ? 86_400 : 0);
  const length = leapSeconds.secondsInDay(utcDay);
  if (second > 59 && !(second === 60 && utcSecond === 86_400 && length === 86_401)) {
    throw unreadable(text, "a second from 00 to 59: GLONASS had no leap second (02:59:60) at that time");
  }
  if (utcSecond >= length)
    throw unreadable(text, "a second that existed: this UTC day ended with a negative leap second");
  const seconds = utcDay * 86_400 + utcSecond + leapSeconds.offsetOnDay(utcDay);
  return requireCovered({ seconds, picoseconds }, text, leapSeconds);
}

function requireCovered(instant: Instant, text: string, leapSeconds: LeapSecondTable): Instant {
  if (!isCovered(instant, leapSeconds)) throw outOfRange(text);
  return instant;
}

function outOfRange(text: string): Problem {
  return new Problem("instant-out-of-range", `"${text}" lies outside 1972-01-01 to 2100-12-31 (UTC).`, [
    { place: [], received: text, expected: "an instant from 1972-01-01 to 2100-12-31 (UTC)" },
  ]);
}

const twoDigits = Array.from({ length: 100 }, (_, n) => String(n).padStart(2, "0"));
const two = (n: number): string => twoDigits[n]!;
const threeDigits = Array.from({ length: 1000 }, (_, n) => String(n).padStart(3, "0"));
/** "HH:MM:" of the minute of a day. */
const minutesOfDay = Array.from({ length: 1440 }, (_, n) => `${two(Math.floor(n / 60))}:${two(n % 60)}:`);

/** "YYYY-MM-DDT" of a day number; the last one is kept, because most texts follow one of the same day. */
function dateText(day: number): string {
  if (day !== lastDay) {
    const date = calendarDate(day);
    const year = date.year > 999 ? date.year : String(date.year).padStart(4, "0");
    lastDateText = `${year}-${two(date.month)}-${two(date.day)}T`;
    lastDay = day;
  }
  return lastDateText;
}
let lastDay = Number.NaN;
let lastDateText = "";

/** Twelve decimals. */
function decimals(picoseconds: number): string {
  const upper = Math.floor(picoseconds / 1e6);
  const lower = picoseconds - upper * 1e6;
  const a = Math.floor(upper / 1000);
  const b = Math.floor(lower / 1000);
  return threeDigits[a]! + threeDigits[upper - a * 1000]! + (threeDigits[b]! + threeDigits[lower - b * 1000]!);
}

/** The instant in a scale, with twelve decimals; UTC ends in Z. The inverse of parseInstant. */
export function formatInstant(instant: Instant, scale: Scale, leapSeconds: LeapSecondTable): string {
  let { picoseconds } = instant;
  let day: number;
  let secondOfDay: number;
  let leap = false;
  if (scale === "UTC" || scale === "GLONASS") {
    ({ day, second: secondOfDay } = leapSeconds.utcLabel(instant.seconds));
    leap = secondOfDay === 86_400;
    if (scale === "GLONASS") {
      secondOfDay += glonassMinusUtc;
      if (secondOfDay >= 86_400) {
        secondOfDay -= 86_400;
        day++;
      }
    }
  } else {
    const offset = fixedOffsets[scale];
    const from = isCoordinateTime(scale) ? shifted(instant, coordinateTimeMinusTt(scale, instant)) : instant;
    picoseconds = from.picoseconds + offset.picoseconds;
    const carry = picoseconds >= 1e12 ? 1 : 0;
    picoseconds -= carry * 1e12;
    const total = from.seconds + offset.seconds + carry;
    day = Math.floor(total / 86_400);
    secondOfDay = total - day * 86_400;
  }
  // A leap second carries the number 60 of the minute before.
  const minute = leap ? Math.floor((secondOfDay - 1) / 60) : Math.floor(secondOfDay / 60);
  const second = secondOfDay - minute * 60;
  return `${dateText(day)}${minutesOfDay[minute]!}${two(second)}.${decimals(picoseconds)}${scale === "UTC" ? "Z" : ""}`;
}

/** Whether a moment lies inside a positive leap second. */
export const isInLeapSecond = (instant: Instant, leapSeconds: LeapSecondTable): boolean =>
  leapSeconds.utcLabel(instant.seconds).second === 86_400;

/** The first and the last moment of the years that are covered. */
export function coveredYears(leapSeconds: LeapSecondTable): { first: Instant; last: Instant } {
  const midnight = (day: number) => day * 86_400 + leapSeconds.offsetOnDay(day);
  return {
    first: { seconds: midnight(firstDay), picoseconds: 0 },
    last: { seconds: midnight(afterLastDay) - 1, picoseconds: 999_999_999_999 },
  };
}

/** Whether a moment lies in the years that are covered: 1972-01-01T00:00:00 UTC to the end of 2100. */
export function isCovered(instant: Instant, leapSeconds: LeapSecondTable): boolean {
  const { day } = leapSeconds.utcLabel(instant.seconds);
  return day >= firstDay && day < afterLastDay;
}

/** TT - 2000-01-01T12:00:00 TT (J2000.0) in seconds, as a double: the argument of the slow astronomical functions. */
export function ttSecondsSinceJ2000(instant: Instant): number {
  return instant.seconds - 946_728_000 + fixedOffsets.TT.seconds + (instant.picoseconds + 184e9) / 1e12;
}
