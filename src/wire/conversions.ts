import { canonicalDigest } from "../correction/index.ts";
import { at, forEachItem, mostFaults, type Notice, Problem } from "../problem/index.ts";
import {
  compareInstants,
  formatInstant,
  type Instant,
  isInLeapSecond,
  type LeapSecondTable,
  readTimeCode,
  type Scale,
  type TimeCodeFormat,
  writeTimeCode,
} from "../time/index.ts";
import { constants } from "../units/index.ts";
import {
  type ConversionRequest,
  type ConversionResponse,
  codedInstantSchema,
  conversionRequestSchema,
  scaledInstantSchema,
} from "./conversionSchemas.ts";
import type { Bench } from "./corrections.ts";
import { readInstant } from "./instants.ts";
import { writeNotice } from "./problemDetails.ts";
import { readTimeCodeFormat } from "./timeCodeFormat.ts";
import type { TimeCodeFormatIn } from "./timeCodeSchemas.ts";
import { validate } from "./validate.ts";

type ValueIn = ConversionRequest["values"][number];
type ValueOut = ConversionResponse["results"][number]["values"][number];

/** POST /v1/time-conversions and `tauline convert`: a parsed JSON value in, the answer out. All or nothing. */
export function timeConversions(body: unknown, { leapSeconds, version }: Bench): ConversionResponse {
  const request = readRequest(body);
  const targets = forEachItem(["to"], request.to, (target) => readTarget(target, leapSeconds));
  const instants = forEachItem(["values"], request.values, (value) => readValue(value, leapSeconds));
  const results = forEachItem(["values"], instants, (instant, i) => ({
    input: request.values[i]!,
    values: targets.map((write) => write(instant)),
    flags: flagsOf(instant, leapSeconds),
  }));
  const expires = formatInstant(leapSeconds.expires, "UTC", leapSeconds);
  return {
    results,
    evidence: {
      inputsSha256: canonicalDigest(request),
      constants: { lG: constants.lG.value, lB: constants.lB.value, tdb0: constants.tdb0.value },
      leapSeconds: { source: leapSeconds.source, expires },
      ephemeris: null,
      version,
    },
    notices: noticesOf(request, instants, leapSeconds).map(writeNotice),
  };
}

/**
 * Errors: invalid-request. An object among the values is held against the one shape that it was meant to have, so that the
 * fault points into it.
 */
function readRequest(body: unknown): ConversionRequest {
  try {
    return validate(conversionRequestSchema, body);
  } catch (error) {
    if (!(error instanceof Problem) || error.code !== "invalid-request") throw error;
    const faults = error.faults.flatMap((fault) => {
      const [list, index, ...rest] = fault.place;
      if (list !== "values" || typeof index !== "number" || rest.length > 0) return [fault];
      const value = (body as { values: unknown[] }).values[index];
      if (typeof value !== "object" || value === null || Array.isArray(value)) return [fault];
      const isCode = "timeCode" in value || "format" in value;
      if (!isCode && !("at" in value || "scale" in value)) return [fault];
      return insideOf(() => validate(isCode ? codedInstantSchema : scaledInstantSchema, value), index) ?? [fault];
    });
    const first = faults[0]!;
    const where = first.place.length === 0 ? "The request" : `"${first.place.join(".")}"`;
    const others = faults.length > 1 ? ` (${faults.length} faults in all; this is the first)` : "";
    const detail = `${where} is not as documented: expected ${first.expected}${others}.`;
    throw new Problem("invalid-request", detail, faults.slice(0, mostFaults));
  }
}

function insideOf(check: () => unknown, index: number): Problem["faults"] | null {
  try {
    check();
    return null;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    return error.within("values", index).faults;
  }
}

const isCoded = (value: ValueIn): value is Extract<ValueIn, { timeCode: string }> =>
  typeof value !== "string" && "timeCode" in value;

function readValue(value: ValueIn, leapSeconds: LeapSecondTable): Instant {
  if (!isCoded(value)) return readInstant(value, leapSeconds);
  const format = at(["format"], () => readTimeCodeFormat(value.format, leapSeconds));
  return at(["timeCode"], () => readTimeCode(value.timeCode, format, leapSeconds));
}

/** How to write an instant in what was asked for. Errors: of the format at once, of the instant when it is written. */
function readTarget(target: Scale | TimeCodeFormatIn, leapSeconds: LeapSecondTable): (instant: Instant) => ValueOut {
  if (typeof target === "string") {
    return (instant) => ({ scale: target, at: formatInstant(instant, target, leapSeconds) });
  }
  const format: TimeCodeFormat = readTimeCodeFormat(target, leapSeconds);
  return (instant) => {
    const { timeCode, lostPicoseconds } = writeTimeCode(instant, format, leapSeconds);
    return { format: target, timeCode, lostPs: lostPicoseconds };
  };
}

type Flag = "leap-second" | "leap-table-expired";

const isExpired = (instant: Instant, { expires }: LeapSecondTable): boolean => compareInstants(instant, expires) >= 0;

const flagsOf = (instant: Instant, leapSeconds: LeapSecondTable): Flag[] => [
  ...(isInLeapSecond(instant, leapSeconds) ? (["leap-second"] as const) : []),
  ...(isExpired(instant, leapSeconds) ? (["leap-table-expired"] as const) : []),
];

/** Relations to TAI of the scales that somebody realises. Source: as in time/scales. */
const integerRules: Partial<Record<Scale, string>> = {
  GPS: "GPS time as TAI - 19 s",
  GST: "Galileo system time as TAI - 19 s",
  BDT: "BeiDou time as TAI - 33 s",
  GLONASS: "GLONASS time as UTC + 3 h",
};

function noticesOf(
  { values, to }: ConversionRequest,
  instants: readonly Instant[],
  leapSeconds: LeapSecondTable,
): Notice[] {
  const used = new Set<Scale>();
  for (const target of to) if (typeof target === "string") used.add(target);
  for (const value of values) if (typeof value !== "string" && "scale" in value) used.add(value.scale);
  const notices: Notice[] = [];
  const late = instants.filter((instant) => isExpired(instant, leapSeconds)).length;
  if (late > 0) {
    const expires = formatInstant(leapSeconds.expires, "UTC", leapSeconds);
    notices.push({
      code: "leap-table-expired",
      text: `${late} of ${instants.length} values lie after ${expires}, when the leap-second table expires; UTC, GLONASS time and the codes in UTC (CDS, CCS, ASCII) may be off by whole seconds there.`,
    });
  }
  const rules = Object.entries(integerRules).filter(([scale]) => used.has(scale as Scale));
  if (rules.length > 0) {
    notices.push({
      code: "realised-scale",
      text: `Taken by integer rules: ${rules.map(([, rule]) => rule).join(", ")}. The realised scales differ from that by nanoseconds to microseconds.`,
    });
  }
  if (used.has("TDB") || used.has("TCB")) {
    notices.push({
      code: "model-limited",
      text: "TDB and TCB are those of the geocentre by the series of Fairhead & Bretagnon (1990), 787 terms; it follows numerical time ephemerides to some nanoseconds, and a place on the Earth adds up to 2.2 microseconds.",
    });
  }
  return notices;
}
