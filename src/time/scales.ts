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

/**
 * Reads ISO 8601, calendar date or day of year, up to 12 decimals, in the given scale. UTC ends in Z, other scales have
 * no suffix. 23:59:60 is read where the table has a leap second; in GLONASS time it is 02:59:60 of the next day.
 * Accuracy: to the picosecond; TDB and TCB are those of the geocentre, by the series of tdbMinusTt.
 * Errors: invalid-instant (shape, day, time that never was), instant-out-of-range (before 1972 or after 2100).
 */
export function parseInstant(text: string, scale: Scale, leapSeconds: LeapSecondTable): Instant {
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
  const date = calendarDate(day);
  // A leap second carries the number 60 of the minute before.
  if (leap) secondOfDay--;
  const hour = Math.floor(secondOfDay / 3600);
  const minute = Math.floor((secondOfDay - hour * 3600) / 60);
  if (leap) secondOfDay++;
  const second = secondOfDay - hour * 3600 - minute * 60;
  const fraction = String(picoseconds).padStart(12, "0");
  const suffix = scale === "UTC" ? "Z" : "";
  return `${date.year > 999 ? date.year : String(date.year).padStart(4, "0")}-${two(date.month)}-${two(date.day)}T${two(hour)}:${two(minute)}:${two(second)}.${fraction}${suffix}`;
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
