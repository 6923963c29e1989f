import type { EarthAxes } from "../bodies/index.ts";
import { interpolateStates, lagrangeStates, slopeAtKnot } from "../numeric/index.ts";
import type { Notice } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";
import { C2, GM_EARTH } from "../units/index.ts";
import { fieldTruncation } from "./modelError.ts";
import type { OrbitError, StateArray, Trajectory } from "./trajectory.ts";

const knotsPerPiece = 32;

/**
 * How a table is read between its knots: osculating (Hermite) through a number of knots, with position and velocity
 * together; or Lagrange's polynomial through a number of knots, position and velocity each for itself.
 */
export interface TableMethod {
  readonly kind: "osculating" | "lagrange";
  readonly knots: number;
}

/** Degree 7. */
export const usualMethod: TableMethod = { kind: "osculating", knots: 4 };

type Reader = (
  times: Float64Array,
  states: Float64Array,
  first: number,
  knots: number,
  t: number,
  out: StateArray,
) => void;

/** First of `knots` knots about an interval, inside the table. */
const firstKnot = (interval: number, knots: number, count: number): number =>
  Math.max(0, Math.min(count - knots, interval - Math.floor((knots - 1) / 2)));

/**
 * A table of states in GCRF, read by osculating interpolation through four knots (degree 7), never outside.
 * Accuracy: below 1e-5 ps of clock time in ten days at 60 s (low orbit), 300 s (12 h), 900 s (24 h); estimated for each
 * table by comparison with degree 11.
 */
export class TableTrajectory implements Trajectory {
  readonly kind = "state-table";
  readonly reference: Instant;
  readonly from = 0;
  readonly to: number;
  readonly first: Instant;
  readonly last: Instant;
  readonly axes: EarthAxes;
  readonly notices: readonly Notice[];
  readonly implausible: boolean;
  readonly coarse: boolean;
  readonly orbitError: OrbitError | null;
  readonly usesSunMoon: boolean;
  readonly modelError;
  readonly #times: Float64Array;
  readonly #states: Float64Array;
  readonly #read: Reader;
  readonly #knots: number;
  /** Sum of the intervals' error estimates up to each knot, each taken as positive, s. */
  readonly #doubt: Float64Array;
  /** Largest less smallest signed sum: what the errors come to over the whole table, s. */
  readonly #widest: number;

