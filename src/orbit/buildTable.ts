import { EarthAxes, type EarthOrientation, moonTable } from "../bodies/index.ts";
import { norm, type Vec3 } from "../numeric/index.ts";
import { at, type Notice, Problem } from "../problem/index.ts";
import {
  compareInstants,
  defaultLeapSeconds,
  formatInstant,
  type Instant,
  secondsBetween,
  ttSecondsSinceJ2000,
} from "../time/index.ts";
import type { DescriptionOf, SegmentDescription, TableDescription } from "./description.ts";
import { type Kinematics, toGcrf } from "./frames.ts";
import { impossibleTable, requireRising } from "./impossible.ts";
import { moonRadius } from "./moonSurface.ts";
import { type Phase, PhasedTrajectory } from "./phases.ts";
import { implausibleTable, isFast, requirePossible, requireSlowerThanLight, weakFieldLimit } from "./plausibility.ts";
import { orbitErrorNotGiven, stateError } from "./stateError.ts";
import { deriveVelocities, type TableMethod, TableTrajectory, usualMethod } from "./table.ts";
import type { OrbitError, Trajectory } from "./trajectory.ts";

/** A table of states. Errors: impossible-table, impossible-state. */
export function buildTable(description: DescriptionOf<"state-table">, orientation: EarthOrientation): Trajectory {
  return tableOf(description, orientation, usualMethod, null);
}

function tableOf(
  { states, frame, center }: TableDescription,
  orientation: EarthOrientation,
  method: TableMethod,
  errorOf: ((values: Float64Array, times: Float64Array) => OrbitError | null) | null,
): TableTrajectory {
  const withVelocity = requireAlike(states);
  requireRising(
    states.map(({ epoch }) => epoch),
    "states",
    "epoch",
  );
  const first = states[0]!.epoch;
  const axes = new EarthAxes(first, orientation);
  const times = Float64Array.from(states, ({ epoch }) => secondsBetween(first, epoch));
  const values = new Float64Array(6 * states.length);
  let fast = false;
  for (const [i, state] of states.entries()) {
    const given: Kinematics = { position: state.position, velocity: state.velocity ?? [0, 0, 0] };
    const place = ["states", i];
    const { position, velocity } =
      center === "Moon"
        ? fromMoon(place, toGcrf(frame, axes, times[i]!, given), state.epoch)
        : fromEarth(place, frame, axes, times[i]!, given);
    if (isFast(velocity)) fast = true;
    values.set([...position, ...velocity], 6 * i);
  }
  const notices: Notice[] = [];
  const rateDoubt = withVelocity ? null : deriveVelocities(times, values);
  if (rateDoubt !== null) {
    notices.push({
      code: "velocities-derived",
      text: "The table has no velocities; they were derived from the positions, which loses most at its ends.",
      place: ["states"],
    });
  }
  const implausible = implausibleTable(frame, times, values, first, axes);
  if (implausible !== null) notices.push(implausible);
  if (fast) notices.push(weakFieldLimit);
  const orbitError = errorOf?.(values, times) ?? null;
  if (orbitError === null) notices.push(orbitErrorNotGiven);
  return new TableTrajectory(first, states.at(-1)!.epoch, times, values, axes, {
    notices,
    implausible: implausible !== null,
    method,
    orbitError,
    usesSunMoon: center === "Moon",
    ...(rateDoubt === null ? {} : { rateDoubt }),
  });
}

/** Whether all states have velocities. Errors: impossible-table when only some have, or when there are too few. */
function requireAlike(states: TableDescription["states"]): boolean {
  const withVelocity = states.filter(({ velocity }) => velocity !== null).length;
  if (withVelocity !== 0 && withVelocity !== states.length) {
    const index = states.findIndex(({ velocity }) => (velocity === null) === withVelocity * 2 > states.length);
    throw impossibleTable(
      ["states", index],
      "Some states have a velocity and some have none.",
      "a velocity in every state or in none",
    );
  }
  const least = withVelocity > 0 ? 2 : 5;
  if (states.length < least) {
    const kind = withVelocity > 0 ? "with" : "without";
    throw impossibleTable(
      ["states"],
      `${states.length} states are too few for interpolation.`,
      `at least ${least} states ${kind} velocities`,
    );
  }
  return withVelocity > 0;
}

function fromEarth(
  place: (string | number)[],
  frame: TableDescription["frame"],
  axes: EarthAxes,
  t: number,
  given: Kinematics,
): Kinematics {
  requirePossible(place, given);
  const state = toGcrf(frame, axes, t, given);
  requirePossible(place, state);
  return state;
}

