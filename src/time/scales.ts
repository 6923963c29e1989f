import { Problem } from "../problem/index.ts";
import { calendarDate, dayNumber, daysInMonth, isLeapYear } from "./calendar.ts";
import type { Instant } from "./instant.ts";
import type { LeapSecondTable } from "./leapSeconds.ts";

/** Time scales in which an instant can be written. */
export const scales = ["UTC", "TAI", "TT", "GPS"] as const;
export type Scale = (typeof scales)[number];

/**
 * Scale - TAI for the scales that keep a fixed distance: whole seconds and picoseconds.
 * Source: IAU 1991 Resolution A4 (TT), IS-GPS-200 20.3.3.5.2.4 (GPS, by its integer rule).
 */
const fixedOffsets = {
  TAI: { seconds: 0, picoseconds: 0 },
  TT: { seconds: 32, picoseconds: 184_000_000_000 },
  GPS: { seconds: -19, picoseconds: 0 },
} as const;

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
 * no suffix. 23:59:60 is read where the table has a leap second.
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
  if (scale !== "UTC") {
    if (second > 59) throw unreadable(text, `a second from 00 to 59: ${scale} has no leap seconds`);
    const offset = fixedOffsets[scale];
    const ps = picoseconds - offset.picoseconds;
    const borrow = ps < 0 ? 1 : 0;
    const seconds = day * 86_400 + secondOfDay - offset.seconds - borrow;
    return requireCovered({ seconds, picoseconds: ps + borrow * 1e12 }, text, leapSeconds);
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

function requireCovered(instant: Instant, text: string, leapSeconds: LeapSecondTable): Instant {
  if (!isCovered(instant, leapSeconds)) throw outOfRange(text);
  return instant;
}

function outOfRange(text: string): Problem {
  return new Problem("instant-out-of-range", `"${text}" lies outside 1972-01-01 to 2100-12-31 (UTC).`, [
    { place: [], received: text, expected: "an instant from 1972-01-01 to 2100-12-31 (UTC)" },
  ]);
}

const two = (n: number): string => (n < 10 ? `0${n}` : `${n}`);

/** The instant in a scale, with twelve decimals; UTC ends in Z. The inverse of parseInstant. */
export function formatInstant(instant: Instant, scale: Scale, leapSeconds: LeapSecondTable): string {
  let { picoseconds } = instant;
  let day: number;
  let secondOfDay: number;
  if (scale === "UTC") {
    ({ day, second: secondOfDay } = leapSeconds.utcLabel(instant.seconds));
  } else {
    const offset = fixedOffsets[scale];
    picoseconds += offset.picoseconds;
    const carry = picoseconds >= 1e12 ? 1 : 0;
    picoseconds -= carry * 1e12;
    const total = instant.seconds + offset.seconds + carry;
    day = Math.floor(total / 86_400);
    secondOfDay = total - day * 86_400;
  }
  const date = calendarDate(day);
  const leap = secondOfDay === 86_400;
  const hour = leap ? 23 : Math.floor(secondOfDay / 3600);
  const minute = leap ? 59 : Math.floor((secondOfDay - hour * 3600) / 60);
  const second = secondOfDay - hour * 3600 - minute * 60;
  const fraction = String(picoseconds).padStart(12, "0");
  const suffix = scale === "UTC" ? "Z" : "";
  return `${String(date.year).padStart(4, "0")}-${two(date.month)}-${two(date.day)}T${two(hour)}:${two(minute)}:${two(second)}.${fraction}${suffix}`;
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
