import {
  type Covariance,
  fullCovariance,
  messageInstant,
  type Oem,
  type OemSegment,
  type Omm,
  type Opm,
  ommFromJson,
  parseOem,
  parseOmm,
  parseOpm,
  parseTle,
  type Tle,
} from "../formats/index.ts";
import {
  type Center,
  type Frame,
  isFreeOfEarth,
  type SegmentDescription,
  type StateError,
  type TableMethod,
  type TrajectoryDescription,
} from "../orbit/index.ts";
import { at, type Notice, type Place, Problem } from "../problem/index.ts";
import type { Instant, LeapSecondTable } from "../time/index.ts";
import { KM } from "../units/index.ts";

/** Orbit messages of the standards to trajectories: what they say, in SI, or why it cannot be used. */

export interface ReadTrajectory {
  readonly description: TrajectoryDescription;
  /** Remarks on a message that was read all the same; places inside the trajectory. */
  readonly notices: readonly Notice[];
}

/** Values of keywords are compared in upper case with blanks for underscores. Source: CCSDS 502.0-B-3, 7.5.9. */
const folded = (text: string): string => text.trim().toUpperCase().replaceAll("_", " ");

function unusable(place: Place, detail: string, expected: string): Problem {
  return new Problem("unusable-message", detail, [{ place, expected }]);
}

const framesByName: Readonly<Record<string, Frame>> = {
  GCRF: "GCRF",
  ICRF: "ICRF",
  EME2000: "EME2000",
  TEME: "TEME",
  TOD: "TOD",
};

function readFrame(name: string): Frame {
  const text = folded(name);
  const frame = framesByName[text] ?? (/^ITRF([- ]?\d{2,4})?$/.test(text) ? "ITRF" : undefined);
  if (frame !== undefined) return frame;
  throw unusable(
    [],
    `The reference frame "${name}" is not one that Tauline knows.`,
    "GCRF, ICRF, EME2000, TEME, TOD or ITRF",
  );
}

function readCenter(name: string): Center {
  const text = folded(name);
  if (text === "EARTH") return "Earth";
  if (text === "MOON") return "Moon";
  throw unusable(
    [],
    `The message is about "${name}"; only paths near the Earth and the Moon are computed.`,
    "CENTER_NAME EARTH or MOON",
  );
}

const epochOf = ({ text, timeSystem }: { text: string; timeSystem: string }, leapSeconds: LeapSecondTable): Instant =>
  messageInstant(text, timeSystem, leapSeconds);

const remarkNotices = (remarks: readonly string[], place: Place): Notice[] =>
  remarks.map((text) => ({ code: "message-remark", text, place }));

const nothingKnown: StateError = {
  positionSigma: null,
  velocitySigma: null,
  semiMajorAxisSigma: null,
  covarianceRtn: null,
};

/** A covariance in the axes of the orbit; others are left aside, for their directions are not resolved. */
function readCovariance(covariance: Covariance): StateError | null {
  if (!["RTN", "RSW"].includes(folded(covariance.frame))) return null;
  const matrix = fullCovariance(covariance.lowerTriangle);
  return { ...nothingKnown, covarianceRtn: matrix.flat().map((value) => value * KM * KM) };
}

/** Degrees that are honoured; an odd degree 2n - 1 is that of n knots with velocities. */
function readMethod({ interpolation, interpolationDegree }: OemSegment["metadata"], knots: number): TableMethod {
  const name = interpolation === null ? "HERMITE" : folded(interpolation);
  const degree = interpolationDegree ?? 7;
  if (name === "HERMITE")
    return { kind: "osculating", knots: Math.max(2, Math.min(8, knots, Math.ceil((degree + 1) / 2))) };
  if (name === "LAGRANGE") return { kind: "lagrange", knots: Math.max(2, Math.min(16, knots, degree + 1)) };
  if (name === "LINEAR") return { kind: "lagrange", knots: 2 };
  throw unusable(
    [],
    `The interpolation "${interpolation}" is not one that Tauline knows.`,
    "HERMITE, LAGRANGE or LINEAR",
  );
}

