import type { EarthAxes } from "../bodies/index.ts";
import { invariant, type Notice, type Problem } from "../problem/index.ts";
import { type Instant, secondsBetween } from "../time/index.ts";
import type { ModelError, OrbitError, StateArray, Trajectory } from "./trajectory.ts";

/** One stretch of a path: a trajectory and when it counts. */
export interface Phase {
  readonly trajectory: Trajectory;
  readonly first: Instant;
  /** Null: without end. */
  readonly last: Instant | null;
}

interface Part extends Phase {
  /** Start and end on the whole path's axis, s; add `shift` to come to the trajectory's own axis. */
  readonly start: number;
  readonly end: number;
  readonly shift: number;
  /** The trajectory's own piece in which the part begins, and the number of its pieces before this part. */
  readonly firstPiece: number;
  readonly piecesBefore: number;
}

/**
 * Several trajectories one after the other, each from its own start to the next one's. The path may jump from one to the
 * next (a manoeuvre, another source); the time along it does not.
 */
export class PhasedTrajectory implements Trajectory {
  readonly kind = "phases";
  readonly reference: Instant;
  readonly from = 0;
  to: number;
  readonly first: Instant;
  readonly last: Instant | null;
  readonly axes: EarthAxes;
  readonly notices: readonly Notice[];
  readonly implausible: boolean;
  readonly coarse: boolean;
  readonly orbitError: OrbitError | null;
  readonly usesSunMoon: boolean;
  readonly modelError: ModelError;
  readonly #parts: readonly Part[];

  /** `phases` follow each other without a gap, each within its trajectory's span; `axes` begin at the first. */
  constructor(phases: readonly Phase[], axes: EarthAxes, notices: readonly Notice[]) {
    const [head] = phases;
    invariant(head !== undefined, "a path of phases has at least one");
    this.reference = head.first;
    this.first = head.first;
    this.last = phases.at(-1)!.last;
    this.axes = axes;
    this.notices = notices;
    const parts: Part[] = [];
    let piecesBefore = 0;
    for (const phase of phases) {
      const { trajectory, first, last } = phase;
      const start = secondsBetween(this.reference, first);
      const end = last === null ? Number.POSITIVE_INFINITY : secondsBetween(this.reference, last);
      const shift = secondsBetween(trajectory.reference, this.reference);
      const firstPiece = trajectory.pieceOf(start + shift);
      parts.push({ ...phase, start, end, shift, firstPiece, piecesBefore });
      if (last !== null) {
        const lastPiece = trajectory.pieceOf(end + shift);
        const beginsThere = trajectory.pieceStart(lastPiece) >= end + shift;
        piecesBefore += lastPiece - firstPiece + (beginsThere ? 0 : 1);
      }
    }
    this.#parts = parts;
    this.to = parts.at(-1)!.end;
    const trajectories = phases.map(({ trajectory }) => trajectory);
    this.implausible = trajectories.some(({ implausible }) => implausible);
    this.coarse = trajectories.some(({ coarse }) => coarse);
    this.usesSunMoon = trajectories.some(({ usesSunMoon }) => usesSunMoon);
    this.orbitError = worst(trajectories);
    this.modelError = {
      fieldTruncation: (dt) => Math.max(...trajectories.map(({ modelError }) => modelError.fieldTruncation(dt))),
      energyRate: Math.max(...trajectories.map(({ modelError }) => modelError.energyRate)),
      drag: (t) => this.#dragged(t),
    };
  }

  extend(from: number, to: number): void {
    for (const { trajectory, start, end, shift } of this.#parts) {
      const a = Math.max(from, start);
      const b = Math.min(to, end);
      if (a > b) continue;
      trajectory.extend(a + shift, b + shift);
      // A part that ends by itself ends the whole path, for there is no way on.
      if (trajectory.to - shift < end) this.to = Math.min(this.to, trajectory.to - shift);
    }
  }

  state(t: number, out: StateArray): void {
    const { trajectory, shift } = this.#partAt(t);
    trajectory.state(t + shift, out);
  }

  leaves(t: number): Problem {
    const { trajectory, shift } = this.#partAt(t);
    invariant(trajectory.leaves !== undefined, "only a propagated part can end by itself");
    return trajectory.leaves(t + shift);
  }

  pieceOf(t: number): number {
    const { trajectory, shift, firstPiece, piecesBefore } = this.#partAt(t);
    return piecesBefore + trajectory.pieceOf(t + shift) - firstPiece;
  }

  pieceStart(index: number): number {
    const part = this.#parts.findLast(({ piecesBefore }) => piecesBefore <= index) ?? this.#parts[0]!;
    const { trajectory, start, end, shift, firstPiece, piecesBefore } = part;
    if (index <= piecesBefore) return start;
    return Math.min(end, trajectory.pieceStart(firstPiece + index - piecesBefore) - shift);
  }

  split(a: number, b: number): number | null {
    const { trajectory, shift } = this.#partAt((a + b) / 2);
    const cut = trajectory.split(a + shift, b + shift);
    return cut === null || !(cut - shift > a && cut - shift < b) ? null : cut - shift;
  }

  interpolationError(a: number, b: number): number {
    return this.#sum(a, b, (trajectory, from, to) => trajectory.interpolationError(from, to));
  }

  energyLever(a: number, b: number): number {
    return this.#sum(a, b, (trajectory, from, to) => trajectory.energyLever(from, to));
  }

  /** Adds up what `value` gives for each part between a and b, on the part's own axis. */
  #sum(a: number, b: number, value: (trajectory: Trajectory, from: number, to: number) => number): number {
    const [low, high] = a < b ? [a, b] : [b, a];
    let total = 0;
    for (const { trajectory, start, end, shift } of this.#parts) {
      const [from, to] = [Math.max(low, start), Math.min(high, end)];
      if (from < to) total += value(trajectory, from + shift, to + shift);
    }
    return total;
  }

  /** A border belongs to the phase that begins there, the very end to the last. */
  #partAt(t: number): Part {
    return this.#parts.findLast(({ start }) => start <= t) ?? this.#parts[0]!;
  }

  /** What drag has done to the time from the start to t, phase by phase. */
  #dragged(t: number): number {
    let total = 0;
    for (const { trajectory, start, end, shift } of this.#parts) {
      const until = Math.min(t, end);
      if (until <= start) break;
      const [a, b] = [start + shift, until + shift];
      const { drag } = trajectory.modelError;
      total += a < 0 && b > 0 ? drag(a) + drag(b) : Math.abs(drag(b) - drag(a));
    }
    return total;
  }
}

/** The error of the phase whose semi-major axis moves the clock most; null when none has one. */
function worst(trajectories: readonly Trajectory[]): OrbitError | null {
  const errors = trajectories.map(({ orbitError }) => orbitError).filter((error) => error !== null);
  const lever = ({ semiMajorAxis, axis }: OrbitError): number =>
    semiMajorAxis === null || axis === null ? 0 : semiMajorAxis / (axis * axis);
  return errors.reduce<OrbitError | null>(
    (most, error) => (most === null || lever(error) > lever(most) ? error : most),
    null,
  );
}