const moonPlace = new Float64Array(3);
const moonVelocity = new Float64Array(3);

/** A state about the Moon, axes of GCRF, as one about the Earth. */
function fromMoon(place: (string | number)[], { position, velocity }: Kinematics, epoch: Instant): Kinematics {
  if (norm(position) < moonRadius - 15e3) {
    throw new Problem(
      "impossible-state",
      `The position is inside the Moon, ${Math.round(norm(position) / 1000)} km from its centre.`,
      [{ place: [...place, "positionKm"], expected: "a position outside the Moon, in km about its centre" }],
    );
  }
  requireSlowerThanLight([...place, "velocityKmPerS"], velocity);
  moonTable.evaluate(ttSecondsSinceJ2000(epoch), moonPlace, moonVelocity);
  const sum = (a: Vec3, b: Float64Array): Vec3 => [a[0] + b[0]!, a[1] + b[1]!, a[2] + b[2]!];
  const state = { position: sum(position, moonPlace), velocity: sum(velocity, moonVelocity) };
  requirePossible(place, state);
  return state;
}

/**
 * An ephemeris of one or several segments, each read in its useable part by its own method. Where segments overlap the
 * later one counts; where there is a gap, only the run that holds `moment` is used and a notice says so.
 * Errors: impossible-table, impossible-state, with places ["segments", i, ...].
 */
export function buildEphemeris(
  { segments }: DescriptionOf<"ephemeris">,
  orientation: EarthOrientation,
  moment: Instant,
): Trajectory {
  const tables = segments.map((segment, i) =>
    at(["segments", i], () => ({ segment, table: segmentTable(segment, orientation) })),
  );
  const ordered = tables.toSorted((a, b) => compareInstants(a.segment.first, b.segment.first));
  const runs: (typeof ordered)[] = [];
  for (const entry of ordered) {
    const run = runs.at(-1);
    const before = run?.at(-1);
    if (run && before && compareInstants(entry.segment.first, before.segment.last) <= 0) run.push(entry);
    else runs.push([entry]);
  }
  const holds = (run: typeof ordered): boolean =>
    compareInstants(run[0]!.segment.first, moment) <= 0 && compareInstants(moment, run.at(-1)!.segment.last) <= 0;
  const chosen = runs.find(holds) ?? runs[0]!;
  // A message has no places of its own for what is said of its states.
  const notices: Notice[] = chosen.flatMap(({ table }) => table.notices.map(({ code, text }) => ({ code, text })));
  if (runs.length > 1) {
    const span = [chosen[0]!.segment.first, chosen.at(-1)!.segment.last].map(
      (end) => `${formatInstant(end, "TAI", defaultLeapSeconds)} TAI`,
    );
    notices.push({
      code: "segments-apart",
      text: `The ephemeris has gaps between its segments; only ${span.join(" to ")} is used, which holds the anchor.`,
    });
  }
  const phases = chosen.map(({ segment, table }, i): Phase => {
    const next = chosen[i + 1]?.segment.first;
    return { trajectory: table, first: segment.first, last: next ?? segment.last };
  });
  return new PhasedTrajectory(phases, new EarthAxes(phases[0]!.first, orientation), distinct(notices));
}

const distinct = (notices: readonly Notice[]): Notice[] => [
  ...new Map(notices.map((notice) => [notice.text, notice])).values(),
];

function segmentTable(segment: SegmentDescription, orientation: EarthOrientation): TableTrajectory {
  const { states, errors, first, last } = segment;
  const ends = [states[0]!.epoch, states.at(-1)!.epoch] as const;
  if (compareInstants(first, ends[0]) < 0 || compareInstants(last, ends[1]) > 0 || compareInstants(first, last) >= 0) {
    throw impossibleTable(
      [],
      "The useable span is not inside the states of the segment.",
      "a useable span within the first and the last state",
    );
  }
  return tableOf(segment, orientation, segment.method, (values, times) => {
    let worst: OrbitError | null = null;
    for (const { epoch, error } of errors) {
      const t = secondsBetween(ends[0], epoch);
      const nearest = times.reduce((best, time, i) => (Math.abs(time - t) < Math.abs(times[best]! - t) ? i : best), 0);
      const [x, y, z, vx, vy, vz] = values.subarray(6 * nearest, 6 * nearest + 6);
      const found = stateError(error, { position: [x!, y!, z!], velocity: [vx!, vy!, vz!] });
      if (found !== null && (worst === null || (found.semiMajorAxis ?? 0) > (worst.semiMajorAxis ?? 0))) worst = found;
    }
    return worst;
  });
}
