import { addToTwoPart, multiplyTwoPart, type TwoPart, twoProduct, twoSum } from "../numeric/index.ts";
import { type Duration, durationFromSeconds } from "../time/index.ts";

/** What is known of an oscillator. Null: not given. */
export interface Oscillator {
  /** Of the clock at the anchor. */
  readonly offset: Duration | null;
  /** Deliberate fractional frequency offset given before launch. */
  readonly preset: number | null;
  /** What is left of the fractional frequency. */
  readonly frequency: number | null;
  /** Of the fractional frequency, per second. */
  readonly aging: number | null;
  /** One sigma of frequency and of ageing (1/s). */
  readonly frequencySigma: number | null;
  readonly agingSigma: number | null;
  /** Of offset (s), frequency and ageing (1/s), rows first. */
  readonly covariance: readonly number[] | null;
}

/** A contribution of the clock itself to clock minus TT. */
export interface ClockTerm {
  readonly term: "offset" | "preset" | "frequency" | "aging" | "event" | "latch";
  readonly label: string;
  /** d(clock - TT)/dTT. */
  readonly rate: number;
  readonly accumulated: Duration;
}

/** How long an oscillator has run freely since the anchor, by proper time, s; it may have been locked in between. */
export interface FreeRun {
  readonly total: TwoPart;
  /** Sum of the squares of the single runs, s^2: the polynomial starts anew with each. */
  readonly square: TwoPart;
  /** Since the present run began; zero while locked. */
  readonly since: number;
}

/** One run, without a break. */
export const unbroken = (tau: TwoPart): FreeRun => ({ total: tau, square: multiplyTwoPart(tau, tau), since: tau.high });

/**
 * The oscillator's terms after proper time tau (two doubles, s) since the anchor:
 * indicated = x0 + (1 + p)(tau + y0 tau + D tau^2/2). Frequency times tau is a product of two doubles each: one double
 * would be 16 fs off in ten days at 123 ppm. Only what was given is listed.
 */
export function oscillatorTerms(oscillator: Oscillator | null, free: FreeRun, tauRate: number): ClockTerm[] {
  const tau = free.total;
  const out: ClockTerm[] = [];
  if (oscillator === null) return out;
  const { offset, preset, frequency, aging } = oscillator;
  const p = preset ?? 0;
  const list = (term: ClockTerm["term"], label: string, rate: number, value: TwoPart) =>
    out.push({ term, label, rate, accumulated: durationFromSeconds(value.high, value.low) });
  if (offset !== null) out.push({ term: "offset", label: "Clock offset at the anchor", rate: 0, accumulated: offset });
  if (preset !== null) {
    list("preset", "Deliberate frequency preset", preset * tauRate, multiplyTwoPart(tau, { high: preset, low: 0 }));
  }
  if (frequency !== null) {
    const scaled = withPreset(frequency, p);
    list("frequency", "Oscillator frequency offset", (1 + p) * frequency * tauRate, multiplyTwoPart(tau, scaled));
  }
  if (aging !== null) {
    const scaled = withPreset(aging / 2, p);
    const rate = (1 + p) * aging * free.since * tauRate;
    list("aging", "Oscillator ageing", rate, multiplyTwoPart(free.square, scaled));
  }
  return out;
}

/** (1 + p) k as two doubles. */
function withPreset(k: number, p: number): TwoPart {
  const product = twoProduct(k, p);
  const sum = twoSum(k, product.high);
  return { high: sum.high, low: sum.low + product.low };
}

/** Proper time since the anchor from TT since the anchor and the accumulated relativity. */
export const properTime = (tt: TwoPart, relativity: number): TwoPart => addToTwoPart(tt, relativity);

/** Standard uncertainty items of the oscillator's model after so many seconds of free running, s; `square` as in FreeRun. */
export function oscillatorSigmas(
  oscillator: Oscillator | null,
  tau: number,
  square: number,
): { source: string; sigma: number }[] {
  if (oscillator === null) return [];
  const gain = 1 + (oscillator.preset ?? 0);
  const byFrequency = gain * tau;
  const byAging = (gain * square) / 2;
  const out: { source: string; sigma: number }[] = [];
  if (oscillator.frequencySigma !== null) {
    out.push({ source: "frequency", sigma: Math.abs(byFrequency * oscillator.frequencySigma) });
  }
  if (oscillator.agingSigma !== null) out.push({ source: "aging", sigma: Math.abs(byAging * oscillator.agingSigma) });
  if (oscillator.covariance !== null) {
    const lever = [1, byFrequency, byAging];
    let variance = 0;
    for (let i = 0; i < 3; i++) {
      for (let j = 0; j < 3; j++) variance += lever[i]! * lever[j]! * oscillator.covariance[3 * i + j]!;
    }
    out.push({ source: "model", sigma: Math.sqrt(Math.max(0, variance)) });
  }
  return out;
}
