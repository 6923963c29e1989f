import type { Duration } from "../time/index.ts";

/** A positive rational number. */
export interface Rational {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/** What a counter value stands for. */
export type Stands = "edge" | "truncated" | "rounded";

export interface Counter {
  /** Nominal ticks a second, exact. */
  readonly ticksPerSecond: Rational;
  /** Bits, when the counter rolls over. */
  readonly widthBits: number | null;
  readonly stands: Stands;
}

const femto = 1_000_000_000_000_000n;

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  return b === 0n ? a : greatestCommonDivisor(b, a % b);
}

export function rational(numerator: bigint, denominator: bigint): Rational {
  const divisor = greatestCommonDivisor(numerator, denominator);
  return { numerator: numerator / divisor, denominator: denominator / divisor };
}

/** The exact value of a decimal text such as "32768", "1.5e-3" or "0.1"; null when it is not one. */
export function decimalRational(text: string): Rational | null {
  const m = /^(\d+)(?:\.(\d+))?(?:[eE]([+-]?\d{1,3}))?$/.exec(text);
  if (!m) return null;
  const [, whole = "", fraction = "", exponentText = "0"] = m;
  const digits = BigInt(whole + fraction);
  const exponent = Number(exponentText) - fraction.length;
  return exponent >= 0 ? rational(digits * 10n ** BigInt(exponent), 1n) : rational(digits, 10n ** BigInt(-exponent));
}

function floorDivide(a: bigint, b: bigint): bigint {
  const q = a / b;
  return a % b !== 0n && a < 0n ? q - 1n : q;
}

/** Nearest integer to a / b, halves upwards; b positive. */
const roundDivide = (a: bigint, b: bigint): bigint => floorDivide(2n * a + b, 2n * b);

/** Ticks over the nominal rate, to the nearest femtosecond: nothing passes through a double. */
export function ticksToDuration(ticks: bigint, rate: Rational): Duration {
  return femtosecondsToDuration(roundDivide(ticks * rate.denominator * femto, rate.numerator));
}

/** The span of k ticks divided by n, for fractions of a tick. */
export function tickFraction(k: bigint, n: bigint, rate: Rational): Duration {
  return femtosecondsToDuration(roundDivide(k * rate.denominator * femto, n * rate.numerator));
}

function femtosecondsToDuration(total: bigint): Duration {
  const seconds = floorDivide(total, femto);
  return { seconds: Number(seconds), femtoseconds: Number(total - seconds * femto) };
}

/**
 * What the counter has counted after an indicated span, as a counter shows it: whole ticks and the fraction beyond them.
 * Less than one picosecond before an edge counts as that edge (a quarter tick when ticks are that short). For "rounded" the fraction lies in [-1/2, 1/2), else [0, 1).
 */
export function durationToTicks(elapsed: Duration, counter: Counter): { ticks: bigint; fraction: number } {
  const { numerator, denominator } = counter.ticksPerSecond;
  const total = BigInt(elapsed.seconds) * femto + BigInt(elapsed.femtoseconds);
  const scale = denominator * femto;
  const half = counter.stands === "rounded" ? scale / 2n : 0n;
  const product = total * numerator;
  // Less than a picosecond (1000 fs) before the edge, or less than a quarter of a very short tick.
  const picosecond = 1000n * numerator;
  const grace = (4n * picosecond > scale ? scale / 4n : picosecond) - 1n;
  const ticks = floorDivide(product + half + grace, scale);
  const rest = product - ticks * scale;
  const fraction = Number((rest * 1_000_000_000_000n) / scale) / 1e12;
  const settled = counter.stands === "rounded" ? fraction : Math.max(0, fraction);
  return { ticks, fraction: settled };
}

/** Seconds of one tick, as a double. */
export const tickSeconds = (rate: Rational): number => Number(rate.denominator) / Number(rate.numerator);

/** How many values a counter has before it rolls over. */
export const counterModulus = (widthBits: number): bigint => 1n << BigInt(widthBits);

/** value modulo a positive modulus, never negative. */
export function wrap(value: bigint, modulus: bigint): bigint {
  const rest = value % modulus;
  return rest < 0n ? rest + modulus : rest;
}
