import { multiplyTransposed, type Vec3 } from "../../src/numeric/index.ts";
import { buildTrajectory } from "../../src/orbit/index.ts";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { KM } from "../../src/units/index.ts";
import { readTle } from "../../src/wire/messages.ts";
import type { Row } from "./row.ts";

/** Position (km) and velocity (km/s) in TEME. */
export type ElementState = readonly number[];

const noOrientation = { ut1MinusTai: -37, xPole: 0, yPole: 0 };

/**
 * Two lines by the way of a request: read, built as a trajectory in GCRF, and turned back to the theory's own axes.
 * Gives the state at a time in minutes from the epoch.
 */
export function statesOfElements(line1: string, line2: string): (minutes: number) => ElementState {
  const { description } = readTle(line1, line2, defaultLeapSeconds);
  if (description.kind !== "mean-elements") throw new Error(`two lines gave a ${description.kind}`);
  const trajectory = buildTrajectory(description, noOrientation, description.elements.epoch);
  const state = new Float64Array(6);
  return (minutes) => {
    const t = minutes * 60;
    trajectory.state(t, state);
    const toTeme = trajectory.axes.fromTeme(t);
    const back = (k: number): Vec3 => multiplyTransposed(toTeme, [state[k]!, state[k + 1]!, state[k + 2]!]);
    return [...back(0), ...back(3)].map((value) => value / KM);
  };
}

const line1 = "1 00005U 58002B   00179.78495062  .00000023  00000-0  28098-4 0  4753";
const line2 = "2 00005  34.2682 348.7242 1859667 331.7664  19.3264 10.82419157413667";

/** Minutes from the epoch, and the state that the paper's program printed. */
const printed: readonly (readonly [minutes: number, state: readonly number[]])[] = [
  [0, [7022.46529266, -1400.08296755, 0.03995155, 1.893841015, 6.405893759, 4.53480725]],
  [360, [-7154.03120202, -3783.17682504, -3536.19412294, 4.741887409, -4.151817765, -2.093935425]],
  [720, [-7134.59340119, 6531.68641334, 3260.27186483, -4.113793027, -2.911922039, -2.557327851]],
  [1080, [5568.53901181, 4492.06992591, 3863.87641983, -4.209106476, 5.159719888, 2.74485298]],
  [1440, [-938.55923943, -6268.18748831, -4294.02924751, 7.536105209, -0.427127707, 0.98987808]],
  [4320, [-9060.47373569, 4658.70952502, 813.68673153, -2.232832783, -4.11045349, -3.157345433]],
];

/** Allowed in each coordinate, km and km/s: a centimetre; the list of published values says so for tests. */
export const stateTolerance = [1e-5, 1e-5, 1e-5, 1e-8, 1e-8, 1e-8] as const;

/** The first test satellite of the mean-element theory, three days long. */
export const meanElements: readonly Row[] = printed.map(([minutes, state]) => ({
  id: `P${String(minutes).padStart(4, "0")}`,
  what: `satellite 00005 after ${minutes} min, TEME`,
  inputs: { line1, line2, minutes },
  published: state,
  got: () => statesOfElements(line1, line2)(minutes),
  tolerance: stateTolerance,
  unit: "km, km/s",
  source: "Vallado, Crawford, Hujsak, Kelso, AIAA 2006-6753 (Revisiting Spacetrack Report 3), tcppver.out",
  standing: "read",
  place: "wire: readTle; orbit: buildTrajectory of mean elements, turned back by EarthAxes.fromTeme",
}));