  /** `first` and `last`: instants of the end knots. `times` in TT seconds since `first`, rising from 0; `states` six numbers a knot, GCRF, m and m/s. */
  constructor(
    first: Instant,
    last: Instant,
    times: Float64Array,
    states: Float64Array,
    axes: EarthAxes,
    given: {
      notices: readonly Notice[];
      implausible: boolean;
      method?: TableMethod;
      orbitError?: OrbitError | null;
      usesSunMoon?: boolean;
      /** How far each knot's velocity is in doubt, as a clock's rate; where it was derived. */
      rateDoubt?: Float64Array;
    },
  ) {
    const { kind, knots } = given.method ?? usualMethod;
    this.#read = kind === "osculating" ? interpolateStates : lagrangeStates;
    this.#knots = Math.min(knots, times.length);
    this.orbitError = given.orbitError ?? null;
    this.usesSunMoon = given.usesSunMoon ?? false;
    this.reference = first;
    this.first = first;
    this.last = last;
    this.#times = times;
    this.#states = states;
    this.axes = axes;
    this.to = times.at(-1)!;
    this.implausible = given.implausible;
    const errors = estimateError(times, states, this.#read, this.#knots, given.rateDoubt ?? null);
    this.#doubt = errors.doubt;
    this.#widest = errors.widest;
    const worst = this.#widest;
    // Rounded files come to some picoseconds, which the uncertainty carries; more than 50 is worth a word.
    this.coarse = worst > 5e-11;
    this.notices = this.coarse
      ? [
          ...given.notices,
          {
            code: "coarse-ephemeris",
            text: `The table is coarse for its orbit: interpolation may be wrong by ${(worst * 1e9).toPrecision(2)} ns over its span.`,
            place: ["states"],
          },
        ]
      : given.notices;
    let nearest = Number.POSITIVE_INFINITY;
    for (let i = 0; i < times.length; i++) {
      nearest = Math.min(nearest, Math.hypot(states[6 * i]!, states[6 * i + 1]!, states[6 * i + 2]!));
    }
    this.modelError = { fieldTruncation: (dt: number) => fieldTruncation(nearest, dt), energyRate: 0, drag: () => 0 };
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    const first = firstKnot(this.#intervalOf(t), this.#knots, this.#times.length);
    this.#read(this.#times, this.#states, first, this.#knots, t, out);
  }

  pieceOf(t: number): number {
    return Math.floor(this.#intervalOf(t) / knotsPerPiece);
  }

  pieceStart(index: number): number {
    return this.#times[Math.max(0, Math.min(this.#times.length - 1, index * knotsPerPiece))]!;
  }

  split(a: number, b: number): number | null {
    const first = this.#intervalOf(a);
    const last = b >= this.to ? this.#times.length - 1 : this.#intervalOf(b);
    return last - first < 2 ? null : this.#times[Math.floor((first + last) / 2)]!;
  }

  energyLever(a: number, b: number): number {
    return Math.abs(b - a);
  }

  interpolationError(a: number, b: number): number {
    const low = this.#intervalOf(Math.min(a, b));
    const high = Math.min(this.#times.length - 1, this.#intervalOf(Math.max(a, b)) + 1);
    return Math.min(this.#doubt[high]! - this.#doubt[low]!, this.#widest);
  }

  /** Index of the knot at or before t; the last interval owns the table's end. */
  #intervalOf(t: number): number {
    const times = this.#times;
    let low = 0;
    let high = times.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (times[middle]! <= t) low = middle;
      else high = middle;
    }
    return low;
  }
}

/**
 * Difference of the accumulated time between the reading in use and the osculating one of degree 11 (with few knots, of as
 * many as there are), at the middle of each interval. For the sum of velocity and monopole it is pessimistic: v^2/2 + GM/r
 * is stationary along a free path, so that their errors cancel; it is honest for each of them alone.
 */
function estimateError(
  times: Float64Array,
  states: Float64Array,
  read: Reader,
  knots: number,
  rateDoubt: Float64Array | null,
): { doubt: Float64Array; widest: number } {
  const count = times.length;
  const doubt = new Float64Array(count);
  let signed = 0;
  let least = 0;
  let most = 0;
  const inUse = new Float64Array(6);
  const better = new Float64Array(6);
  const more = Math.min(6, count);
  // A reading that is as good as the comparison is compared with the next lower one: a larger, safer estimate.
  const fewer = read === interpolateStates && knots >= more ? more - 1 : knots;
  for (let i = 0; i < count - 1; i++) {
    const dt = times[i + 1]! - times[i]!;
    let error: number;
    if (count > 2) {
      const middle = (times[i]! + times[i + 1]!) / 2;
      read(times, states, firstKnot(i, fewer, count), fewer, middle, inUse);
      interpolateStates(times, states, firstKnot(i, more, count), more, middle, better);
      error = rate(inUse) - rate(better);
    } else {
      // Two knots: nothing to compare with; the whole bend of the path between them is in doubt.
      const r = Math.hypot(states[0]!, states[1]!, states[2]!);
      const turn = Math.sqrt(GM_EARTH / r ** 3) * dt;
      error = (rate(states) * turn ** 4) / 384;
    }
    // A derived velocity errs alike on both sides of its knot.
    if (rateDoubt !== null) error += (rateDoubt[i]! + rateDoubt[i + 1]!) / 2;
    doubt[i + 1] = doubt[i]! + Math.abs(error) * dt;
    signed += error * dt;
    least = Math.min(least, signed);
    most = Math.max(most, signed);
  }
  return { doubt, widest: most - least };
}

/** Speed and monopole part of the clock's rate. */
function rate(s: ArrayLike<number>): number {
  const v2 = s[3]! * s[3]! + s[4]! * s[4]! + s[5]! * s[5]!;
  return -(v2 / 2 + GM_EARTH / Math.hypot(s[0]!, s[1]!, s[2]!)) / C2;
}

/**
 * Fills in velocities at every knot from the positions alone (polynomials through up to eleven knots). Gives how far the
 * clock's rate at each knot moves when two knots fewer are used.
 */
export function deriveVelocities(times: Float64Array, states: Float64Array): Float64Array {
  const count = times.length;
  const points = Math.min(11, count);
  const doubt = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const slope = (knots: number, k: number): number => {
      const first = Math.max(0, Math.min(count - knots, i - Math.floor(knots / 2)));
      return slopeAtKnot(times, states, 6, k, first, knots, i);
    };
    let change = 0;
    for (let k = 0; k < 3; k++) {
      const full = slope(points, k);
      const fewer = slope(points - 2, k);
      states[6 * i + 3 + k] = full;
      change += (fewer - full) * full;
    }
    doubt[i] = change / C2;
  }
  return doubt;
}
