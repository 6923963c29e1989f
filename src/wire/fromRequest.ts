import type { Oscillator } from "../clock/index.ts";
import type { Clock, GivenOrientation, PathRequest, Reading } from "../correction/index.ts";
import { type Center, type Frame, isFreeOfEarth, type StateError, type TrajectoryDescription } from "../orbit/index.ts";
import { at, forEachItem, type Notice, Problem } from "../problem/index.ts";
import {
  addDurations,
  type Duration,
  durationBetween,
  durationFromNanoseconds,
  type Instant,
  type LeapSecondTable,
} from "../time/index.ts";
import { ARCSECOND, DAY, DEGREE, KM, NS } from "../units/index.ts";
import { readEvents } from "./clockEvents.ts";
import { type FaceWriter, readAnchor, readFace } from "./clockFace.ts";
import type { ClockIn } from "./clockSchemas.ts";
import type { CorrectionRequest, PredictionRequest } from "./correctionSchemas.ts";
import { type InstantIn, readInstant } from "./instants.ts";
import { type ReadTrajectory, readOem, readOmm, readOpm, readTle } from "./messages.ts";
import type { TrajectoryIn } from "./trajectorySchemas.ts";

/** Text and km to domain values and SI. Every error carries the place in the request. */

type Triple = readonly [number, number, number];

const scaled = (v: Triple, k: number): Triple => [v[0] * k, v[1] * k, v[2] * k];
const orNull = (value: number | undefined, k = 1): number | null => (value === undefined ? null : value * k);

/** A clock and how its readings are written. Places inside the clock. */
export function readClock(given: ClockIn, leapSeconds: LeapSecondTable): { clock: Clock; writer: FaceWriter } {
  const writer = readFace(given, leapSeconds);
  const { instant, shown } = readAnchor(given, writer, leapSeconds);
  const oscillator =
    given.oscillator === undefined ? null : at(["oscillator"], () => readOscillator(given.oscillator!));
  const face = writer.face(shown);
  const clock: Clock = {
    face,
    anchor: { at: instant, sigma: orNull(given.anchor.sigmaNs, NS) },
    oscillator: typeof shown === "bigint" ? oscillator : withStampOffset(oscillator, durationBetween(instant, shown)),
    events: readEvents(given.events, writer, face, leapSeconds),
  };
  return { clock, writer };
}

/** A stamped clock is off at the anchor by what it showed less what it was, and by what is given besides. */
function withStampOffset(oscillator: Oscillator | null, shownLessTrue: Duration): Oscillator {
  const offset = oscillator?.offset ?? null;
  const nothing = {
    preset: null,
    frequency: null,
    aging: null,
    frequencySigma: null,
    agingSigma: null,
    covariance: null,
  };
  return { ...(oscillator ?? nothing), offset: offset === null ? shownLessTrue : addDurations(offset, shownLessTrue) };
}

function readOscillator(given: NonNullable<ClockIn["oscillator"]>): Oscillator {
  const { covariance, frequencySigma, agingSigmaPerDay } = given;
  if (covariance !== undefined && (frequencySigma !== undefined || agingSigmaPerDay !== undefined)) {
    throw new Problem("impossible-clock", "Both a covariance and single sigmas were given; they would count twice.", [
      { place: ["covariance"], expected: "either covariance, or frequencySigma and agingSigmaPerDay" },
    ]);
  }
  if (covariance !== undefined) requireCovariance(covariance, "covariance");
  const units = [NS, 1, 1 / DAY];
  return {
    offset: given.offsetNs === undefined ? null : durationFromNanoseconds(given.offsetNs),
    preset: given.presetFractional ?? null,
    frequency: given.frequencyOffset ?? null,
    aging: orNull(given.agingPerDay, 1 / DAY),
    frequencySigma: frequencySigma ?? null,
    agingSigma: orNull(agingSigmaPerDay, 1 / DAY),
    covariance: covariance?.flatMap((row, i) => row.map((value, j) => value * units[i]! * units[j]!)) ?? null,
  };
}

/**
 * Errors: `code` with the place when a matrix is not symmetric, has a negative variance or a correlation beyond one, or is
 * not positive semidefinite as a whole.
 */
