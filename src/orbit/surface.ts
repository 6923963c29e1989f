import type { EarthAxes } from "../bodies/index.ts";
import type { Vec3 } from "../numeric/index.ts";
import type { Instant } from "../time/index.ts";
import type { ModelError, StateArray, Trajectory } from "./trajectory.ts";

const pieceLength = 86_400;
const shortestCut = 1;

/** Cuts a stretch of a clock on the ground in the middle, down to two seconds. */
export function halve(a: number, b: number): number | null {
  return b - a <= 2 * shortestCut ? null : (a + b) / 2;
}

/** One sigma of the height in doubt, m, as a rate g/c^2 per metre (1.09e-16). */
function heightTruncation(metres: number): ModelError {
  return { fieldTruncation: (dt) => metres * 1.09e-16 * Math.abs(dt), energyRate: 0, drag: () => 0 };
}

/** Writes an Earth-fixed position and velocity to `out` in GCRF. */
function writeInertial(axes: EarthAxes, t: number, position: Vec3, velocity: Vec3, out: StateArray): void {
  const inertial = axes.toInertial(t, position, velocity);
  out.set(inertial.position);
  out.set(inertial.velocity, 3);
}

/**
 * A clock that rests on the Earth. Its rate is nearly constant; the tides of Sun and Moon move it.
 * Accuracy: heightDoubt metres of height (the field ends at degree 4), 1.09e-16 a metre.
 */
export class SurfaceTrajectory implements Trajectory {
  readonly kind = "surface";
  readonly reference: Instant;
  readonly from = Number.NEGATIVE_INFINITY;
  readonly to = Number.POSITIVE_INFINITY;
  readonly first = null;
  readonly last = null;
  readonly axes: EarthAxes;
  readonly notices = [];
  readonly implausible = false;
  readonly coarse = false;
  readonly orbitError = null;
  readonly usesSunMoon = false;
  readonly modelError: ModelError;
  readonly #position: Vec3;

  /** `reference` is any moment near the work; position Earth-fixed, m. */
  constructor(reference: Instant, position: Vec3, heightDoubt: number, axes: EarthAxes) {
    this.reference = reference;
    this.axes = axes;
    this.#position = position;
    this.modelError = heightTruncation(heightDoubt);
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    writeInertial(this.axes, t, this.#position, [0, 0, 0], out);
  }

  pieceOf = (t: number): number => Math.floor(t / pieceLength);
  pieceStart = (index: number): number => index * pieceLength;
  split = halve;
  energyLever = (a: number, b: number): number => Math.abs(b - a);
  interpolationError = (): number => 0;
}

/** One leg of a track: from a point to the next, along the great circle of the ellipsoid's normals. */
export interface TrackLeg {
  readonly start: number;
  readonly duration: number;
  /** Earth-fixed position and velocity at a fraction in [0, 1] of the leg, m and m/s. */
  at(fraction: number): { position: Vec3; velocity: Vec3 };
}

/** A clock that is carried over the ground, at sea or in the air, leg by leg. Nothing is said outside the points. */
export class TrackTrajectory implements Trajectory {
  readonly kind = "track";
  readonly reference: Instant;
  readonly from = 0;
  readonly to: number;
  readonly first: Instant;
  readonly last: Instant;
  readonly axes: EarthAxes;
  readonly notices = [];
  readonly implausible = false;
  readonly coarse = false;
  readonly orbitError = null;
  readonly usesSunMoon = false;
  readonly modelError: ModelError;
  readonly #legs: readonly TrackLeg[];

  /** `first` and `last`: instants of the end points; legs in TT seconds since `first`. */
  constructor(first: Instant, last: Instant, legs: readonly TrackLeg[], heightDoubt: number, axes: EarthAxes) {
    this.reference = first;
    this.first = first;
    this.last = last;
    this.axes = axes;
    this.#legs = legs;
    const end = legs.at(-1)!;
    this.to = end.start + end.duration;
    this.modelError = heightTruncation(heightDoubt);
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    const leg = this.#legs[this.pieceOf(t)]!;
    const { position, velocity } = leg.at((t - leg.start) / leg.duration);
    writeInertial(this.axes, t, position, velocity, out);
  }

  pieceOf(t: number): number {
    let low = 0;
    let high = this.#legs.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (this.#legs[middle]!.start <= t) low = middle;
      else high = middle;
    }
    return low;
  }

  pieceStart(index: number): number {
    return this.#legs[index]?.start ?? this.to;
  }

  split = halve;
  energyLever = (a: number, b: number): number => Math.abs(b - a);
  interpolationError = (): number => 0;
}

/** The reference of a clock at rest: the TAI midnight at or before a moment, so that nearby requests share pieces. */
export const surfaceReference = (moment: Instant): Instant => ({
  seconds: Math.floor(moment.seconds / 86_400) * 86_400,
  picoseconds: 0,
});