/** An ephemeris message. Errors: invalid-message, unusable-message, invalid-instant; place ["text"]. */
export function readOem(text: string, leapSeconds: LeapSecondTable): ReadTrajectory {
  return at(["text"], () => {
    const { message, remarks } = parseOem(text);
    const notices: Notice[] = remarkNotices(remarks, ["text"]);
    const segments = message.segments.map((segment, i) =>
      inSegment(message, i, () => readSegment(segment, notices, leapSeconds)),
    );
    return { description: { kind: "ephemeris", segments, place: ["text"] }, notices };
  });
}

/** A Problem inside a segment says which: a text has no pointers of its own. */
function inSegment<T>({ segments }: Oem, index: number, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    const where = segments.length === 1 ? "" : ` (segment ${index + 1} of ${segments.length})`;
    throw new Problem(
      error.code,
      `${error.message}${where}`,
      error.faults.map((fault) => ({ ...fault, place: [] })),
    );
  }
}

function readSegment(segment: OemSegment, notices: Notice[], leapSeconds: LeapSecondTable): SegmentDescription {
  const { metadata, states, covariances } = segment;
  const { useableStartTime, useableStopTime, startTime, stopTime } = metadata;
  const read = states.map(({ epoch, positionKm, velocityKmPerS }) => ({
    epoch: epochOf(epoch, leapSeconds),
    position: scaled(positionKm),
    velocity: scaled(velocityKmPerS),
  }));
  const errors = covariances.flatMap((covariance) => {
    const error = readCovariance(covariance);
    return error === null ? [] : [{ epoch: epochOf(covariance.epoch, leapSeconds), error }];
  });
  if (errors.length < covariances.length) {
    notices.push({
      code: "message-remark",
      text: "Covariances that are not in RTN axes are left aside.",
      place: ["text"],
    });
  }
  const frame = readFrame(metadata.refFrame);
  const center = readCenter(metadata.centerName);
  if (center === "Moon" && !isFreeOfEarth(frame)) {
    throw unusable([], `${frame} is no frame about the Moon.`, "REF_FRAME ICRF, GCRF or EME2000");
  }
  return {
    frame,
    center,
    states: read,
    first: epochOf(useableStartTime ?? startTime, leapSeconds),
    last: epochOf(useableStopTime ?? stopTime, leapSeconds),
    method: readMethod(metadata, states.length),
    errors,
  };
}

const scaled = (v: readonly [number, number, number]): [number, number, number] => [v[0] * KM, v[1] * KM, v[2] * KM];

/** A state message. Manoeuvres are refused, not ignored. Errors as readOem. */
export function readOpm(text: string, leapSeconds: LeapSecondTable): ReadTrajectory {
  return at(["text"], () => {
    const { message, remarks } = parseOpm(text);
    refuseManoeuvres(message);
    if (readCenter(message.metadata.centerName) !== "Earth") {
      throw unusable(
        [],
        "A state about the Moon is not propagated; the forces there are not modelled.",
        "CENTER_NAME EARTH, or an ephemeris about the Moon",
      );
    }
    const { state, covariance } = message;
    const error = covariance === null ? null : readCovariance(covariance);
    const notices = remarkNotices(remarks, ["text"]);
    if (covariance !== null && error === null) {
      notices.push({
        code: "message-remark",
        text: "The covariance is not in RTN axes and is left aside.",
        place: ["text"],
      });
    }
    return {
      description: {
        kind: "state-vector",
        frame: readFrame(message.metadata.refFrame),
        epoch: epochOf(state.epoch, leapSeconds),
        position: scaled([state.xKm, state.yKm, state.zKm]),
        velocity: scaled([state.xKmPerS, state.yKmPerS, state.zKmPerS]),
        error: error ?? nothingKnown,
        place: ["text"],
      },
      notices,
    };
  });
}

function refuseManoeuvres({ manoeuvres }: Opm): void {
  if (manoeuvres.length === 0) return;
  const first = manoeuvres[0]!.ignition.text;
  throw unusable(
    [],
    `The message holds ${manoeuvres.length} manoeuvres (the first at ${first}), which are not propagated through.`,
    "a message without manoeuvres, or an ephemeris that goes through them",
  );
}

