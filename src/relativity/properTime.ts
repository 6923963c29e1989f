import { antiderivativeInto, ChebyshevBasis, evaluateSeries } from "../numeric/index.ts";
import { innermost, type Trajectory } from "../orbit/index.ts";
import { invariant, Problem } from "../problem/index.ts";
import { C2 } from "../units/index.ts";
import { EnvironmentReader, type Need } from "./environment.ts";
import type { RateTerm } from "./rateTerm.ts";

const degree = 16;
const basis = new ChebyshevBasis(degree);
const points = degree + 1;
/** Coefficients of an antiderivative. */
const width = points + 1;
/** A segment is good when what its last two coefficients leave is below this, s of accumulated time. */
const tolerance = 1e-17;

/** A stretch on which every integrated term is one series. */
interface Segment {
  readonly start: number;
  readonly end: number;
  /** Antiderivatives, zero at the start: `width` coefficients a term, over x in [-1, 1]. */
  readonly series: Float64Array;
  /** Value of each term at the end. */
  readonly gain: Float64Array;
}

interface Piece {
  readonly segments: readonly Segment[];
  /** Accumulated value of each integrated term at the start of each segment, from the origin; then at the end. */
  readonly before: readonly Float64Array[];
}

/**
 * Proper time less TT along a trajectory, term by term: rates are sampled at Chebyshev points on segments that are halved
 * until their series end in nothing, and integrated in closed form. Built once, extended as asked.
 * The pieces belong to the trajectory, so a value never depends on who asked before.
 * Accuracy: 1e-17 s a segment, below 1e-5 ps in ten days on every kind of orbit that was tried.
 * Source: Mason & Handscomb (2003), section 2.4.4, for the antiderivative.
 */
export class ProperTime {
  readonly terms: readonly RateTerm[];
  readonly trajectory: Trajectory;
  readonly #integrated: readonly { readonly term: RateTerm; readonly index: number }[];
  readonly #reader: EnvironmentReader;
  readonly #origin: number;
  readonly #pieces = new Map<number, Piece>();
  /** Rates at the points of the segment in work, `points` a term, and their coefficients. */
  readonly #samples: Float64Array;
  readonly #coefficients = new Float64Array(points);
  /** First and last piece that are built; empty while first > last. */
  #first: number;
  #last: number;
  #segments = 0;
  /** The start that was asked for last: nearly always the anchor. */
  #lastFrom = Number.NaN;
  #lastFromValues: Float64Array = new Float64Array(0);

  /** `origin`: time (TT seconds since the trajectory's reference) from which is counted outwards, inside the span. */
  constructor(trajectory: Trajectory, terms: readonly RateTerm[], origin: number) {
    this.trajectory = trajectory;
    this.terms = terms;
    this.#integrated = terms.map((term, index) => ({ term, index })).filter(({ term }) => !term.constant);
    this.#reader = new EnvironmentReader(trajectory, new Set(terms.flatMap((term): readonly Need[] => term.needs)));
    this.#origin = this.#pieceOf(origin);
    this.#first = this.#origin;
    this.#last = this.#origin - 1;
    this.#samples = new Float64Array(points * this.#integrated.length);
  }

  /** Memory held by the integral and its path, roughly. */
  get bytes(): number {
    return this.#segments * 8 * (this.#integrated.length * (width + 2) + 16) + (this.trajectory.bytes?.() ?? 0);
  }

  /** Rate of every term at t, dimensionless. */
  rates(t: number): number[] {
    this.trajectory.extend(t, t);
    if (t < this.trajectory.from || t > this.trajectory.to) throw this.#beyond(t);
    const environment = this.#reader.read(t);
    return this.terms.map((term) => term.rate(environment));
  }