function requireCovariance(
  matrix: readonly (readonly number[])[],
  field: string,
  code: "impossible-clock" | "impossible-state" = "impossible-clock",
): void {
  const fault = (detail: string, place: (string | number)[], expected: string, received?: number) =>
    new Problem(code, detail, [{ place: [field, ...place], received, expected }]);
  for (const [i, row] of matrix.entries()) {
    if (row[i]! < 0) {
      throw fault(
        `The covariance has a negative variance in row ${i + 1}.`,
        [i, i],
        "a variance of zero or more",
        row[i],
      );
    }
    for (const [j, value] of row.entries()) {
      const other = matrix[j]![i]!;
      const where = `in row ${i + 1}, column ${j + 1}`;
      if (Math.abs(value - other) > 1e-9 * Math.max(Math.abs(value), Math.abs(other))) {
        const expected = `${other}, as on the other side of the diagonal`;
        throw fault(`The covariance is not symmetric ${where}.`, [i, j], expected, value);
      }
      const most = Math.sqrt(Math.max(0, row[i]!) * Math.max(0, matrix[j]![j]!));
      if (Math.abs(value) > most * (1 + 1e-9)) {
        throw fault(`The covariance gives a correlation beyond 1 ${where}.`, [i, j], `at most ${most} in size`, value);
      }
    }
  }
  if (!isPositive(matrix)) {
    const expected = "a positive semidefinite matrix: no combination may have a negative variance";
    throw fault("The covariance is not possible as a whole, though each pair of it is.", [], expected);
  }
}

/** Cholesky's elimination on the correlations, with a grain of rounding allowed. */
function isPositive(matrix: readonly (readonly number[])[]): boolean {
  const sigmas = matrix.map((row, i) => Math.sqrt(row[i]!) || 1);
  const left = matrix.map((row, i) => row.map((value, j) => value / (sigmas[i]! * sigmas[j]!)));
  for (let k = 0; k < left.length; k++) {
    const pivot = left[k]![k]!;
    if (pivot < -1e-9) return false;
    for (let i = k + 1; i < left.length; i++) {
      if (pivot <= 1e-12) {
        if (Math.abs(left[i]![k]!) > 1e-5) return false;
        continue;
      }
      const factor = left[i]![k]! / pivot;
      for (let j = k + 1; j < left.length; j++) left[i]![j]! -= factor * left[k]![j]!;
    }
  }
  return true;
}

/** A trajectory as described, and remarks on how it was read. Places inside the trajectory. */
export function readTrajectory(given: TrajectoryIn, leapSeconds: LeapSecondTable): ReadTrajectory {
  switch (given.kind) {
    case "oem":
      return readOem(given.text, leapSeconds);
    case "opm":
      return readOpm(given.text, leapSeconds);
    case "omm":
      return readOmm(given, leapSeconds);
    case "tle":
      return readTle(given.line1, given.line2, leapSeconds);
    case "phases": {
      const parts = forEachItem(["parts"], given.parts, ({ from, trajectory }, i) => {
        const { description, notices } = at(["trajectory"], () => readTrajectory(trajectory, leapSeconds));
        const instant = at(["from"], () => readInstant(from, leapSeconds));
        const placed = notices.map((notice) => ({
          ...notice,
          place: ["parts", i, "trajectory", ...(notice.place ?? [])],
        }));
        return { from: instant, trajectory: description, notices: placed };
      });
      return { description: { kind: "phases", parts }, notices: parts.flatMap(({ notices }) => notices) };
    }
    default:
      return { description: readPlainTrajectory(given, leapSeconds), notices: [] };
  }
}

type PlainIn = Extract<TrajectoryIn, { kind: "state-vector" | "state-table" | "surface" | "track" }>;

function readPlainTrajectory(given: PlainIn, leapSeconds: LeapSecondTable): TrajectoryDescription {
  const instant = (value: InstantIn, ...place: (string | number)[]): Instant =>
    at(place, () => readInstant(value, leapSeconds));
  switch (given.kind) {
    case "state-vector":
      if (readCenter(given) !== "Earth") {
        throw new Problem(
          "impossible-state",
          "A state about the Moon is not propagated; the forces there are not modelled.",
          [{ place: ["center"], received: given.center, expected: '"Earth", or a state-table about the Moon' }],
        );
      }
      return {
        kind: given.kind,
        frame: given.frame,
        epoch: instant(given.epoch, "epoch"),
        position: scaled(given.positionKm, KM),
        velocity: scaled(given.velocityKmPerS, KM),
        error: readStateError(given),
      };
    case "state-table":
      return {
        kind: given.kind,
        frame: given.frame,
        center: readCenter(given),
        states: forEachItem(["states"], given.states, (state) => ({
          epoch: instant(state.epoch, "epoch"),
          position: scaled(state.positionKm, KM),
          velocity: state.velocityKmPerS === undefined ? null : scaled(state.velocityKmPerS, KM),
        })),
      };
    case "surface":
      return readSurface(given);
    case "track":
      return {
        kind: given.kind,
        heightOf: given.heightOf,
        points: forEachItem(["points"], given.points, (point) => ({
          at: instant(point.at, "at"),
          ...readPoint(point),
        })),
      };
  }
}

