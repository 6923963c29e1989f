import { DEGREE } from "../units/index.ts";
import type { Instant } from "./instant.ts";
import { tdbMinusTtTerms } from "./tdbMinusTt.data.ts";

/** Julian millennium, s. */
const millennium = 365_250 * 86_400;
/** J2000.0 (2000-01-01T12:00:00 TT) less 32.184 s, in TAI seconds since 1970. */
const j2000 = 946_728_000;
const ttMinusTai = 32.184;

interface Terms {
  /** Seconds. */
  readonly amplitudes: Float64Array;
  /** Radians a millennium. */
  readonly frequencies: Float64Array;
  /** Radians. */
  readonly phases: Float64Array;
}

const microsecond = 1e6;

const powers: readonly Terms[] = tdbMinusTtTerms.map((rows) => ({
  amplitudes: Float64Array.from(rows, ([amplitude]) => amplitude / microsecond),
  frequencies: Float64Array.from(rows, ([, frequency]) => frequency),
  phases: Float64Array.from(rows, ([, , phase]) => phase),
}));

/**
 * What the masses of the planets of a later ephemeris change in the series: amplitude (s), frequency (rad a millennium),
 * phase (rad), and a coefficient of t squared (s). At most 0.4 ns over 1972-2100.
 * Source: Fairhead & Bretagnon (1990), the adjustment to the masses in use at JPL; figures from memory, held to 1e-15 s by
 * the published test number T01.
 */
const massTerms = [
  [6.5e-10, 6069.776754, 4.021194],
  [3.3e-10, 213.299095, 5.543132],
  [-1.96e-9, 6208.294251, 5.696701],
  [-1.73e-9, 74.781599, 2.4359],
] as const;
const massSquare = 3.638e-8;

/** The smallest terms first, which costs nothing and keeps the rounding of the sum below 1e-18 s. */
function sumOf({ amplitudes, frequencies, phases }: Terms, t: number): number {
  let sum = 0;
  for (let i = amplitudes.length - 1; i >= 0; i--) sum += amplitudes[i]! * Math.sin(frequencies[i]! * t + phases[i]!);
  return sum;
}

/**
 * TDB - TT at the geocentre, seconds. `t`: Julian millennia of TDB from J2000.0.
 * Accuracy: the sum is computed to 1e-16 s; the series itself follows numerical integrations of the time ephemeris to a few
 * nanoseconds over 1950-2050 (figure from memory). Nothing is thrown.
 * Source: Fairhead & Bretagnon (1990), Astronomy and Astrophysics 229, 240: all 787 terms and the masses' adjustment.
 */
export function tdbMinusTt(t: number): number {
  let sum = 0;
  for (let p = powers.length - 1; p >= 0; p--) sum = sum * t + sumOf(powers[p]!, t);
  let masses = massSquare * t * t;
  for (const [amplitude, frequency, phase] of massTerms) masses += amplitude * Math.sin(frequency * t + phase);
  return sum + masses;
}

/** Its largest term alone: within 60 microseconds of the whole. */
function leadingTdbMinusTt(t: number): number {
  const { amplitudes, frequencies, phases } = powers[0]!;
  return amplitudes[0]! * Math.sin(frequencies[0]! * t + phases[0]!);
}

const ttMillennia = (instant: Instant): number =>
  (instant.seconds - j2000 + (ttMinusTai + instant.picoseconds / 1e12)) / millennium;

/** A first guess of TDB - TT at an instant, seconds, within 60 microseconds. */
export const roughTdbMinusTt = (instant: Instant): number => leadingTdbMinusTt(ttMillennia(instant));

/** The instant asked for last and its answer: TDB and TCB of one instant cost one sum. A pure function stays pure. */
let lastInstant: Instant = { seconds: Number.NaN, picoseconds: 0 };
let lastAnswer = 0;

/**
 * TDB - TT at the geocentre at an instant, seconds, as tdbMinusTt. The argument TDB is TT and the largest term: what that
 * leaves out moves the answer by 2e-14 s.
 */
export function geocentricTdbMinusTt(instant: Instant): number {
  if (instant.seconds === lastInstant.seconds && instant.picoseconds === lastInstant.picoseconds) return lastAnswer;
  const t = ttMillennia(instant);
  lastAnswer = tdbMinusTt(t + leadingTdbMinusTt(t) / millennium);
  lastInstant = instant;
  return lastAnswer;
}

/** Where a clock stands on the turning Earth. */
export interface EarthPlace {
  /** East longitude, rad. */
  readonly longitude: number;
  /** Distance from the Earth's axis, m. */
  readonly axisDistance: number;
  /** Distance north of the plane of the equator, m. */
  readonly equatorDistance: number;
}

/**
 * Mean longitude of the Sun, mean anomaly of the Sun, mean elongation of the Moon, mean longitudes of Jupiter and Saturn:
 * degrees at J2000.0, arcseconds a millennium.
 */
const meanAngles = [
  [280.46645683, 1_296_027_711.03429],
  [357.52910918, 1_295_965_810.481],
  [297.85019547, 16_029_616_012.09],
  [34.35151874, 109_306_899.89453],
  [50.0774443, 44_046_398.47038],
] as const;

/**
 * Terms that turn with the Earth, times the distance from the axis: coefficient (1e-10 s per km) of the sine of solar time
 * at the place plus multiples of the five angles.
 */
const dailyTerms = [
  [0.00029, 1, 0, 0, 0, -1],
  [0.001, 0, -2, 0, 0, 0],
  [0.00133, 0, 0, -1, 0, 0],
  [0.00133, 1, 0, 0, -1, 0],
  [-0.00229, 2, 1, 0, 0, 0],
  [0.05312, 0, -1, 0, 0, 0],
  [-0.13677, 2, 0, 0, 0, 0],
  [3.17679, 0, 0, 0, 0, 0],
] as const;

/** Terms of the year, times the distance from the equator: coefficient (1e-10 s per km) of a cosine of the angles. */
const yearlyTerms = [
  [-0.022, 1, 1, 0, 0, 0],
  [-1.3184, 1, 0, 0, 0, 0],
] as const;

/**
 * What a place on the Earth adds to TDB - TT of the geocentre, seconds: at most 2.2 microseconds, mostly a daily wave.
 * `t`: Julian millennia of TDB from J2000.0; `ut1`: part of the UT1 day, 0 to 1.
 * Accuracy: the coefficients are rounded to 1e-15 s per km, 10 ps in all. Nothing is thrown.
 * Source: Moyer (1981), Celestial Mechanics 23, 33 and Murray (1983), Vectorial Astrometry, as used with the series of
 * Fairhead & Bretagnon; figures from memory, held to 1e-15 s by the published test number T01.
 */
export function topocentricTdbMinusTt(t: number, ut1: number, place: EarthPlace): number {
  const angles = meanAngles.map(([degrees, arcseconds]) => ((degrees + (arcseconds / 3600) * t) % 360) * DEGREE);
  const solarTime = 2 * Math.PI * (ut1 % 1) + place.longitude;
  const combined = (multiples: readonly number[]): number =>
    angles.reduce((sum, angle, i) => sum + multiples[i]! * angle, 0);
  let daily = 0;
  for (const [k, ...multiples] of dailyTerms) daily += k * Math.sin(solarTime + combined(multiples));
  let yearly = 0;
  for (const [k, ...multiples] of yearlyTerms) yearly += k * Math.cos(combined(multiples));
  return (daily * place.axisDistance + yearly * place.equatorDistance) / 1e13;
}