  /** Accumulated value of every term between two times of the span, s, by TT seconds since the reference. */
  between(from: number, to: number): number[] {
    if (from !== this.#lastFrom) {
      this.#lastFromValues = this.#accumulated(from);
      this.#lastFrom = from;
    }
    const a = this.#lastFromValues;
    const b = this.#accumulated(to);
    const out = this.terms.map((term) => (term.constant ? term.rate(this.#reader.environment) * (to - from) : 0));
    for (const [k, { index }] of this.#integrated.entries()) out[index] = b[k]! - a[k]!;
    return out;
  }

  #accumulated(t: number): Float64Array {
    const { trajectory } = this;
    if (t < trajectory.from || t > trajectory.to) throw this.#beyond(t);
    const index = this.#pieceOf(t);
    this.#buildTo(index);
    if (t < trajectory.from || t > trajectory.to) throw this.#beyond(t);
    const piece = this.#pieces.get(index)!;
    let low = 0;
    let high = piece.segments.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (piece.segments[middle]!.start <= t) low = middle;
      else high = middle;
    }
    const segment = piece.segments[low]!;
    const x = (2 * (t - segment.start)) / (segment.end - segment.start) - 1;
    const out = new Float64Array(this.#integrated.length);
    for (let k = 0; k < out.length; k++) {
      out[k] = piece.before[low]![k]! + evaluateSeries(segment.series, x, k * width, width);
    }
    return out;
  }

  #beyond(t: number): Error {
    const { trajectory } = this;
    invariant(trajectory.leaves !== undefined, "time is accumulated inside the span only");
    return trajectory.leaves(t);
  }

  /** The piece that holds t; the very end of a trajectory belongs to the piece before it, when none begins there. */
  #pieceOf(t: number): number {
    const index = this.trajectory.pieceOf(t);
    return this.trajectory.pieceStart(index) >= this.trajectory.to ? index - 1 : index;
  }

  #buildTo(index: number): void {
    while (this.#last < index) {
      const segments = this.#integrate(this.#last + 1);
      const before = [this.#pieces.get(this.#last)?.before.at(-1) ?? new Float64Array(this.#integrated.length)];
      for (const segment of segments) before.push(combine(before.at(-1)!, segment.gain, 1));
      this.#pieces.set(++this.#last, { segments, before });
    }
    while (this.#first > index) {
      const segments = this.#integrate(this.#first - 1);
      const before = [this.#pieces.get(this.#first)?.before[0] ?? new Float64Array(this.#integrated.length)];
      for (const segment of segments.toReversed()) before.unshift(combine(before[0]!, segment.gain, -1));
      this.#pieces.set(--this.#first, { segments, before });
    }
  }

  /** The segments of one piece in order of time. */
  #integrate(index: number): Segment[] {
    const { trajectory } = this;
    trajectory.extend(
      Math.max(trajectory.from, trajectory.pieceStart(index)),
      Math.min(trajectory.to, trajectory.pieceStart(index + 1)),
    );
    // Extending may have found that the path ends inside the piece.
    const start = Math.max(trajectory.from, trajectory.pieceStart(index));
    const end = Math.min(trajectory.to, trajectory.pieceStart(index + 1));
    if (!(start < end)) throw this.#beyond(end);
    const out: Segment[] = [];
    const waiting: [number, number][] = [[start, end]];
    while (waiting.length > 0) {
      const [a, b] = waiting.pop()!;
      const segment = this.#segment(a, b, trajectory.split(a, b));
      if (typeof segment === "number") waiting.push([segment, b], [a, segment]);
      else out.push(segment);
    }
    this.#segments += out.length;
    return out;
  }

  /** One segment, or the place where it must be cut. */
  #segment(a: number, b: number, cut: number | null): Segment | number {
    const halfLength = (b - a) / 2;
    const integrated = this.#integrated;
    const count = integrated.length;
    const samples = this.#samples;
    const reader = this.#reader;
    for (let p = 0; p < points; p++) {
      // At the very ends of a stretch the points stay inside it.
      const environment = reader.read(a + halfLength * (1 + basis.points[p]!));
      if (!(environment.speedSquared < C2)) throw impossiblePath("the path would reach the speed of light");
      if (!(environment.distance > innermost - 10e3)) throw impossiblePath("the path would pass through the Earth");
      for (let k = 0; k < count; k++) samples[k * points + p] = integrated[k]!.term.rate(environment);
    }
    if (cut !== null && this.#leaves(halfLength) > tolerance) return cut;
    const c = this.#coefficients;
    const series = new Float64Array(count * width);
    const gain = new Float64Array(count);
    for (let k = 0; k < count; k++) {
      basis.coefficientsInto(samples, k * points, c, 0);
      antiderivativeInto(c, 0, points, halfLength, series, k * width);
      gain[k] = evaluateSeries(series, 1, k * width, width);
    }
    return { start: a, end: b, series, gain };
  }

  /** What the last two coefficients leave at most in any term, s. */
  #leaves(halfLength: number): number {
    let most = 0;
    for (let at = 0; at < this.#samples.length; at += points) {
      const last = basis.coefficient(degree, this.#samples, at);
      const before = basis.coefficient(degree - 1, this.#samples, at);
      most = Math.max(most, (Math.abs(before) + Math.abs(last)) * halfLength);
    }
    return most;
  }
}

function combine(a: Float64Array, b: Float64Array, sign: 1 | -1): Float64Array {
  return a.map((value, k) => value + sign * b[k]!);
}

/** A table can be good at each of its states and impossible between them. */
function impossiblePath(what: string): Problem {
  const expected = "states that are closer together, or velocities that fit the positions";
  const place = ["trajectory", "states"];
  return new Problem("impossible-table", `Between the given states ${what}.`, [{ place, expected }], true);
}
