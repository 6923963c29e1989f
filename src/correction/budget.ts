import { cross, dot, norm, type Vec3 } from "../numeric/index.ts";
import { type OsculatingElements, osculatingElements } from "../orbit/index.ts";
import { endTerm, ProperTime, type RateTerm, secularMeanRate, twoBodyMeanRate } from "../relativity/index.ts";
import { type Instant, secondsBetween } from "../time/index.ts";
import { C2, DAY, GM_EARTH } from "../units/index.ts";

/** What a term, or all of them, does to a clock on an orbit. Dimensionless, seconds. */
export interface TermBudget {
  readonly term: string;
  readonly label: string;
  /** Mean of d(clock - TT)/dTT. */
  readonly meanRate: number;
  /** Mean over one revolution; null without an orbit. */
  readonly perOrbit: number | null;
  /** Largest less smallest departure of the accumulated value from its mean line. */
  readonly peakToPeak: number;
}

export interface OrbitBudget {
  readonly elements: OsculatingElements;
  /** Mean of the osculating semi-major axis over the revolutions, m. */
  readonly meanSemiMajorAxis: number;
  /** Inclination against the pole of date, rad. */
  readonly inclination: number;
  readonly revolutions: number;
  /** Mean length of a revolution, s. */
  readonly period: number;
  readonly countedBy: "argument of latitude" | "true longitude" | "perigee";
}

export interface ClosedForms {
  readonly osculatingRate: number;
  readonly secularRate: number;
  /** Amplitude of the eccentricity's wave, s. */
  readonly eccentricityAmplitude: number;
  /** Integrated mean less secular form over the stretch, s. */
  readonly difference: number;
  /** Share of the stretch's two ends in the mean, -(2/c^2)[r.v], s. */
  readonly endTerm: number;
}

export interface DriftBudget {
  readonly from: Instant;
  /** Length of the stretch that the means are taken over, s. */
  readonly meanOver: number;
  readonly terms: readonly TermBudget[];
  readonly total: TermBudget;
  /** Null without an orbit; `withoutOrbit` then says why. */
  readonly orbit: OrbitBudget | null;
  readonly closedForms: ClosedForms | null;
  readonly withoutOrbit: string | null;
  /** Deliberate fractional frequency offset that takes the mean away. */
  readonly preset: number;
  readonly series: readonly SeriesPoint[];
}

export interface SeriesPoint {
  /** Since `from`, s. */
  readonly at: number;
  /** Accumulated, s. */
  readonly accumulated: number;
  /** Accumulated less the mean line, s. */
  readonly periodic: number;
}

/** Samples a revolution and over the whole stretch for the peaks. */
const samplesPerRevolution = 96;
const mostSamples = 20_000;
/** Below this eccentricity the perigee is no mark to count by. */
const nearlyCircular = 0.005;
const nearlyEquatorial = 1e-3;

/** The semi-major axis, carried as one more integrated rate; scaled so that a segment is good to some centimetres. */
const axisScale = 1e-19;
const axisTerm: RateTerm = {
  term: "semi-major-axis",
  label: "",
  needs: [],
  rate: ({ distance, speedSquared }) => axisScale / (2 / distance - speedSquared / GM_EARTH),
};

/**
 * How far an ideal clock drifts along a trajectory from `from` over `horizon` seconds: per term the mean rate over the
 * largest whole number of revolutions, and the wave about it; two closed forms beside the integral.
 * Validity: `from` and the horizon's end inside the span. Without an orbit the means run from end to end.
 */
