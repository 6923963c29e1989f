import { readFileSync } from "node:fs";
import { splitElementSets } from "../../src/formats/index.ts";
import { type ElementState, statesOfElements, stateTolerance } from "./meanElements.ts";
import type { Row } from "./row.ts";
import { openData } from "./sharedFolder.ts";

/**
 * Every state that AIAA 2006-6753 prints for its test satellites, against the project's way of mean elements.
 * Two files: the elements, with run times behind column 69, and what the paper's program printed for them.
 */

const elementsFile = openData("sgp4-verification/SGP4-VER.TLE");
const statesFile = openData("sgp4-verification/tcppver.out");
/** Why the check is skipped, or null. */
export const testSatellitesAbsent: string | null = elementsFile.absent ?? statesFile.absent;

/** Altered to provoke errors of a program; their old checksums are wrong now, so they are not read at all. */
export const alteredSatellites: readonly string[] = ["33333", "33334", "33335"];

/**
 * The one satellite of which the states hold less well, and how well. Its epoch is 0.864 ms before noon; the lunar and
 * solar part of the theory takes it to a millisecond only.
 */
export const loosest = { satellite: "23333", tolerance: [5e-5, 2e-8] } as const;

export interface TestSatellite {
  readonly satellite: string;
  readonly line1: string;
  readonly line2: string;
  readonly states: readonly { readonly minutes: number; readonly state: ElementState }[];
}

/** Satellites in the order of the files, one of them twice; the altered ones are among them. */
export function readTestSatellites(): TestSatellite[] {
  const sets = splitElementSets(readFileSync(elementsFile.path, "utf8"));
  const printed: { satellite: string; states: TestSatellite["states"][number][] }[] = [];
  for (const line of readFileSync(statesFile.path, "utf8").split("\n")) {
    const words = line.trim().split(/\s+/);
    if (words[1] === "xx") printed.push({ satellite: words[0]!.padStart(5, "0"), states: [] });
    else if (words.length >= 7) {
      const [minutes, ...state] = words.slice(0, 7).map(Number);
      printed.at(-1)!.states.push({ minutes: minutes!, state });
    }
  }
  if (printed.length !== sets.length)
    throw new Error(`${sets.length} satellites but ${printed.length} lists of states`);
  return printed.map(({ satellite, states }, i) => {
    const { line1, line2 } = sets[i]!;
    if (line1.slice(2, 7) !== satellite) throw new Error(`states of ${satellite} beside elements of ${line1}`);
    return { satellite, line1, line2: line2.slice(0, 69), states };
  });
}

export interface SatelliteMisfit {
  readonly satellite: string;
  readonly count: number;
  /** Greatest difference of a coordinate, km and km/s. */
  readonly position: number;
  readonly velocity: number;
}

export function misfitOf({ satellite, line1, line2, states }: TestSatellite): SatelliteMisfit {
  const stateAt = statesOfElements(line1, line2);
  let position = 0;
  let velocity = 0;
  for (const { minutes, state } of states) {
    const difference = stateAt(minutes).map((value, k) => Math.abs(value - state[k]!));
    position = Math.max(position, ...difference.slice(0, 3));
    velocity = Math.max(velocity, ...difference.slice(3));
  }
  return { satellite, count: states.length, position, velocity };
}

/** All satellites that are read, one entry a list of states. */
export const testSatelliteMisfits = (): SatelliteMisfit[] =>
  readTestSatellites()
    .filter(({ satellite }) => !alteredSatellites.includes(satellite))
    .map(misfitOf);

export const toleranceOf = (satellite: string): readonly [number, number] =>
  satellite === loosest.satellite ? loosest.tolerance : [stateTolerance[0], stateTolerance[3]];

/** One row a list of states: its greatest misfit. */
export const testSatelliteRow = (misfit: SatelliteMisfit): Row => ({
  id: misfit.satellite,
  what: `${misfit.count} states in TEME, misfit`,
  inputs: { states: misfit.count },
  published: [0, 0],
  got: () => [misfit.position, misfit.velocity],
  tolerance: toleranceOf(misfit.satellite),
  unit: "km, km/s",
  source: "Vallado, Crawford, Hujsak, Kelso, AIAA 2006-6753, tcppver.out; data/sgp4-verification",
  standing: "read",
  place: "wire: readTle; orbit: buildTrajectory of mean elements, turned back by EarthAxes.fromTeme",
  ...(misfit.satellite === loosest.satellite
    ? { note: "The lunar and solar part takes the epoch to a millisecond; allowed here: 5 cm and 0.02 mm/s." }
    : {}),
});

/** The worst of all in words. */
export function testSatelliteSummary(misfits: readonly SatelliteMisfit[]): string {
  const byPosition = [...misfits].sort((a, b) => b.position - a.position);
  const states = misfits.reduce((sum, { count }) => sum + count, 0);
  const inWords = ({ satellite, position, velocity }: SatelliteMisfit): string =>
    `${satellite} with ${(position * 1e6).toFixed(1)} mm and ${(velocity * 1e6).toPrecision(2)} mm/s`;
  return `${states} states of mean elements: worst ${inWords(byPosition[0]!)}, then ${inWords(byPosition[1]!)}.`;
}
