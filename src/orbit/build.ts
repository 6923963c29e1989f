import {
  EarthAxes,
  type EarthOrientation,
  geodeticToFixed,
  geoidHeight,
  normalToFixed,
  normalToFixedRate,
} from "../bodies/index.ts";
import { cross, dot, norm, scale, type Vec3 } from "../numeric/index.ts";
import { at, type Notice, Problem } from "../problem/index.ts";
import { compareInstants, type Instant, secondsBetween } from "../time/index.ts";
import { GM_EARTH } from "../units/index.ts";
import { osculatingElements } from "./elements.ts";
import { type Frame, type Kinematics, toGcrf } from "./frames.ts";
import { type MeanElements, MeanElementTrajectory } from "./meanElements.ts";
import { type Phase, PhasedTrajectory } from "./phases.ts";
import { implausibleState, implausibleTable, isFast, requirePossible } from "./plausibility.ts";
import { PropagatedTrajectory } from "./propagated.ts";
import { SurfaceTrajectory, surfaceReference, type TrackLeg, TrackTrajectory } from "./surface.ts";
import { deriveVelocities, TableTrajectory } from "./table.ts";
import type { OrbitError, Trajectory } from "./trajectory.ts";

/** What is known of a state's error; SI, null when not given. */
export interface StateError {
  readonly positionSigma: number | null;
  readonly velocitySigma: number | null;
  readonly semiMajorAxisSigma: number | null;
  /** 6 x 6, rows first: radial, transverse, normal position (m) and velocity (m/s). */
  readonly covarianceRtn: readonly number[] | null;
}

export interface GeodeticPoint {
  /** rad */
  readonly latitude: number;
  readonly longitude: number;
  /** m, above what heightOf says. */
  readonly height: number;
}

export type HeightOf = "ellipsoid" | "geoid";

/** A trajectory as described by a user, in SI. */
export type TrajectoryDescription =
  | ({
      readonly kind: "state-vector";
      readonly frame: Frame;
      readonly epoch: Instant;
      readonly error: StateError;
    } & Kinematics)
  | {
      readonly kind: "state-table";
      readonly frame: Frame;
      readonly states: readonly { readonly epoch: Instant; readonly position: Vec3; readonly velocity: Vec3 | null }[];
    }
  | { readonly kind: "mean-elements"; readonly elements: MeanElements }
  | {
      readonly kind: "phases";
      readonly parts: readonly { readonly from: Instant; readonly trajectory: TrajectoryDescription }[];
    }
  | ({ readonly kind: "surface"; readonly heightOf: HeightOf } & GeodeticPoint)
  | {
      readonly kind: "track";
      readonly heightOf: HeightOf;
      readonly points: readonly ({ readonly at: Instant } & GeodeticPoint)[];
    };

/**
 * One sigma of the height's equivalent in potential: the field that gives the potential ends at degree 4 (15 m); above the
 * geoid the same field gives the geoid, and what is left is how gravity differs along the height.
 * Common practice, no source: 64 m/n for the height left out beyond degree n (Kaula's rule), 1e-4 of gravity.
 */
const heightDoubt = (heightOf: HeightOf, height: number): number =>
  heightOf === "geoid" ? 0.3 + 1e-4 * Math.abs(height) : 15;

/**
 * Makes a trajectory of its description. `moment` is the anchor, which a clock at rest takes as its reference.
 * Errors: impossible-state, impossible-table, with places inside the description.
 */
