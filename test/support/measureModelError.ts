import { performance } from "node:perf_hooks";
import { driftBudget } from "../../src/correction/index.ts";
import type { Vec3 } from "../../src/numeric/index.ts";
import { buildTrajectory, type KeplerianElements, type Trajectory, twoBodyState } from "../../src/orbit/index.ts";
import { ProperTime, rateTerms } from "../../src/relativity/index.ts";
import { addSeconds } from "../../src/time/index.ts";
import { DAY, DEGREE, GM_EARTH } from "../../src/units/index.ts";
import { epoch } from "./orbits.ts";

/**
 * Measures by the project's own code what limits a clock's time on each kind of orbit, and prints it as Markdown for
 * README. Every orbit is invented; all start at 2026-03-01T00:00:00Z, the eccentric ones at their perigee.
 */

const orientation = { ut1MinusTai: -37, xPole: 0, yPole: 0 };
const days = 10;
const horizon = days * DAY;

interface OrbitClass {
  readonly name: string;
  readonly elements: KeplerianElements;
  /** Whether mean elements are made for such orbits. */
  readonly meanElements: boolean;
}

function orbit(
  name: string,
  semiMajorAxis: number,
  eccentricity: number,
  inclinationDeg: number,
  meanElements = true,
): OrbitClass {
  const angles = { node: 0.7, perigeeArgument: 1.9, meanAnomaly: 0 };
  return {
    name,
    elements: { semiMajorAxis, eccentricity, inclination: inclinationDeg * DEGREE, ...angles },
    meanElements,
  };
}

const classes: readonly OrbitClass[] = [
  orbit("400 km, 51.6 deg", 6_778e3, 0.001, 51.6),
  orbit("400 km, 97.4 deg", 6_778e3, 0.001, 97.4),
  orbit("12 h, 55 deg", 26_560e3, 0.01, 55),
  orbit("24 h, 0.05 deg", 42_164e3, 0.0005, 0.05),
  orbit("e = 0.74, 63.4 deg", 26_560e3, 0.74, 63.4),
  orbit("lunar transfer", 197_000e3, 0.9665, 28.5, false),
];

type State = readonly [...Vec3, ...Vec3];

function propagated(state: State): ProperTime {
  const [x, y, z, vx, vy, vz] = state;
  const error = { positionSigma: null, velocitySigma: null, semiMajorAxisSigma: null, covarianceRtn: null };
  const path = buildTrajectory(
    { kind: "state-vector", frame: "GCRF", epoch, position: [x, y, z], velocity: [vx, vy, vz], error },
    orientation,
    epoch,
  );
  return new ProperTime(path, rateTerms, 0);
}

/** Accumulated time of all terms from the epoch, s. */
const timeAt = (time: ProperTime, t: number): number => time.between(0, t).reduce((sum, part) => sum + part);

const picosecondsADay = (rate: number): number => rate * DAY * 1e12;

/** The largest of a function over so many equal steps from 0 to `end`. */
function greatest(end: number, steps: number, value: (t: number) => number): number {
  let most = 0;
  for (let i = 1; i <= steps; i++) most = Math.max(most, Math.abs(value((end * i) / steps)));
  return most;
}

/** How fast two paths' times part, ps a day: their difference averaged over the last revolution, by its mean age. */
function parting(reference: ProperTime, other: ProperTime, period: number): number {
  const samples = 400;
  const from = Math.max(0, horizon - period);
  let difference = 0;
  for (let i = 0; i < samples; i++) {
    const t = from + ((i + 0.5) / samples) * (horizon - from);
    difference += (timeAt(other, t) - timeAt(reference, t)) / samples;
  }
  return picosecondsADay(difference / ((from + horizon) / 2));
}

const sized = (v: Vec3): number => Math.hypot(...v);

function moved(state: State, metresOut: number, metresPerSecondAlong: number): State {
  const [x, y, z, vx, vy, vz] = state;
  const out = 1 + metresOut / sized([x, y, z]);
  const along = 1 + metresPerSecondAlong / sized([vx, vy, vz]);
  return [x * out, y * out, z * out, vx * along, vy * along, vz * along];
}

/** Greatest error in ten days of the propagated path given as a table of so many seconds, ps. */
function tableError(reference: ProperTime, step: number): number {
  const state = new Float64Array(6);
  reference.trajectory.extend(0, horizon);
  const states = Array.from({ length: Math.floor(horizon / step) + 1 }, (_, i) => {
    reference.trajectory.state(i * step, state);
    const [x, y, z, vx, vy, vz] = state;
    const position: Vec3 = [x!, y!, z!];
    const velocity: Vec3 = [vx!, vy!, vz!];
    return { epoch: addSeconds(epoch, i * step), position, velocity };
  });
  const table = buildTrajectory({ kind: "state-table", frame: "GCRF", center: "Earth", states }, orientation, epoch);
  const read = new ProperTime(table, rateTerms, 0);
  return greatest(horizon, 500, (t) => timeAt(read, t) - timeAt(reference, t)) * 1e12;
}

