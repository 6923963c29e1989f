import { EarthAxes, type EarthOrientation } from "../bodies/index.ts";
import { at, type Notice, Problem } from "../problem/index.ts";
import { compareInstants, type Instant } from "../time/index.ts";
import { buildSurface, buildTrack } from "./buildGround.ts";
import { buildEphemeris, buildTable } from "./buildTable.ts";
import type { DescriptionOf, TrajectoryDescription } from "./description.ts";
import { toGcrf } from "./frames.ts";
import { impossibleTable, requireRising } from "./impossible.ts";
import { MeanElementTrajectory } from "./meanElements.ts";
import { MoonSurfaceTrajectory } from "./moonSurface.ts";
import { type Phase, PhasedTrajectory } from "./phases.ts";
import { implausibleState, isFast, requirePossible, weakFieldLimit } from "./plausibility.ts";
import { PropagatedTrajectory } from "./propagated.ts";
import { isotropicError, orbitErrorNotGiven, stateError } from "./stateError.ts";
import { surfaceReference } from "./surface.ts";
import type { Trajectory } from "./trajectory.ts";

/**
 * Makes a trajectory of its description. `moment` is the anchor, which a clock at rest takes as its reference.
 * Errors: impossible-state, impossible-table, with places inside the description.
 */
export function buildTrajectory(
  description: TrajectoryDescription,
  orientation: EarthOrientation,
  moment: Instant,
): Trajectory {
  const { place } = description;
  if (place === undefined) return buildKind(description, orientation, moment);
  try {
    const trajectory = buildKind(description, orientation, moment);
    if (trajectory.faultPlace !== undefined) trajectory.faultPlace = ["trajectory", ...place];
    return trajectory;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    throw new Problem(
      error.code,
      error.message,
      error.faults.map((fault) => ({ ...fault, place })),
    );
  }
}

function buildKind(description: TrajectoryDescription, orientation: EarthOrientation, moment: Instant): Trajectory {
  switch (description.kind) {
    case "state-vector":
      return buildPropagated(description, orientation);
    case "state-table":
      return buildTable(description, orientation);
    case "ephemeris":
      return buildEphemeris(description, orientation, moment);
    case "surface":
      return buildSurface(description, orientation, moment);
    case "moon-surface": {
      const reference = surfaceReference(moment);
      const { latitude, longitude, height } = description;
      return new MoonSurfaceTrajectory(reference, latitude, longitude, height, new EarthAxes(reference, orientation));
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

function buildPropagated(description: DescriptionOf<"state-vector">, orientation: EarthOrientation): Trajectory {
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

function buildPhases({ parts }: DescriptionOf<"phases">, orientation: EarthOrientation): Trajectory {
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
    if (trajectory.faultPlace !== undefined) {
      trajectory.faultPlace = ["trajectory", "parts", i, ...trajectory.faultPlace];
    }
    const last = parts[i + 1]?.from ?? trajectory.last;
    if (last !== null && compareInstants(last, from) <= 0) {
      throw impossibleTable(
        ["parts", i],
        `Part ${i} begins after the end of its trajectory.`,
        "an instant before the end of the part's own trajectory",
      );
    }
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