export function buildTrajectory(
  description: TrajectoryDescription,
  orientation: EarthOrientation,
  moment: Instant,
): Trajectory {
  switch (description.kind) {
    case "state-vector":
      return buildPropagated(description, orientation);
    case "state-table":
      return buildTable(description, orientation);
    case "surface": {
      const reference = surfaceReference(moment);
      const { latitude, longitude, height, heightOf } = description;
      const above = height + (heightOf === "geoid" ? geoidHeight(latitude, longitude) : 0);
      const position = geodeticToFixed(latitude, longitude, above);
      return new SurfaceTrajectory(
        reference,
        position,
        heightDoubt(heightOf, height),
        new EarthAxes(reference, orientation),
      );
    }
    case "track":
      return buildTrack(description, orientation);
    case "mean-elements": {
      const { elements } = description;
      return new MeanElementTrajectory(elements, new EarthAxes(elements.epoch, orientation));
    }
    case "phases":
      return buildPhases(description, orientation);
  }
}

function buildPhases({ parts }: Of<"phases">, orientation: EarthOrientation): Trajectory {
  requireRising(
    parts.map(({ from }) => from),
    "parts",
    "from",
  );
  const notices: Notice[] = [];
  const phases = parts.map(({ from, trajectory: description }, i): Phase => {
    const place = ["parts", i, "trajectory"];
    const trajectory = at(place, () => buildTrajectory(description, orientation, from));
    notices.push(...trajectory.notices.map((notice) => ({ ...notice, place: [...place, ...(notice.place ?? [])] })));
    const last = parts[i + 1]?.from ?? trajectory.last;
    if (trajectory.first !== null && compareInstants(from, trajectory.first) < 0) {
      throw impossibleTable(
        [...place.slice(0, 2), "from"],
        `Part ${i} begins before its trajectory does.`,
        "an instant inside the part's own trajectory",
      );
    }
    if (trajectory.last !== null && (last === null || compareInstants(last, trajectory.last) > 0)) {
      throw impossibleTable(
        place,
        `The trajectory of part ${i} ends before the next part begins.`,
        "a trajectory that reaches to the next part's start",
      );
    }
    return { trajectory, first: from, last };
  });
  return new PhasedTrajectory(phases, new EarthAxes(parts[0]!.from, orientation), notices);
}

type Of<K extends TrajectoryDescription["kind"]> = Extract<TrajectoryDescription, { kind: K }>;

function buildPropagated(description: Of<"state-vector">, orientation: EarthOrientation): Trajectory {
  const axes = new EarthAxes(description.epoch, orientation);
  requirePossible([], description);
  const inertial = toGcrf(description.frame, axes, 0, description);
  requirePossible([], inertial);
  const implausible = implausibleState(description.frame, description, inertial, axes, 0);
  const notices: Notice[] = [];
  if (implausible !== null) notices.push(implausible);
  if (isFast(inertial.velocity)) notices.push(weakFieldLimit);
  const orbitError = stateError(description.error, inertial);
  if (orbitError === null) notices.push(orbitErrorNotGiven);
  else if (orbitError.isotropic) notices.push(isotropicError);
  const given = { orbitError, notices, implausible: implausible !== null };
  return new PropagatedTrajectory(description.epoch, inertial.position, inertial.velocity, axes, given);
}

const weakFieldLimit: Notice = {
  code: "weak-field-limit",
  text: "The speed is beyond 1e-3 of light: the velocity term is exact, its sum with gravitation is good to second order only.",
};
const orbitErrorNotGiven: Notice = {
  code: "orbit-uncertainty-not-given",
  text: "No uncertainty of the orbit was given, so none is in the result; positionSigmaKm, velocitySigmaKmPerS, semiMajorAxisSigmaKm or covarianceRtn would bring it in.",
};
const isotropicError: Notice = {
  code: "isotropic-orbit-uncertainty",
  text: "One sigma for all directions is an upper bound: radial position and along-track speed are taken as independent.",
};

/**
 * Sigmas of semi-major axis and of r.v from what is known of a state.
 * Source: vis-viva differentiated, da = (2a^2/r^2) dr + (2a^2/GM) v.dv; linear propagation, JCGM 100:2008 eq. 13.
 */
