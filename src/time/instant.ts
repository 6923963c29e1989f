import type { Duration } from "./duration.ts";

/**
 * A moment, exact to the picosecond: TAI seconds since 1970-01-01T00:00:00 TAI and 0 <= picoseconds < 1e12, both
 * integers held in doubles. Every scale is derived from this one.
 */
export interface Instant {
  readonly seconds: number;
  readonly picoseconds: number;
}

const second = 1e12;

export const compareInstants = (a: Instant, b: Instant): number =>
  a.seconds - b.seconds || a.picoseconds - b.picoseconds;

/** b - a in seconds as a double: exact to 1e-16 of the difference, which is what small differences need. */
export const secondsBetween = (a: Instant, b: Instant): number =>
  b.seconds - a.seconds + (b.picoseconds - a.picoseconds) / second;

/** b - a, exact. */
export function durationBetween(a: Instant, b: Instant): Duration {
  const picoseconds = b.picoseconds - a.picoseconds;
  const borrow = picoseconds < 0 ? 1 : 0;
  return { seconds: b.seconds - a.seconds - borrow, femtoseconds: (picoseconds + borrow * second) * 1000 };
}

/** a + d, rounded once to the nearest picosecond. */
export function addDuration(a: Instant, d: Duration): Instant {
  return normalisedInstant(a.seconds + d.seconds, a.picoseconds + Math.round(d.femtoseconds / 1000));
}

export function addSeconds(a: Instant, seconds: number): Instant {
  const whole = Math.floor(seconds);
  return normalisedInstant(a.seconds + whole, a.picoseconds + Math.round((seconds - whole) * second));
}

function normalisedInstant(seconds: number, picoseconds: number): Instant {
  const carry = Math.floor(picoseconds / second);
  return { seconds: seconds + carry, picoseconds: picoseconds - carry * second };
}

export const earlier = (a: Instant, b: Instant): Instant => (compareInstants(a, b) <= 0 ? a : b);
export const later = (a: Instant, b: Instant): Instant => (compareInstants(a, b) >= 0 ? a : b);
