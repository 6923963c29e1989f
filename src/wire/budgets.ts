import {
  buildProperTime,
  type DriftBudget,
  driftBudget,
  type Footing,
  isInside,
  makeEvidence,
  orientationGiven,
  outsideSpan,
  settingNotices,
  type TermBudget,
  usableWindow,
} from "../correction/index.ts";
import { at, Problem } from "../problem/index.ts";
import { addSeconds, formatInstant, type Instant } from "../time/index.ts";
import { DAY, DEGREE, KM, NS } from "../units/index.ts";
import { type BudgetRequest, type BudgetResponse, budgetRequestSchema } from "./budgetSchemas.ts";
import { type Bench, basisOf, pathDigest, placedInTrajectory } from "./corrections.ts";
import { readClock, readOrientation, readTrajectory, startOf } from "./fromRequest.ts";
import { readInstant } from "./instants.ts";
import { writeNotice } from "./problemDetails.ts";
import { validate } from "./validate.ts";

/** Longest horizon of a budget, s. */
const longest = 20 * 365.25 * DAY;
const defaultPoints = 181;

/** POST /v1/drift-budgets and `tauline budget`: a parsed JSON value in, the answer out. */
export function driftBudgets(body: unknown, bench: Bench): BudgetResponse {
  const request: BudgetRequest = validate(budgetRequestSchema, body);
  const { leapSeconds } = bench;
  if (request.horizonS > longest) {
    throw new Problem("horizon-too-long", `A horizon of ${request.horizonS} s is over 20 years.`, [
      { place: ["horizonS"], received: request.horizonS, expected: `at most ${longest} s (20 years)` },
    ]);
  }
  if (request.clock !== undefined) at(["clock"], () => readClock(request.clock!, leapSeconds));
  const { description: trajectory, notices: remarks } = at(["trajectory"], () =>
    readTrajectory(request.trajectory, leapSeconds),
  );
  const from = readFrom(request, startOf(trajectory), bench);
  const orientation = readOrientation(request.earthOrientation);
  const path = { trajectory, orientation, terms: request.terms ?? null, anchor: from };
  const digest = pathDigest({ ...request, from: formatInstant(from, "TAI", leapSeconds) });
  const properTime = bench.properTime(digest, () => buildProperTime(path, leapSeconds));
  const window = usableWindow(properTime.trajectory, leapSeconds);
  const end = addSeconds(from, request.horizonS);
  for (const [field, instant, name] of [
    ["from", from, "The start"],
    ["horizonS", end, "The end of the horizon"],
  ] as const) {
    if (isInside({ window }, instant)) continue;
    const text = formatInstant(instant, "UTC", leapSeconds);
    throw outsideSpan({ window, leapSeconds }, name, text, `at ${text}`).within(field);
  }
  const budget = driftBudget(properTime, from, request.horizonS, request.seriesPoints ?? defaultPoints);
  const footing: Footing = {
    trajectory: properTime.trajectory,
    properTime,
    leapSeconds,
    given: orientationGiven(orientation),
  };
  const basis = basisOf(request);
  return {
    ...writeBudget(budget, bench, request.clock?.oscillator?.nominalHz),
    ...(basis === null ? {} : { basis }),
    evidence: makeEvidence(request, footing, bench.version),
    notices: [...placedInTrajectory(remarks), ...settingNotices(footing, false)].map(writeNotice),
  };
}

function readFrom({ from }: BudgetRequest, start: Instant | null, { leapSeconds }: Bench): Instant {
  if (from !== undefined) return at(["from"], () => readInstant(from, leapSeconds));
  if (start !== null) return start;
  throw new Problem("invalid-request", "A clock on the ground has no epoch, so the budget needs a start.", [
    { place: ["from"], expected: "an instant: this trajectory has no epoch of its own" },
  ]);
}

type Written = Omit<BudgetResponse, "basis" | "evidence" | "notices">;

function writeBudget(budget: DriftBudget, { leapSeconds }: Bench, nominalHz: number | undefined): Written {
  const { orbit, closedForms, preset } = budget;
  return {
    from: formatInstant(budget.from, "UTC", leapSeconds),
    meanOverS: budget.meanOver,
    orbit:
      orbit === null
        ? null
        : {
            periodS: orbit.period,
            revolutions: orbit.revolutions,
            countedBy: orbit.countedBy,
            semiMajorAxisKm: orbit.elements.semiMajorAxis / KM,
            meanSemiMajorAxisKm: orbit.meanSemiMajorAxis / KM,
            eccentricity: orbit.elements.eccentricity,
            inclinationDeg: orbit.inclination / DEGREE,
            perigeeKm: orbit.elements.perigee / KM,
            apogeeKm: (orbit.elements.semiMajorAxis * (1 + orbit.elements.eccentricity)) / KM,
          },
    terms: budget.terms.map(writeTerm),
    total: writeTerm(budget.total),
    closedForm:
      closedForms === null
        ? null
        : {
            osculatingRate: closedForms.osculatingRate,
            secularRate: closedForms.secularRate,
            eccentricityAmplitudeNs: closedForms.eccentricityAmplitude / NS,
            differenceNs: closedForms.difference / NS,
            why: whyDifferent(budget),
          },
    ...(budget.withoutOrbit === null ? {} : { withoutOrbit: budget.withoutOrbit }),
    frequencyPreset: {
      fractional: preset,
      ...(nominalHz === undefined ? {} : { hz: preset * nominalHz, setHz: nominalHz + preset * nominalHz }),
    },
    series: budget.series.map(({ at: time, accumulated, periodic }) => ({
      atS: time,
      accumulatedNs: accumulated / NS,
      periodicNs: periodic / NS,
    })),
  };
}

const writeTerm = ({ term, label, meanRate, perOrbit, peakToPeak }: TermBudget) => ({
  term,
  label,
  meanRate,
  perOrbitNs: perOrbit === null ? null : perOrbit / NS,
  perDayUs: (meanRate * DAY) / 1e-6,
  peakToPeakNs: peakToPeak / NS,
});

/** The parts of the difference between the integral and the secular form, in words and ns over the stretch. */
function whyDifferent(budget: DriftBudget): string {
  const ns = (seconds: number): string => `${(seconds / NS).toPrecision(3)} ns`;
  const of = (name: string): number =>
    (budget.terms.find(({ term }) => term === name)?.meanRate ?? 0) * budget.meanOver;
  const missing = ["velocity", "earth-monopole", "earth-oblateness", "reference-surface"].filter(
    (name) => !budget.terms.some(({ term }) => term === name),
  );
  const parts = [
    `the ends of the stretch ${ns(budget.closedForms!.endTerm)} (-(2/c^2)[r.v])`,
    `the field beyond J2 ${ns(of("earth-higher"))}`,
    `tides ${ns(of("sun-tide") + of("moon-tide"))}`,
    "and what is of second order in J2 or belongs to forces beyond J2 along the path",
  ];
  const left = missing.length === 0 ? "" : `; the terms ${missing.join(", ")} were left out, which the closed form has`;
  return `Over ${budget.orbit!.revolutions} revolutions: ${parts.join(", ")}${left}.`;
}