const theories = ["SGP4", "SGP/SGP4", "SDP4", "SGP4/SDP4"];

/** Mean elements as a message: a parsed JSON object, or a text (KVN, XML or JSON). Errors as readOem. */
export function readOmm(
  given: { omm?: unknown; text?: string | undefined },
  leapSeconds: LeapSecondTable,
): ReadTrajectory {
  const place = given.text === undefined ? ["omm"] : ["text"];
  if ((given.text === undefined) === (given.omm === undefined)) {
    throw new Problem("invalid-request", "An OMM comes as exactly one of omm and text.", [
      {
        place: given.text === undefined ? [] : ["text"],
        expected: "exactly one of omm (JSON) and text (KVN, XML or JSON)",
      },
    ]);
  }
  return at(place, () => {
    const { message, remarks } = given.text === undefined ? ommFromJson(given.omm) : parseOmm(given.text);
    return { description: { ...meanElements(message, leapSeconds), place }, notices: remarkNotices(remarks, place) };
  });
}

function meanElements({ metadata, elements, tle }: Omm, leapSeconds: LeapSecondTable): TrajectoryDescription {
  if (readCenter(metadata.centerName) !== "Earth")
    throw unusable([], "SGP4 describes orbits about the Earth only.", "CENTER_NAME EARTH");
  if (folded(metadata.refFrame) !== "TEME") {
    throw unusable(
      [],
      `Mean elements of SGP4 are in TEME; this message says "${metadata.refFrame}".`,
      "REF_FRAME TEME",
    );
  }
  if (!theories.includes(folded(metadata.meanElementTheory)) || tle?.ephemerisType === 4) {
    throw unusable(
      [],
      `The theory "${metadata.meanElementTheory}"${tle?.ephemerisType === 4 ? " of ephemeris type 4" : ""} is not computed.`,
      "SGP4",
    );
  }
  const { meanMotionRevPerDay: meanMotion } = elements;
  const bStar = tle?.bstarPerEarthRadius ?? null;
  if (meanMotion === null)
    throw unusable([], "SGP4 needs MEAN_MOTION; the message has SEMI_MAJOR_AXIS.", "MEAN_MOTION in rev/day");
  if (bStar === null) throw unusable([], "SGP4 needs BSTAR, which the message has not.", "BSTAR in 1/Earth radii");
  return {
    kind: "mean-elements",
    elements: {
      epoch: epochOf(elements.epoch, leapSeconds),
      meanMotion,
      eccentricity: elements.eccentricity,
      inclination: elements.inclinationDeg,
      node: elements.ascendingNodeDeg,
      perigeeArgument: elements.pericentreArgumentDeg,
      meanAnomaly: elements.meanAnomalyDeg,
      bStar,
    },
  };
}

/** Two-line elements. Errors: invalid-message with place ["line1"] or ["line2"], unusable-message. */
export function readTle(line1: string, line2: string, leapSeconds: LeapSecondTable): ReadTrajectory {
  const { message, remarks } = parseTle(line1, line2);
  return { description: elementsOfLines(message, leapSeconds), notices: remarkNotices(remarks, []) };
}

function elementsOfLines(tle: Tle, leapSeconds: LeapSecondTable): TrajectoryDescription {
  if (tle.ephemerisType.value === 4)
    throw unusable(["line1"], "Ephemeris type 4 is a theory that is not computed.", "elements of SGP4");
  return {
    kind: "mean-elements",
    elements: {
      epoch: at(["line1"], () => epochOf(tle.epoch, leapSeconds)),
      meanMotion: tle.meanMotionRevPerDay.value,
      eccentricity: tle.eccentricity.value,
      inclination: tle.inclinationDeg.value,
      node: tle.ascendingNodeDeg.value,
      perigeeArgument: tle.pericentreArgumentDeg.value,
      meanAnomaly: tle.meanAnomalyDeg.value,
      bStar: tle.bstarPerEarthRadius.value,
    },
  };
}
