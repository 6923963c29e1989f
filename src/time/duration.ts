import { invariant } from "../problem/index.ts";

/**
 * A span of time, exact to the femtosecond: whole seconds (any sign) and 0 <= femtoseconds < 1e15, both integers held
 * in doubles. The value is seconds + femtoseconds * 1e-15.
 */
export interface Duration {
  readonly seconds: number;
  readonly femtoseconds: number;
}

const second = 1e15;

export const zeroDuration: Duration = { seconds: 0, femtoseconds: 0 };

function normalised(seconds: number, femtoseconds: number): Duration {
  const carry = Math.floor(femtoseconds / second);
  return { seconds: seconds + carry, femtoseconds: femtoseconds - carry * second };
}

/** Sum of at most eight spans (so that the femtoseconds stay below 2^53). */
export function sumDurations(parts: readonly Duration[]): Duration {
  let total = zeroDuration;
  for (const part of parts) {
    total = normalised(total.seconds + part.seconds, total.femtoseconds + part.femtoseconds);
  }
  return total;
}

export const addDurations = (a: Duration, b: Duration): Duration =>
  normalised(a.seconds + b.seconds, a.femtoseconds + b.femtoseconds);

const negate = (a: Duration): Duration => normalised(-a.seconds, a.femtoseconds === 0 ? 0 : -a.femtoseconds);

export const subtractDurations = (a: Duration, b: Duration): Duration =>
  normalised(a.seconds - b.seconds, a.femtoseconds - b.femtoseconds);

/** The nearest femtosecond to high + low seconds, both doubles; |high| below 1e13 s. */
export function durationFromSeconds(high: number, low = 0): Duration {
  invariant(Number.isFinite(high) && Math.abs(high) < 1e13, "a duration is finite and below 1e13 s");
  const whole = Math.floor(high);
  // high - whole is exact (Sterbenz) and lies in [0, 1).
  return normalised(whole, Math.round((high - whole) * second + low * second));
}

/** The nearest femtosecond to a number of nanoseconds, without the loss of dividing first. */
export function durationFromNanoseconds(ns: number): Duration {
  const rest = ns % 1e9;
  return normalised(Math.round((ns - rest) / 1e9), Math.round(rest * 1e6));
}

/** In seconds as a double: good to 1e-16 relative, so only for small spans or as an argument of slow functions. */
export const toSeconds = (a: Duration): number => a.seconds + a.femtoseconds / second;

/** The same as an unevaluated sum of two doubles, exact to 1e-31 relative. */
export const toTwoPartSeconds = (a: Duration): { high: number; low: number } => {
  const high = a.seconds + a.femtoseconds / second;
  return { high, low: a.seconds - high + a.femtoseconds / second };
};

/** In nanoseconds as the nearest double. */
export function toNanoseconds(a: Duration): number {
  const small = a.seconds === 0 || a.seconds === -1;
  return small ? (a.seconds * second + a.femtoseconds) / 1e6 : Number(toFemtoseconds(a)) / 1e6;
}

const toFemtoseconds = (a: Duration): bigint => BigInt(a.seconds) * 1_000_000_000_000_000n + BigInt(a.femtoseconds);

/** Decimal text in seconds with exactly fifteen decimals, for example "-0.000038123456789". */
export function formatDuration(a: Duration): string {
  const negative = a.seconds < 0;
  const magnitude = negative ? negate(a) : a;
  return `${negative ? "-" : ""}${magnitude.seconds}.${String(magnitude.femtoseconds).padStart(15, "0")}`;
}