function stateError(error: StateError, { position, velocity }: Kinematics): OrbitError | null {
  const { positionSigma, velocitySigma, semiMajorAxisSigma, covarianceRtn } = error;
  if (positionSigma === null && velocitySigma === null && semiMajorAxisSigma === null && covarianceRtn === null)
    return null;
  const r = norm(position);
  const v = norm(velocity);
  const { semiMajorAxis: a } = osculatingElements(position, velocity);
  const axis = Number.isFinite(a) && a > 0 ? a : null;
  const byRadius = (2 * a * a) / (r * r);
  const bySpeed = (2 * a * a) / GM_EARTH;
  let fromState: { axis: number; product: number } | null = null;
  if (covarianceRtn !== null) {
    const radialSpeed = dot(position, velocity) / r;
    const transverseSpeed = norm(cross(position, velocity)) / r;
    const axisLever = [byRadius, 0, 0, bySpeed * radialSpeed, bySpeed * transverseSpeed, 0];
    const productLever = [radialSpeed, transverseSpeed, 0, r, 0, 0];
    fromState = { axis: sandwich(covarianceRtn, axisLever), product: sandwich(covarianceRtn, productLever) };
  } else if (positionSigma !== null || velocitySigma !== null) {
    const p = positionSigma ?? 0;
    const s = velocitySigma ?? 0;
    fromState = { axis: Math.hypot(byRadius * p, bySpeed * v * s), product: Math.hypot(v * p, r * s) };
  }
  return {
    semiMajorAxis: semiMajorAxisSigma ?? fromState?.axis ?? null,
    positionDotVelocity: fromState?.product ?? null,
    axis,
    isotropic: covarianceRtn === null && semiMajorAxisSigma === null,
  };
}

/** sqrt(g C g) of a covariance of six. */
function sandwich(covariance: readonly number[], lever: readonly number[]): number {
  let variance = 0;
  for (let i = 0; i < 6; i++) {
    for (let j = 0; j < 6; j++) variance += lever[i]! * lever[j]! * covariance[6 * i + j]!;
  }
  return Math.sqrt(Math.max(0, variance));
}

function buildTable(description: Of<"state-table">, orientation: EarthOrientation): Trajectory {
  const { states, frame } = description;
  const withVelocity = states.filter((state) => state.velocity !== null).length;
  if (withVelocity !== 0 && withVelocity !== states.length) {
    const index = states.findIndex((state) => (state.velocity === null) === withVelocity * 2 > states.length);
    throw impossibleTable(
      ["states", index],
      "Some states have a velocity and some have none.",
      "a velocity in every state or in none",
    );
  }
  const least = withVelocity > 0 ? 2 : 5;
  if (states.length < least) {
    throw impossibleTable(
      ["states"],
      `${states.length} states are too few for interpolation.`,
      `at least ${least} states ${withVelocity > 0 ? "with" : "without"} velocities`,
    );
  }
  requireRising(
    states.map((state) => state.epoch),
    "states",
    "epoch",
  );
  const reference = states[0]!.epoch;
  const axes = new EarthAxes(reference, orientation);
  const times = Float64Array.from(states, (state) => secondsBetween(reference, state.epoch));
  const values = new Float64Array(6 * states.length);
  let fast = false;
  for (const [i, state] of states.entries()) {
    const given: Kinematics = { position: state.position, velocity: state.velocity ?? [0, 0, 0] };
    requirePossible(["states", i], given);
    const { position, velocity } = toGcrf(frame, axes, times[i]!, given);
    requirePossible(["states", i], { position, velocity });
    if (isFast(velocity)) fast = true;
    values.set([...position, ...velocity], 6 * i);
  }
  const notices: Notice[] = [];
  if (withVelocity === 0) {
    deriveVelocities(times, values);
    notices.push({
      code: "velocities-derived",
      text: "The table has no velocities; they were derived from the positions, which loses most at its ends.",
      place: ["states"],
    });
  }
  const implausible = implausibleTable(frame, times, values, axes);
  if (implausible !== null) notices.push(implausible);
  if (fast) notices.push(weakFieldLimit);
  notices.push(orbitErrorNotGiven);
  return new TableTrajectory(reference, states.at(-1)!.epoch, times, values, axes, {
    notices,
    implausible: implausible !== null,
  });
}

