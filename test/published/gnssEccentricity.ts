import { buildTrajectory, type Trajectory } from "../../src/orbit/index.ts";
import { endTerm, ProperTime, rateTerms, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { secondsBetween } from "../../src/time/index.ts";
import { ageAt, type BroadcastMessage, broadcastTerm } from "./broadcastMessage.ts";
import { type OrbitPoint, readMessages, readOrbits } from "./gnssFiles.ts";
import type { Row } from "./row.ts";
import { openData } from "./sharedFolder.ts";

/**
 * The periodic relativistic term of every GPS satellite on 28 April 2021, 18:00 to 24:00, in two ways against the form
 * that its own broadcast message gives: -2 r.v/c^2 along the precise orbit as it stands, and the integral of all terms.
 * The integral also grows evenly, by 38 microseconds a day. That line is taken out with the mean rate of the message's own
 * semi-major axis and nothing is fitted but the level, so no error of the integral can hide in a line.
 * What is left is J2, of which the broadcast form knows nothing: Kouba (2004), GPS Solutions 8, 170, prints 0.1 ns.
 */

const folder = "gnss-2021-118";
const orbitFile = openData(`${folder}/COD0MGXFIN_20211180000_01D_05M_ORB.trimmed.sp3`);
const messageFile = openData(`${folder}/brdc1180.21n`);
/** Why the check is skipped, or null. */
export const gnssAbsent: string | null = orbitFile.absent ?? messageFile.absent;

/** UT1 - UTC on that day, s; from memory. It turns the whole orbit, so it hardly matters: the tests say how little. */
const ut1MinusUtc = -0.18;

export interface Comparison {
  readonly satellite: string;
  /** Epochs at which a message was valid. */
  readonly epochs: number;
  /** -2 r.v/c^2 less broadcast, s. */
  readonly direct: readonly number[];
  /** Integral less its mean rate less broadcast, about their mean, s. */
  readonly integral: readonly number[];
  /** Integral of all terms from the first epoch, s. */
  readonly accumulated: readonly number[];
  /** Greatest size of the broadcast term, s. */
  readonly amplitude: number;
  readonly notices: readonly string[];
}

/** The table of positions as a user would hand it in: Earth-fixed, without velocities. */
export function gnssTrajectory(points: readonly OrbitPoint[], ut1 = ut1MinusUtc): Trajectory {
  const states = points.map(({ epoch, position }) => ({ epoch, position, velocity: null }));
  const orientation = { ut1MinusTai: ut1 - 37, xPole: 0, yPole: 0 };
  return buildTrajectory(
    { kind: "state-table", center: "Earth", frame: "ITRF", states },
    orientation,
    points[0]!.epoch,
  );
}

/** -2 r.v/c^2 at a time of a trajectory, s. */
export function endTermAt(trajectory: Trajectory, t: number): number {
  const s = new Float64Array(6);
  trajectory.state(t, s);
  return endTerm(s[0]! * s[3]! + s[1]! * s[4]! + s[2]! * s[5]!);
}

function compare(
  satellite: string,
  points: readonly OrbitPoint[],
  messages: readonly BroadcastMessage[],
  ut1: number,
): Comparison {
  const trajectory = gnssTrajectory(points, ut1);
  const time = new ProperTime(trajectory, rateTerms, 0);
  const times: number[] = [];
  const broadcast: number[] = [];
  const axes: number[] = [];
  for (const { epoch } of points) {
    const age = (message: BroadcastMessage): number => Math.abs(ageAt(message, epoch));
    const valid = messages.filter((message) => age(message) <= message.fitHours * 1800);
    if (valid.length === 0) continue;
    const nearest = valid.reduce((a, b) => (age(b) < age(a) ? b : a));
    times.push(secondsBetween(trajectory.reference, epoch));
    broadcast.push(broadcastTerm(nearest, epoch));
    axes.push(nearest.rootOfAxis ** 2);
  }
  const meanRate = twoBodyMeanRate(mean(axes));
  const accumulated = times.map((t) => time.between(0, t).reduce((sum, part) => sum + part));
  return {
    satellite,
    epochs: times.length,
    direct: times.map((t, i) => endTermAt(trajectory, t) - broadcast[i]!),
    integral: aboutMean(accumulated.map((value, i) => value - meanRate * times[i]! - broadcast[i]!)),
    accumulated,
    amplitude: greatest(broadcast),
    notices: trajectory.notices.map(({ code }) => code),
  };
}

const mean = (values: readonly number[]): number => values.reduce((sum, x) => sum + x, 0) / values.length;

function aboutMean(values: readonly number[]): number[] {
  const level = mean(values);
  return values.map((value) => value - level);
}

export const greatest = (values: readonly number[]): number =>
  values.reduce((most, x) => Math.max(most, Math.abs(x)), 0);

const rootMeanSquare = (values: readonly number[]): number => Math.sqrt(mean(values.map((x) => x * x)));

/** Every GPS satellite that has both orbit and message; reads the files. */
export function compareAll(ut1 = ut1MinusUtc): Comparison[] {
  const messages = readMessages(messageFile.path);
  const out: Comparison[] = [];
  for (const [satellite, points] of readOrbits(orbitFile.path)) {
    const own = messages.get(satellite);
    if (satellite.startsWith("G") && own !== undefined) out.push(compare(satellite, points, own, ut1));
  }
  return out;
}

/** One row a satellite: the greatest misfit of -2 r.v/c^2 and of the integral to its broadcast term. */
export const gnssRow = (comparison: Comparison): Row => ({
  id: comparison.satellite.replace("G", "PRN"),
  what: "-2 r.v/c^2, integral; misfit",
  inputs: { epochs: comparison.epochs },
  published: [0, 0],
  got: () => [greatest(comparison.direct) * 1e12, greatest(comparison.integral) * 1e12],
  tolerance: 100,
  unit: "ps",
  source: "COD0MGXFIN orbits (CODE, AIUB) and broadcast file of CDDIS, day 118 of 2021; data/gnss-2021-118",
  standing: "read",
  place:
    "orbit: buildTrajectory of a table without velocities, frame ITRF; relativity: ProperTime, endTerm, twoBodyMeanRate",
});

/** Both ways over all satellites in words. */
export function gnssSummary(comparisons: readonly Comparison[]): string {
  const picoseconds = (values: readonly number[]): string =>
    `${(greatest(values) * 1e12).toFixed(1)} ps at most, ${(rootMeanSquare(values) * 1e12).toFixed(1)} ps rms`;
  const direct = comparisons.flatMap((one) => one.direct);
  const integral = comparisons.flatMap((one) => one.integral);
  return `${comparisons.length} satellites against their broadcast term: -2 r.v/c^2 ${picoseconds(direct)}; integral ${picoseconds(integral)}.`;
}
