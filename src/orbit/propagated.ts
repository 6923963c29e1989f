import type { EarthAxes } from "../bodies/index.ts";
import { accumulateKnot, type Vec3 } from "../numeric/index.ts";
import { type Notice, type Place, Problem } from "../problem/index.ts";
import { addSeconds, defaultLeapSeconds, formatInstant, type Instant } from "../time/index.ts";
import { DAY, GM_EARTH } from "../units/index.ts";
import { type OsculatingElements, osculatingElements } from "./elements.ts";
import { ForceModel } from "./forces.ts";
import { fieldTruncation, leverAlong, propagationError } from "./modelError.ts";
import { SteppedPath } from "./summedMultistep.ts";
import type { OrbitError, StateArray, Trajectory } from "./trajectory.ts";

/** A state is propagated so far from its epoch, either way. */
export const propagationReach = 400 * DAY;

/** Nearer to the centre than this nothing is propagated: the state was not what was meant, and steps would vanish. */
export const innermost = 1_000e3;
/** Further out the geocentric formula gives way to the barycentric one. */
export const outermost = 1_500_000e3;

/** A low orbit takes 617 000 steps in 400 days, one with e = 0.74 a million; more is asked by no path that a clock takes. */
const mostSteps = 1_500_000;

/** The four knots about an interval of the uniform lattice, at -1, 0, 1, 2: slopes of their Lagrange polynomials. */
const knotSlopes = [-11 / 6, -1 / 2, 1 / 2, 11 / 6];

/**
 * A state vector, propagated. The path is a lattice of states at equal steps about the epoch, chosen from the fastest
 * part of the orbit, read by osculating interpolation of degree 7.
 * Accuracy: integration below 1e-3 ps of clock time in ten days; the model of forces is what limits (see modelError).
 */
export class PropagatedTrajectory implements Trajectory {
  readonly kind = "state-vector";
  readonly reference: Instant;
  /** Shorter than the reach once the path is known to leave the region of the model. */
  from = -propagationReach;
  to = propagationReach;
  readonly first: Instant;
  readonly last: Instant;
  readonly axes: EarthAxes;
  faultPlace: Place = ["trajectory", "velocityKmPerS"];
  readonly notices: readonly Notice[];
  readonly implausible: boolean;
  readonly coarse = false;
  readonly orbitError: OrbitError | null;
  readonly usesSunMoon = true;
  readonly modelError;
  readonly #path: SteppedPath;
  readonly #stepsPerPiece: number;
  readonly #axis: number;

  /** Position and velocity at `epoch` in GCRF, m and m/s. */
  constructor(
    epoch: Instant,
    position: Vec3,
    velocity: Vec3,
    axes: EarthAxes,
    given: { orbitError: OrbitError | null; notices: readonly Notice[]; implausible: boolean },
  ) {
    this.reference = epoch;
    this.first = addSeconds(epoch, -propagationReach);
    this.last = addSeconds(epoch, propagationReach);
    this.axes = axes;
    this.notices = given.notices;
    this.implausible = given.implausible;
    this.orbitError = given.orbitError;
    const elements = osculatingElements(position, velocity);
    const step = stepFor(elements, position);
    this.#path = new SteppedPath(step, new ForceModel(epoch, axes), position, velocity);
    this.#stepsPerPiece = 64;
    this.#axis = elements.semiMajorAxis;
    this.modelError = {
      fieldTruncation: (dt: number) => fieldTruncation(elements.perigee, dt),
      ...propagationError(elements),
    };
  }

  extend(from: number, to: number): void {
    const h = this.#path.step;
    if (Math.max(-from, to) / h > mostSteps) throw tooLow(h, this.faultPlace);
    const after = Math.floor(to / h) + 3;
    const before = Math.floor(from / h) - 2;
    const reachedAfter = this.#path.growTo(Math.max(0, after), belongs);
    const reachedBefore = this.#path.growTo(Math.min(-1, before), belongs);
    // Three steps short of the last good state, so that every interval has its knots.
    if (reachedAfter < after) this.to = Math.min(this.to, (reachedAfter - 3) * h);
    if (reachedBefore > before) this.from = Math.max(this.from, (reachedBefore + 3) * h);
  }

  bytes(): number {
    return this.#path.statesOf(0).byteLength + this.#path.statesOf(-1).byteLength;
  }