function impossibleTable(place: (string | number)[], detail: string, expected: string): Problem {
  return new Problem("impossible-table", detail, [{ place, expected }]);
}

function requireRising(instants: readonly Instant[], list: string, field: string): void {
  for (let i = 1; i < instants.length; i++) {
    const order = compareInstants(instants[i - 1]!, instants[i]!);
    if (order < 0) continue;
    const what = order === 0 ? "has the same instant as the one before it" : "lies before the one before it";
    throw impossibleTable([list, i, field], `Entry ${i} of ${list} ${what}.`, "instants that rise from entry to entry");
  }
}

function buildTrack(description: Of<"track">, orientation: EarthOrientation): Trajectory {
  const { points, heightOf } = description;
  if (points.length < 2) throw impossibleTable(["points"], "A track needs two points.", "at least 2 points");
  requireRising(
    points.map((point) => point.at),
    "points",
    "at",
  );
  const reference = points[0]!.at;
  const axes = new EarthAxes(reference, orientation);
  const above = points.map((p) => p.height + (heightOf === "geoid" ? geoidHeight(p.latitude, p.longitude) : 0));
  const legs: TrackLeg[] = [];
  for (let i = 0; i + 1 < points.length; i++) {
    const start = secondsBetween(reference, points[i]!.at);
    const duration = secondsBetween(points[i]!.at, points[i + 1]!.at);
    legs.push(leg(normal(points[i]!), normal(points[i + 1]!), above[i]!, above[i + 1]!, start, duration, i + 1));
  }
  const highest = Math.max(...points.map((p) => Math.abs(p.height)));
  return new TrackTrajectory(reference, points.at(-1)!.at, legs, heightDoubt(heightOf, highest), axes);
}

const normal = ({ latitude, longitude }: GeodeticPoint): Vec3 => [
  Math.cos(latitude) * Math.cos(longitude),
  Math.cos(latitude) * Math.sin(longitude),
  Math.sin(latitude),
];

/** A leg on which the normal turns evenly along a great circle and the height changes evenly. */
function leg(
  from: Vec3,
  to: Vec3,
  low: number,
  high: number,
  start: number,
  duration: number,
  index: number,
): TrackLeg {
  const axis = cross(from, to);
  const sine = norm(axis);
  const angle = Math.atan2(sine, dot(from, to));
  if (Math.PI - angle < 1e-6) {
    throw impossibleTable(
      ["points", index],
      "Two neighbouring points are antipodes: the way between them is open.",
      "a point on the way between them",
    );
  }
  const metresPerSecond = Math.hypot(angle * 6.4e6, high - low) / duration;
  if (metresPerSecond > 12_000) {
    const speed = (metresPerSecond / 1000).toPrecision(3);
    throw impossibleTable(
      ["points", index],
      `Between two points the track would move at ${speed} km/s.`,
      "a speed below 12 km/s; an orbit is a state-vector or a state-table",
    );
  }
  const pole: Vec3 = sine === 0 ? [0, 0, 0] : scale(axis, 1 / sine);
  const across = cross(pole, from);
  const turnRate = angle / duration;
  const climb = (high - low) / duration;
  return {
    start,
    duration,
    at(fraction) {
      const c = Math.cos(angle * fraction);
      const s = Math.sin(angle * fraction);
      const n: Vec3 =
        sine === 0 ? from : [from[0] * c + across[0] * s, from[1] * c + across[1] * s, from[2] * c + across[2] * s];
      const rate = scale(cross(pole, n), turnRate);
      const height = low + (high - low) * fraction;
      return { position: normalToFixed(n, height), velocity: normalToFixedRate(n, rate, height, climb) };
    },
  };
}
