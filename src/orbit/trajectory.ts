import type { EarthAxes } from "../bodies/index.ts";
import type { Notice, Place, Problem } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";

/** Position and velocity in GCRF: x, y, z in metres, then m/s. Written into a caller's array to spare memory. */
export type StateArray = Float64Array;

/** What is known of a trajectory's error, as the uncertainty needs it. All one sigma, SI units. */
export interface OrbitError {
  /** Of the semi-major axis, m: makes an error of time that grows. Null when nothing was given. */
  readonly semiMajorAxis: number | null;
  /** Of the product r.v, m2/s: makes an error of time that stays bounded. */
  readonly positionDotVelocity: number | null;
  /** Size of the orbit's semi-major axis, m (null: a parabola). */
  readonly axis: number | null;
  /** True when one sigma for all directions was given, so that the result is an upper bound. */
  readonly isotropic: boolean;
}

/** What the model of forces and field leaves out along a trajectory, one sigma of accumulated time. */
export interface ModelError {
  /** Of the integrated gravitational rate along the given path, s after dt seconds. */
  fieldTruncation(dt: number): number;
  /** Of a propagated path's energy, as the rate that it gives a clock on a circular orbit; zero when the path is given. */
  readonly energyRate: number;
  /** Of the path by drag, as an error of accumulated time after t seconds from the epoch, s. */
  drag(t: number): number;
}

/**
 * A path of a clock near the Earth. One interface for every kind: time is TT seconds since `reference`.
 */
export interface Trajectory {
  readonly kind: "state-vector" | "state-table" | "mean-elements" | "phases" | "surface" | "track";
  /** t = 0. */
  readonly reference: Instant;
  /** First and last usable time; infinite when unlimited. May draw in while the path is extended. */
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
  /** Makes states available on [from, to] inside the span, as far as the path goes; does nothing when they are. */
  extend(from: number, to: number): void;
  /** Memory held by the path, where it is much. */
  bytes?(): number;
  /** Where faults are told that are found while the path is followed, from the top of the request. */
  faultPlace?: Place;
  /** What to tell of a time beyond the path's own end, which extending found. */
  leaves?(t: number): Problem;
  /** Writes the state at t, inside what was extended to. */
  state(t: number, out: StateArray): void;
  /** The pieces on which the path is smooth or nearly so; piece i runs from pieceStart(i) to pieceStart(i + 1). */
  pieceOf(t: number): number;
  pieceStart(index: number): number;
  /** A good place to cut [a, b] in two, or null when it must stay whole. */
  split(a: number, b: number): number | null;
  /**
   * For how long an error of the orbit's energy, made at the epoch, acts on the time between a and b: |b - a| on a circular
   * orbit or a given path, s. On an eccentric one the error has also moved the phase since the epoch.
   */
  energyLever(a: number, b: number): number;
  /** Upper estimate of the accumulated time's error from interpolation between two times, s. */
  interpolationError(a: number, b: number): number;
}