export function driftBudget(properTime: ProperTime, from: Instant, horizon: number, points: number): DriftBudget {
  const { trajectory } = properTime;
  const start = secondsBetween(trajectory.reference, from);
  const end = Math.min(trajectory.to, start + horizon);
  trajectory.extend(Math.min(start, trajectory.to), end);
  const counted = countRevolutions(properTime, start, end);
  const stretch = typeof counted === "string" ? end - start : counted.length;
  const values = properTime.between(start, start + stretch);
  const sum = (list: readonly number[]): number => list.reduce((a, b) => a + b, 0);
  const rates = [...values, sum(values)].map((value) => value / stretch);
  const peaks = peakToPeak(properTime, start, stretch, rates, typeof counted === "string" ? 0 : counted.revolutions);
  const perOrbit = (rate: number): number | null => (typeof counted === "string" ? null : rate * counted.period);
  const budget = (term: string, label: string, k: number): TermBudget => ({
    term,
    label,
    meanRate: rates[k]!,
    perOrbit: perOrbit(rates[k]!),
    peakToPeak: peaks[k]!,
  });
  const total = budget("total", "All terms", values.length);
  const orbit = typeof counted === "string" ? null : describeOrbit(properTime, start, counted);
  return {
    from,
    meanOver: stretch,
    terms: properTime.terms.map(({ term, label }, k) => budget(term, label, k)),
    total,
    orbit,
    closedForms: orbit === null ? null : closedForms(properTime, orbit, start, stretch, total.meanRate),
    withoutOrbit: typeof counted === "string" ? counted : null,
    preset: -total.meanRate / (1 + total.meanRate),
    series: Array.from({ length: points }, (_, i) => {
      const at = ((end - start) * i) / (points - 1);
      const accumulated = sum(properTime.between(start, Math.min(end, start + at)));
      return { at, accumulated, periodic: accumulated - total.meanRate * at };
    }),
  };
}

interface Counted {
  readonly revolutions: number;
  readonly length: number;
  readonly period: number;
  readonly countedBy: OrbitBudget["countedBy"];
  readonly elements: OsculatingElements;
}

/** The largest whole number of revolutions from `start` on, or why there are none. */
function countRevolutions(properTime: ProperTime, start: number, end: number): Counted | string {
  const { trajectory } = properTime;
  if (trajectory.kind === "surface" || trajectory.kind === "track")
    return "A clock on the ground or carried over it has no orbit.";
  const elements = elementsAt(properTime, start);
  if (!(elements.eccentricity < 1)) return "The path is an escape: there are no revolutions.";
  const countedBy =
    elements.eccentricity >= nearlyCircular
      ? "perigee"
      : Math.sin(elements.inclination) < nearlyEquatorial
        ? "true longitude"
        : "argument of latitude";
  const expected = 2 * Math.PI * Math.sqrt(elements.semiMajorAxis ** 3 / GM_EARTH);
  const first = phase(properTime, start, countedBy);
  // The angle gone through since the start, followed in steps short enough that it is never off by a turn.
  let turned = 0;
  let before = first;
  let whole: { turns: number; at: number } | null = null;
  const step = expected / 24;
  for (let t = start + step; t <= end + step; t += step) {
    const here = Math.min(t, end);
    const angle = phase(properTime, here, countedBy);
    turned += wrapped(angle - before);
    before = angle;
    // Aim for whole turns, to rounding: the last one may lie a hair before the end of the horizon.
    const turns = Math.floor(turned / (2 * Math.PI) + 1e-9);
    if (turns >= 1 && (whole === null || turns > whole.turns)) whole = { turns, at: here };
    if (here === end) break;
  }
  if (whole === null) return "The horizon is shorter than one revolution.";
  const at = settleOnTurn(properTime, whole.at, first, countedBy, expected, end);
  const length = at - start;
  return { revolutions: whole.turns, length, period: length / whole.turns, countedBy, elements };
}

/** The moment near t at which the phase is `wanted`, by secant steps of the mean motion. */
function settleOnTurn(
  properTime: ProperTime,
  t: number,
  wanted: number,
  countedBy: OrbitBudget["countedBy"],
  period: number,
  end: number,
): number {
  let at = t;
  let slope = (2 * Math.PI) / period;
  for (let i = 0; i < 30; i++) {
    const off = wrapped(phase(properTime, at, countedBy) - wanted);
    if (Math.abs(off) < 1e-12) break;
    const next = Math.min(end, at - off / slope);
    const moved = next - at;
    if (moved === 0) break;
    const offNext = wrapped(phase(properTime, next, countedBy) - wanted);
    const measured = (offNext - off) / moved;
    if (measured > 0) slope = measured;
    at = next;
  }
  return at;
}

const wrapped = (angle: number): number => angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));