  /** Why the path ends where it does, when that is before its reach. */
  leaves(t: number): Problem {
    const end = t > 0 ? this.to : this.from;
    const state = new Float64Array(6);
    this.state(end, state);
    const r = Math.hypot(state[0]!, state[1]!, state[2]!);
    const when = formatInstant(addSeconds(this.reference, end), "TAI", defaultLeapSeconds);
    const meant = this.notices.find(({ code }) => code === "implausible-orbit")?.text ?? "";
    const where =
      r < outermost / 2
        ? `inside of the Earth (${Math.round(r / 1000)} km from its centre at ${when} TAI). ${meant}`.trim()
        : `border of the Earth's surroundings (${Math.round(r / 1000)} km away at ${when} TAI), where the geocentric model ends.`;
    return new Problem(
      "impossible-state",
      `The propagated path reaches the ${where}`,
      [
        {
          place: this.faultPlace,
          expected: "a state whose path stays outside the Earth and within 1 500 000 km of it, or readings before that",
        },
      ],
      true,
    );
  }

  state(t: number, out: StateArray): void {
    const h = this.#path.step;
    const index = Math.floor(t / h);
    const s = t / h - index;
    const a = s + 1;
    const b = s;
    const c = s - 1;
    const d = s - 2;
    out.fill(0, 0, 6);
    const dt = t - index * h;
    // Lagrange's polynomials on -1, 0, 1, 2 and their derivatives.
    this.#addKnot(index - 1, dt + h, -(b * c * d) / 6, -(b * c + b * d + c * d) / 6, 0, out);
    this.#addKnot(index, dt, (a * c * d) / 2, (a * c + a * d + c * d) / 2, 1, out);
    this.#addKnot(index + 1, dt - h, -(a * b * d) / 2, -(a * b + a * d + b * d) / 2, 2, out);
    this.#addKnot(index + 2, dt - 2 * h, (a * b * c) / 6, (a * b + a * c + b * c) / 6, 3, out);
  }

  #addKnot(index: number, d: number, l: number, dl: number, knot: number, out: StateArray): void {
    const h = this.#path.step;
    const at = 6 * Math.abs(index);
    accumulateKnot(this.#path.statesOf(index), at, d, l, dl / h, knotSlopes[knot]! / h, out);
  }

  pieceOf(t: number): number {
    return Math.floor(t / (this.#path.step * this.#stepsPerPiece));
  }

  pieceStart(index: number): number {
    return index * this.#path.step * this.#stepsPerPiece;
  }

  split(a: number, b: number): number | null {
    const h = this.#path.step;
    const first = Math.round(a / h);
    const last = Math.round(b / h);
    return last - first < 2 ? null : Math.floor((first + last) / 2) * h;
  }

  energyLever(a: number, b: number): number {
    return leverAlong(this, this.#axis, a, b);
  }

  interpolationError(a: number, b: number): number {
    // 0.001 ps in ten days, the bound that step halving holds for every class of orbit (test/orbit/propagated).
    return (1e-15 / (10 * DAY)) * Math.abs(b - a);
  }
}

function belongs(states: Float64Array, at: number): boolean {
  const r = Math.hypot(states[at]!, states[at + 1]!, states[at + 2]!);
  return r > innermost && r < outermost;
}

/** A whole number of seconds in which the fastest part of the orbit turns by about 0.05 rad. */
function stepFor(elements: OsculatingElements, position: Vec3): number {
  const nearest = Math.max(innermost, Math.min(elements.perigee, Math.hypot(...position)));
  const fastest = Math.sqrt((GM_EARTH * (1 + Math.min(elements.eccentricity, 3))) / nearest ** 3);
  const apogee = elements.semiMajorAxis > 0 ? elements.semiMajorAxis * (1 + elements.eccentricity) : Infinity;
  // An orbit that may pass the Moon closely gets the step of a low lunar orbit.
  const most = apogee > 250_000e3 ? 60 : 600;
  const step = Math.min(most, Math.floor(0.05 / fastest));
  if (step < 1) throw new Problem("impossible-state", "The state moves too fast for its distance to be propagated.");
  return step;
}

function tooLow(step: number, place: Place): Problem {
  const days = Math.floor((mostSteps * step) / DAY);
  return new Problem(
    "impossible-state",
    `The orbit passes so near to the Earth's centre that it can be propagated for ${days} days only.`,
    [
      {
        place,
        expected: `a state whose perigee lies outside the Earth, or readings within ${days} days of its epoch`,
      },
    ],
    true,
  );
}