/** Errors: impossible-state for axes that turn with the Earth about another body. */
function readCenter({ center = "Earth", frame }: { center?: Center | undefined; frame: Frame }): Center {
  if (center === "Moon" && !isFreeOfEarth(frame)) {
    throw new Problem("impossible-state", `${frame} is no frame about the Moon.`, [
      { place: ["frame"], received: frame, expected: "ICRF, GCRF or EME2000" },
    ]);
  }
  return center;
}

/** Where a trajectory begins of itself: its epoch or first state. Null for a clock that rests on the ground. */
export function startOf(trajectory: TrajectoryDescription): Instant | null {
  switch (trajectory.kind) {
    case "state-vector":
      return trajectory.epoch;
    case "state-table":
      return trajectory.states[0]!.epoch;
    case "ephemeris":
      return trajectory.segments[0]!.first;
    case "track":
      return trajectory.points[0]!.at;
    case "surface":
    case "moon-surface":
      return null;
    case "mean-elements":
      return trajectory.elements.epoch;
    case "phases":
      return trajectory.parts[0]!.from;
  }
}

/** Errors: invalid-request where heightOf is missing (Earth) or out of place (Moon). */
function readSurface(given: Extract<TrajectoryIn, { kind: "surface" }>): TrajectoryDescription {
  const { body, heightOf } = given;
  if (body === "Moon" && heightOf === undefined) return { kind: "moon-surface", ...readPoint(given) };
  if (body === "Earth" && heightOf !== undefined) return { kind: "surface", heightOf, ...readPoint(given) };
  const expected =
    body === "Earth" ? '"ellipsoid" or "geoid" (it is missing)' : "no heightOf: lunar heights are above 1737.4 km";
  throw new Problem("invalid-request", `A height on the ${body} is given with ${expected}.`, [
    { place: ["heightOf"], received: heightOf, expected },
  ]);
}

const readPoint = (point: { latitudeDeg: number; longitudeDeg: number; heightM: number }) => ({
  latitude: point.latitudeDeg * DEGREE,
  longitude: point.longitudeDeg * DEGREE,
  height: point.heightM,
});

function readStateError(given: Extract<TrajectoryIn, { kind: "state-vector" }>): StateError {
  const { covarianceRtn } = given;
  if (covarianceRtn !== undefined) {
    if (given.positionSigmaKm !== undefined || given.velocitySigmaKmPerS !== undefined) {
      throw new Problem("impossible-state", "Both a covariance and single sigmas were given; they would count twice.", [
        { place: ["covarianceRtn"], expected: "either covarianceRtn, or positionSigmaKm and velocitySigmaKmPerS" },
      ]);
    }
    requireCovariance(covarianceRtn, "covarianceRtn", "impossible-state");
  }
  return {
    positionSigma: orNull(given.positionSigmaKm, KM),
    velocitySigma: orNull(given.velocitySigmaKmPerS, KM),
    semiMajorAxisSigma: orNull(given.semiMajorAxisSigmaKm, KM),
    covarianceRtn: covarianceRtn?.flat().map((value) => value * KM * KM) ?? null,
  };
}

export const readOrientation = (given: CorrectionRequest["earthOrientation"]): GivenOrientation => ({
  ut1MinusUtc: given?.ut1MinusUtcS ?? null,
  xPole: orNull(given?.xPoleArcsec, ARCSECOND),
  yPole: orNull(given?.yPoleArcsec, ARCSECOND),
});

export const readReadings = (
  given: CorrectionRequest["readings"],
  writer: FaceWriter,
  leapSeconds: LeapSecondTable,
): Reading[] =>
  forEachItem(["readings"], given, ({ reading, near }) => ({
    indicated: at(["reading"], () => writer.read(reading)),
    written: String(reading),
    near: near === undefined ? null : at(["near"], () => readInstant(near, leapSeconds)),
  }));

export const readInstants = (given: PredictionRequest["instants"], leapSeconds: LeapSecondTable): Instant[] =>
  forEachItem(["instants"], given, (value) => readInstant(value, leapSeconds));

/** Clock and path of a request, both read, nothing computed. */
export function readClockAndPath(
  request: Pick<CorrectionRequest, "clock" | "trajectory" | "terms" | "earthOrientation">,
  leapSeconds: LeapSecondTable,
): { clock: Clock; writer: FaceWriter; notices: readonly Notice[]; path: PathRequest } {
  const { clock, writer } = at(["clock"], () => readClock(request.clock, leapSeconds));
  const { description, notices } = at(["trajectory"], () => readTrajectory(request.trajectory, leapSeconds));
  const orientation = readOrientation(request.earthOrientation);
  return {
    clock,
    writer,
    notices,
    path: { trajectory: description, orientation, terms: request.terms ?? null, anchor: clock.anchor.at },
  };
}