/** Mean elements of the orbit's size and shape, as SGP4 takes them. */
function meanElementsOf({ semiMajorAxis, eccentricity, inclination, node, perigeeArgument }: KeplerianElements) {
  const meanMotion = (Math.sqrt(GM_EARTH / semiMajorAxis ** 3) * DAY) / (2 * Math.PI);
  return buildTrajectory(
    {
      kind: "mean-elements",
      elements: {
        epoch,
        meanMotion,
        eccentricity,
        inclination: inclination / DEGREE,
        node: node / DEGREE,
        perigeeArgument: perigeeArgument / DEGREE,
        meanAnomaly: 0,
        bStar: 0,
      },
    },
    orientation,
    epoch,
  );
}

const fitSpan = DAY;
const fitPoints = 97;

/** Positions of a path at equal steps over the day of the fit, one after the other. */
function positions(path: Trajectory): Float64Array {
  path.extend(0, fitSpan);
  const state = new Float64Array(6);
  const out = new Float64Array(3 * fitPoints);
  for (let i = 0; i < fitPoints; i++) {
    path.state((fitSpan * i) / (fitPoints - 1), state);
    out.set(state.subarray(0, 3), 3 * i);
  }
  return out;
}

/** Solves a symmetric system of six by elimination with pivots. */
function solve(matrix: number[][], right: number[]): number[] {
  const rows = matrix.map((row, i) => [...row, right[i]!]);
  const n = rows.length;
  for (let k = 0; k < n; k++) {
    const pivot = rows
      .slice(k)
      .reduce((best, row, i) => (Math.abs(row[k]!) > Math.abs(rows[best]![k]!) ? k + i : best), k);
    [rows[k], rows[pivot]] = [rows[pivot]!, rows[k]!];
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const factor = rows[i]![k]! / rows[k]![k]!;
      for (let j = k; j <= n; j++) rows[i]![j]! -= factor * rows[k]![j]!;
    }
  }
  return rows.map((row, i) => row[n]! / row[i]!);
}

/** The state whose propagated path lies nearest to the positions of mean elements over a day (least squares). */
function fitted(mean: Trajectory): State {
  const wanted = positions(mean);
  const first = new Float64Array(6);
  mean.state(0, first);
  let state = [...first];
  const steps = [10, 10, 10, 0.01, 0.01, 0.01];
  for (let round = 0; round < 6; round++) {
    const here = positions(propagated(state as unknown as State).trajectory);
    const slopes = steps.map((step, k) => {
      const shifted = state.map((value, i) => (i === k ? value + step : value));
      return positions(propagated(shifted as unknown as State).trajectory).map((value, i) => value - here[i]!);
    });
    const normal = slopes.map((a) => slopes.map((b) => a.reduce((sum, value, i) => sum + value * b[i]!, 0)));
    const right = slopes.map((a) => a.reduce((sum, value, i) => sum + value * (wanted[i]! - here[i]!), 0));
    const change = solve(normal, right);
    state = state.map((value, k) => value + change[k]! * steps[k]!);
  }
  return state as unknown as State;
}

/** Greatest difference in a day between mean elements and the propagated path through their positions, ps. */
function meanElementError(elements: KeplerianElements): number {
  const mean = meanElementsOf(elements);
  const along = new ProperTime(mean, rateTerms, 0);
  const beside = propagated(fitted(mean));
  return greatest(fitSpan, 500, (t) => timeAt(along, t) - timeAt(beside, t)) * 1e12;
}

/** Two significant digits, plain. */
function figure(value: number): string {
  if (Math.abs(value) < 1e-5) return "< 1e-5";
  const rounded = Number(value.toPrecision(2));
  return Math.abs(rounded) < 1e-3 ? rounded.toExponential() : String(rounded);
}

const headings = [
  "orbit",
  "J2",
  "rest of the field",
  "Sun",
  "Moon",
  "1 mm/s along track",
  "1 m outward",
  "mean elements, one day",
  "table of 60 / 300 / 900 s",
];

function measure({ name, elements, meanElements }: OrbitClass): string[] {
  const { position, velocity } = twoBodyState(elements, 0);
  const start: State = [...position, ...velocity];
  const reference = propagated(start);
  const { terms } = driftBudget(reference, epoch, horizon, 2);
  const of = (...names: string[]): string =>
    names
      .map((wanted) => terms.find(({ term }) => term === wanted)!)
      .map(({ meanRate, peakToPeak }) => `${figure(picosecondsADay(meanRate))}; ${figure((peakToPeak / 2) * 1e12)}`)
      .join(", ");
  const period = 2 * Math.PI * Math.sqrt(elements.semiMajorAxis ** 3 / GM_EARTH);
  return [
    name,
    of("earth-oblateness"),
    of("earth-higher"),
    of("sun-tide"),
    of("moon-tide"),
    figure(Math.abs(parting(reference, propagated(moved(start, 0, 1e-3)), period))),
    figure(Math.abs(parting(reference, propagated(moved(start, 1, 0)), period))),
    meanElements ? figure(meanElementError(elements)) : "-",
    [60, 300, 900].map((step) => figure(tableError(reference, step))).join(" / "),
  ];
}

const began = performance.now();
console.log("Terms: mean ps a day; size of the wave about it in ps. Errors of a state: ps a day. The others: ps.\n");
console.log(`| ${headings.join(" | ")} |`);
console.log(`|${headings.map(() => "---").join("|")}|`);
for (const one of classes) console.log(`| ${measure(one).join(" | ")} |`);
console.error(`Measured in ${((performance.now() - began) / 1000).toFixed(0)} s.`);
