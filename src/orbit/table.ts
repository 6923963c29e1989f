import type { EarthAxes } from "../bodies/index.ts";
import { interpolateStates, slopeAtKnot } from "../numeric/index.ts";
import type { Notice } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";
import { C2, GM_EARTH } from "../units/index.ts";
import { fieldTruncation } from "./modelError.ts";
import type { StateArray, Trajectory } from "./trajectory.ts";

const knotsPerPiece = 32;

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
  readonly orbitError = null;
  readonly usesSunMoon = false;
  readonly modelError;
  readonly #times: Float64Array;
  readonly #states: Float64Array;
  /** Signed error estimate of the accumulated time from the first knot to each, s. */
  readonly #error: Float64Array;

  /** `first` and `last`: instants of the end knots. `times` in TT seconds since `first`, rising from 0; `states` six numbers a knot, GCRF, m and m/s. */
  constructor(
    first: Instant,
    last: Instant,
    times: Float64Array,
    states: Float64Array,
    axes: EarthAxes,
    given: { notices: readonly Notice[]; implausible: boolean },
  ) {
    this.reference = first;
    this.first = first;
    this.last = last;
    this.#times = times;
    this.#states = states;
    this.axes = axes;
    this.to = times.at(-1)!;
    this.implausible = given.implausible;
    this.#error = estimateError(times, states);
    const worst = this.interpolationError(0, this.to);
    // More than a picosecond, and more than a ten-millionth of the path's own rates: worth a word.
    this.coarse = worst > 1e-12;
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
    this.modelError = { fieldTruncation: (dt: number) => fieldTruncation(nearest, dt), propagation: () => 0 };
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    const count = this.#times.length;
    const points = Math.min(4, count);
    const interval = this.#intervalOf(t);
    const first = Math.max(0, Math.min(count - points, interval - points / 2 + 1));
    interpolateStates(this.#times, this.#states, Math.ceil(first), points, t, out);
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

  interpolationError(a: number, b: number): number {
    const low = this.#intervalOf(Math.min(a, b));
    const high = Math.min(this.#times.length - 1, this.#intervalOf(Math.max(a, b)) + 1);
    let least = 0;
    let most = 0;
    for (let i = low; i <= high; i++) {
      const error = this.#error[i]! - this.#error[low]!;
      least = Math.min(least, error);
      most = Math.max(most, error);
    }
    return most - least;
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

/** Cumulative difference of the accumulated time between degree 7 and degree 11, one value a knot. */
function estimateError(times: Float64Array, states: Float64Array): Float64Array {
  const count = times.length;
  const out = new Float64Array(count);
  const low = new Float64Array(6);
  const high = new Float64Array(6);
  const lowPoints = Math.min(4, count);
  const highPoints = Math.min(6, count);
  for (let i = 0; i < count - 1; i++) {
    let error = 0;
    if (highPoints > lowPoints || count > 2) {
      const firstOf = (points: number) => Math.max(0, Math.min(count - points, i - Math.floor(points / 2) + 1));
      const middle = (times[i]! + times[i + 1]!) / 2;
      // With too few knots for degree 11 the next lower degree is compared instead: a larger, safer estimate.
      const fewer = highPoints > lowPoints ? lowPoints : lowPoints - 1;
      const more = Math.max(highPoints, lowPoints);
      interpolateStates(times, states, firstOf(fewer), fewer, middle, low);
      interpolateStates(times, states, firstOf(more), more, middle, high);
      error = rate(low) - rate(high);
    } else {
      // Two knots: nothing to compare with; the whole bend of the path between them is in doubt.
      const dt = times[i + 1]! - times[i]!;
      const r = Math.hypot(states[0]!, states[1]!, states[2]!);
      const turn = Math.sqrt(GM_EARTH / r ** 3) * dt;
      error = (rate(states) * turn ** 4) / 384;
    }
    out[i + 1] = out[i]! + error * (times[i + 1]! - times[i]!);
  }
  return out;
}

/** Speed and monopole part of the clock's rate. */
function rate(s: ArrayLike<number>): number {
  const v2 = s[3]! * s[3]! + s[4]! * s[4]! + s[5]! * s[5]!;
  return -(v2 / 2 + GM_EARTH / Math.hypot(s[0]!, s[1]!, s[2]!)) / C2;
}

/** Fills in velocities at every knot from the positions alone (polynomials through up to eleven knots). */
export function deriveVelocities(times: Float64Array, states: Float64Array): void {
  const count = times.length;
  const points = Math.min(11, count);
  for (let i = 0; i < count; i++) {
    const first = Math.max(0, Math.min(count - points, i - Math.floor(points / 2)));
    for (let k = 0; k < 3; k++) states[6 * i + 3 + k] = slopeAtKnot(times, states, 6, k, first, points, i);
  }
}
