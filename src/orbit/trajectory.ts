import type { EarthAxes } from "../bodies/index.ts";
import type { Notice } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";

/** Position and velocity in GCRF: x, y, z in metres, then m/s. Written into a caller's array to spare memory. */
export type StateArray = Float64Array;

/** What is known of a trajectory's error, as the uncertainty needs it. All one sigma, SI units. */
export interface OrbitError {
  /** Of the semi-major axis, m: makes an error of time that grows. Null when nothing was given. */
  readonly semiMajorAxis: number | null;
  /** Of the product r.v, m2/s: makes an error of time that stays bounded. */
  readonly positionDotVelocity: number | null;
  /** Semi-major axis of the orbit, m (null: none, as on an escape). */
  readonly axis: number | null;
  /** True when one sigma for all directions was given, so that the result is an upper bound. */
  readonly isotropic: boolean;
}

/** What the model of forces and field leaves out along a trajectory, one sigma of accumulated time. */
export interface ModelError {
  /** Of the integrated gravitational rate along the given path, s after dt seconds. */
  fieldTruncation(dt: number): number;
  /** Of the path itself when it was propagated, as an error of accumulated time after t seconds from the epoch, s. */
  propagation(t: number): number;
}

/**
 * A path of a clock near the Earth. One interface for every kind: time is TT seconds since `reference`.
 */
export interface Trajectory {
  readonly kind: "state-vector" | "state-table" | "mean-elements" | "phases" | "surface" | "track";
  /** t = 0. */
  readonly reference: Instant;
  /** First and last usable time; infinite when unlimited. */
  readonly from: number;
  readonly to: number;
  /** The same as exact instants; null when unlimited. */
  readonly first: Instant | null;
  readonly last: Instant | null;
  readonly axes: EarthAxes;
  /** Remarks on the trajectory as given. */
  readonly notices: readonly Notice[];
  readonly implausible: boolean;
  readonly coarse: boolean;
  readonly orbitError: OrbitError | null;
  readonly modelError: ModelError;
  /** Whether the Sun's and the Moon's places went into the path itself. */
  readonly usesSunMoon: boolean;
  /** Makes states available on [from, to] inside the span; does nothing when they are. */
  extend(from: number, to: number): void;
  /** Writes the state at t, inside what was extended to. */
  state(t: number, out: StateArray): void;
  /** The pieces on which the path is smooth or nearly so; piece i runs from pieceStart(i) to pieceStart(i + 1). */
  pieceOf(t: number): number;
  pieceStart(index: number): number;
  /** A good place to cut [a, b] in two, or null when it must stay whole. */
  split(a: number, b: number): number | null;
  /** Upper estimate of the accumulated time's error from interpolation between two times, s. */
  interpolationError(a: number, b: number): number;
}
