import {
  buildProperTime,
  type ClockState,
  canonicalDigest,
  clockNotices,
  correctReading,
  makeEvidence,
  makeSetting,
  type PathRequest,
  predictReading,
  type Setting,
  settingNotices,
} from "../correction/index.ts";
import { forEachItem, type Notice } from "../problem/index.ts";
import type { ProperTime } from "../relativity/index.ts";
import { formatDuration, formatInstant, type LeapSecondTable, toNanoseconds } from "../time/index.ts";
import type { FaceWriter } from "./clockFace.ts";
import {
  type CorrectionRequest,
  type CorrectionResponse,
  correctionRequestSchema,
  type PredictionRequest,
  type PredictionResponse,
  predictionRequestSchema,
} from "./correctionSchemas.ts";
import { readClockAndPath, readInstants, readReadings } from "./fromRequest.ts";
import type { InstantIn } from "./instants.ts";
import { writeNotice } from "./problemDetails.ts";
import { validate } from "./validate.ts";

/** What a call works with besides its request. */
export interface Bench {
  readonly leapSeconds: LeapSecondTable;
  readonly version: string;
  /** Gives the integral for a digest of its request: from a store of earlier ones, or by `build`. */
  readonly properTime: (digest: string, build: () => ProperTime) => ProperTime;
}

/** A bench that keeps nothing. */
export const plainBench = (leapSeconds: LeapSecondTable, version: string): Bench => ({
  leapSeconds,
  version,
  properTime: (_, build) => build(),
});

type Shared = Pick<CorrectionRequest, "clock" | "trajectory" | "terms" | "earthOrientation">;

interface Prepared {
  readonly setting: Setting;
  readonly writer: FaceWriter;
  /** On how the trajectory was read. */
  readonly remarks: readonly Notice[];
}

function prepare(request: Shared, bench: Bench): Prepared {
  const { clock, writer, notices, path } = readClockAndPath(request, bench.leapSeconds);
  const properTime = bench.properTime(pathDigest({ ...request, from: request.clock.anchor.at }), () =>
    build(path, bench.leapSeconds),
  );
  const setting = makeSetting(
    clock,
    properTime,
    { orientation: path.orientation, basis: basisOf(request) },
    bench.leapSeconds,
  );
  return { setting, writer, remarks: placedInTrajectory(notices) };
}

const build = (path: PathRequest, leapSeconds: LeapSecondTable): ProperTime => buildProperTime(path, leapSeconds);

export const basisOf = ({ trajectory }: Pick<Shared, "trajectory">) =>
  "basis" in trajectory ? (trajectory.basis ?? null) : null;

/** Remarks on a trajectory, seen from the whole request. */
export const placedInTrajectory = (notices: readonly Notice[]): Notice[] =>
  notices.map((notice) => ({ ...notice, place: ["trajectory", ...(notice.place ?? [])] }));

/** What an integral along a trajectory is made of, as a digest; `from`: where it is counted from. */
export function pathDigest({
  from,
  trajectory,
  terms,
  earthOrientation,
}: Omit<Shared, "clock"> & { from: InstantIn }): string {
  return canonicalDigest({
    anchor: from,
    trajectory,
    terms: terms ?? null,
    earthOrientation: earthOrientation ?? null,
  });
}

/** POST /v1/corrections and `tauline correct`: a parsed JSON value in, the answer out. All or nothing. */
export function corrections(body: unknown, bench: Bench): CorrectionResponse {
  const request: CorrectionRequest = validate(correctionRequestSchema, body);
  const { setting, writer, remarks } = prepare(request, bench);
  const readings = readReadings(request.readings, writer, bench.leapSeconds);
  const scale = request.scale ?? "UTC";
  const corrected = forEachItem(["readings"], readings, (reading) =>
    correctReading(setting, reading, request.unwrap ?? null),
  );
  const results = corrected.map((result, i) => {
    const { id, reading } = request.readings[i]!;
    return {
      ...(id === undefined ? {} : { id }),
      reading,
      corrected: formatInstant(result.at, scale, bench.leapSeconds),
      scale,
      ...writeState(result),
    };
  });
  return { results, ...close(request, setting, corrected, remarks, bench) };
}

/** POST /v1/predicted-readings and `tauline predict`. All or nothing. */
export function predictedReadings(body: unknown, bench: Bench): PredictionResponse {
  const request: PredictionRequest = validate(predictionRequestSchema, body);
  const instants = readInstants(request.instants, bench.leapSeconds);
  const { setting, writer, remarks } = prepare(request, bench);
  const scale = request.scale ?? "UTC";
  const predicted = forEachItem(["instants"], instants, (instant) => predictReading(setting, instant));
  const results = predicted.map((result) => ({
    at: formatInstant(result.at, scale, bench.leapSeconds),
    scale,
    reading: writer.write(result.indicated),
    fraction: result.fraction,
    sigmaTicks: result.sigmaTicks,
    ...writeState(result),
  }));
  return { results, ...close(request, setting, predicted, remarks, bench) };
}

/** A standard uncertainty in ns; twelve digits are more than any is known to. */
const sigmaNs = (sigma: number): number => Number((sigma * 1e9).toPrecision(12));

function writeState(state: ClockState) {
  return {
    clockMinusTt: formatDuration(state.clockMinusTt),
    clockMinusTtNs: toNanoseconds(state.clockMinusTt),
    terms: state.terms.map(({ term, label, rate, accumulated }) => ({
      term,
      label,
      rate,
      accumulated: formatDuration(accumulated),
      accumulatedNs: toNanoseconds(accumulated),
    })),
    uncertaintyNs: sigmaNs(state.combinedSigma),
    uncertainty: state.uncertainty.map(({ source, type, sigma, shared }) => ({
      source,
      type,
      ns: sigmaNs(sigma),
      shared,
    })),
    flags: [...state.flags],
  };
}

/** Scales that are related to TAI by an integer rule of their own. */
const ruled: readonly string[] = ["GPS", "GST", "BDT", "GLONASS"];

/** Navigation time scales are related to TAI by their integer rules; who mixes them with UTC should know. */
function scaleNotices({
  scale,
  clock,
  instants,
}: Shared & Pick<PredictionRequest, "scale"> & { instants?: PredictionRequest["instants"] }): Notice[] {
  const given = [clock.anchor.at, ...(instants ?? [])].flatMap((value) =>
    typeof value === "string" ? [] : [value.scale],
  );
  const met = [
    ...new Set([
      ...(scale === undefined ? [] : [scale]),
      ...(clock.timeStamp ? [clock.timeStamp.scale] : []),
      ...given,
    ]),
  ];
  return met
    .filter((name) => ruled.includes(name))
    .map((name) => ({
      code: "realised-scale",
      text: `${name} time is taken by its integer rule; the realised scale differs from that by nanoseconds, which are not in the uncertainty.`,
    }));
}

function close(
  request: CorrectionRequest | PredictionRequest,
  setting: Setting,
  states: readonly ClockState[],
  remarks: readonly Notice[],
  bench: Bench,
) {
  const expired = states.some(({ flags }) => flags.includes("leap-table-expired"));
  return {
    ...(setting.basis === null ? {} : { basis: setting.basis }),
    evidence: makeEvidence(request, setting, bench.version),
    notices: [
      ...remarks,
      ...clockNotices(setting.clock),
      ...settingNotices(setting, expired),
      ...scaleNotices(request),
    ].map(writeNotice),
  };
}