const scratch = new Float64Array(6);

function stateAt({ trajectory }: ProperTime, t: number): { position: Vec3; velocity: Vec3 } {
  trajectory.extend(t, t);
  trajectory.state(t, scratch);
  const [x, y, z, vx, vy, vz] = scratch;
  return { position: [x!, y!, z!], velocity: [vx!, vy!, vz!] };
}

function elementsAt(properTime: ProperTime, t: number): OsculatingElements {
  const { position, velocity } = stateAt(properTime, t);
  return osculatingElements(position, velocity);
}

/** The angle that counts revolutions, rad. */
function phase(properTime: ProperTime, t: number, countedBy: OrbitBudget["countedBy"]): number {
  const { position, velocity } = stateAt(properTime, t);
  if (countedBy === "true longitude") return Math.atan2(position[1], position[0]);
  const h = cross(position, velocity);
  if (countedBy === "argument of latitude") {
    const node: Vec3 = [-h[1], h[0], 0];
    return Math.atan2(dot(position, cross(h, node)) / norm(h), dot(position, node));
  }
  // Mean anomaly, which grows evenly however eccentric the orbit; whole turns of it end at the same place from perigee.
  const semiMajorAxis = 1 / (2 / norm(position) - dot(velocity, velocity) / GM_EARTH);
  const sine = dot(position, velocity) / Math.sqrt(GM_EARTH * semiMajorAxis);
  return Math.atan2(sine, 1 - norm(position) / semiMajorAxis) - sine;
}

function describeOrbit(properTime: ProperTime, start: number, counted: Counted): OrbitBudget {
  const { trajectory } = properTime;
  const [mean] = new ProperTime(trajectory, [axisTerm], start).between(start, start + counted.length);
  const { position, velocity } = stateAt(properTime, start);
  const h = cross(position, velocity);
  const pole = trajectory.axes.rotation(start).slice(6) as unknown as Vec3;
  return {
    elements: counted.elements,
    meanSemiMajorAxis: mean! / axisScale / counted.length,
    inclination: Math.atan2(norm(cross(pole, h)), dot(pole, h)),
    revolutions: counted.revolutions,
    period: counted.period,
    countedBy: counted.countedBy,
  };
}

function closedForms(
  properTime: ProperTime,
  orbit: OrbitBudget,
  start: number,
  stretch: number,
  meanRate: number,
): ClosedForms {
  const { semiMajorAxis, eccentricity } = orbit.elements;
  const product = (t: number): number => {
    const { position, velocity } = stateAt(properTime, t);
    return dot(position, velocity);
  };
  const secularRate = secularMeanRate(orbit.meanSemiMajorAxis, eccentricity, orbit.inclination);
  return {
    osculatingRate: twoBodyMeanRate(semiMajorAxis),
    secularRate,
    eccentricityAmplitude: (2 * eccentricity * Math.sqrt(GM_EARTH * semiMajorAxis)) / C2,
    difference: (meanRate - secularRate) * stretch,
    endTerm: endTerm(product(start + stretch) - product(start)),
  };
}

/** Peak to peak of every term and of the total about their mean lines. */
function peakToPeak(
  properTime: ProperTime,
  start: number,
  stretch: number,
  rates: readonly number[],
  revolutions: number,
): number[] {
  // On long stretches the samples fall on ever other phases, so the peaks are still met closely.
  const wanted = revolutions === 0 ? (stretch / DAY) * samplesPerRevolution : revolutions * samplesPerRevolution;
  const samples = Math.max(samplesPerRevolution, Math.min(mostSamples, Math.ceil(wanted)));
  const low = rates.map(() => 0);
  const high = rates.map(() => 0);
  for (let i = 1; i <= samples; i++) {
    const t = (stretch * i) / samples;
    const values = properTime.between(start, start + t);
    let total = 0;
    for (let k = 0; k < rates.length; k++) {
      const value = k < values.length ? values[k]! : total;
      total += k < values.length ? value : 0;
      const off = value - rates[k]! * t;
      if (off < low[k]!) low[k] = off;
      if (off > high[k]!) high[k] = off;
    }
  }
  return high.map((value, k) => value - low[k]!);
}
