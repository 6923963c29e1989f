import { type Counter, decimalRational, type Rational, rational } from "../clock/index.ts";
import type { Face, Indication } from "../correction/index.ts";
import { at, invariant, Problem } from "../problem/index.ts";
import {
  addDuration,
  addSeconds,
  type Duration,
  durationBetween,
  formatInstant,
  type Instant,
  type LeapSecondTable,
  parseInstant,
  readTimeCode,
  writeTimeCode,
} from "../time/index.ts";
import type { ClockIn } from "./clockSchemas.ts";
import { readInstant } from "./instants.ts";
import { readTimeCodeFormat } from "./timeCodeFormat.ts";
import type { ClockCodeIn } from "./timeCodeSchemas.ts";

/** A reading as it stands in a request. */
export type ReadingIn = number | string;

/** How a clock's readings are written: both ways, between text and what the corrections work with. */
export interface FaceWriter {
  read(value: ReadingIn): Indication;
  write(indicated: Indication): ReadingIn;
  /** What the corrections need to know, given what the clock showed at the anchor. */
  face(atAnchor: Indication): Face;
}

/**
 * The face of a clock as described. Errors, with places inside the clock: invalid-request (none or several of
 * counter, timeStamp and timeCode), impossible-clock (a rate or a form that cannot be).
 */
export function readFace(clock: ClockIn, leapSeconds: LeapSecondTable): FaceWriter {
  const { counter, timeStamp, timeCode } = clock;
  const given = [counter && "counter", timeStamp && "timeStamp", timeCode && "timeCode"].filter(
    (name) => name !== undefined,
  );
  if (given.length !== 1) {
    const found = given.length === 0 ? "none" : given.join(" and ");
    throw new Problem(
      "invalid-request",
      `A clock has exactly one of counter, timeStamp and timeCode; this one has ${found}.`,
      [{ place: given.length === 0 ? [] : [given[1]!], expected: "exactly one of counter, timeStamp and timeCode" }],
    );
  }
  if (counter !== undefined) return at(["counter"], () => counterFace(counter));
  if (timeCode !== undefined) return at(["timeCode"], () => codeFace(timeCode, leapSeconds));
  return at(["timeStamp"], () => stampFace(timeStamp!, leapSeconds));
}

function unreadable(received: ReadingIn, expected: string): Problem {
  return new Problem(
    "invalid-request",
    `The reading ${JSON.stringify(received).slice(0, 80)} cannot be read: expected ${expected}.`,
    [{ place: [], received, expected }],
  );
}

function counterFace(given: NonNullable<ClockIn["counter"]>): FaceWriter {
  const counter: Counter = {
    ticksPerSecond: at(["ticksPerSecond"], () => readRate(given.ticksPerSecond)),
    widthBits: given.widthBits ?? null,
    stands: given.stands ?? "edge",
  };
  return {
    read(value) {
      if (typeof value === "string" && !/^-?\d+$/.test(value)) {
        throw unreadable(value, "decimal digits, with - in front when negative");
      }
      return BigInt(value);
    },
    write(indicated) {
      invariant(typeof indicated === "bigint", "a counter shows ticks");
      const number = Number(indicated);
      return Number.isSafeInteger(number) ? number : String(indicated);
    },
    face(atAnchor) {
      invariant(typeof atAnchor === "bigint", "a counter shows ticks");
      return { kind: "counter", anchorReading: atAnchor, ...counter };
    },
  };
}

function readRate(value: number | string): Rational {
  const text = String(value);
  const [numerator, denominator] = text.split("/");
  const fault = (detail: string, expected: string) =>
    new Problem("impossible-clock", detail, [{ place: [], received: value, expected }]);
  const rate =
    denominator === undefined
      ? decimalRational(text)
      : BigInt(denominator) === 0n
        ? null
        : rational(BigInt(numerator!), BigInt(denominator));
  if (rate === null || rate.numerator === 0n) {
    throw fault(`The tick rate ${text} is no positive number.`, 'a positive number or "num/den" with both above zero');
  }
  const size = Number(rate.numerator) / Number(rate.denominator);
  if (!(size >= 1e-6 && size <= 1e12)) {
    throw fault(`A counter of ${text} ticks a second is out of reach.`, "from 1e-6 to 1e12 ticks a second");
  }
  return rate;
}

/** A clock that shows a time code of CCSDS 301.0-B-4. A reading marks the moment at which the clock took it on. */
function codeFace(given: ClockCodeIn, leapSeconds: LeapSecondTable): FaceWriter {
  const format = readTimeCodeFormat(given, leapSeconds);
  return {
    read(value) {
      if (typeof value !== "string") throw unreadable(value, "the hexadecimal text of a time code");
      return readTimeCode(value, format, leapSeconds);
    },
    write: (indicated) => writeTimeCode(momentOf(indicated), format, leapSeconds).timeCode,
    face: () => ({ kind: "stamp", resolution: null }),
  };
}

type StampIn = NonNullable<ClockIn["timeStamp"]>;

/**
 * Where the scales that count seconds or weeks begin, in their own time. Source: IS-GPS-200 (GPS), Galileo OS SIS ICD
 * 5.1.2 (GST), BDS-SIS-ICD 3.3 (BDT), CCSDS 301.0-B-4 (TAI from 1958).
 */
const ownEpochs: Partial<Record<StampIn["scale"], string>> = {
  GPS: "1980-01-06T00:00:00",
  GST: "1999-08-22T00:00:00",
  BDT: "2006-01-01T00:00:00",
};

const week = 604_800;

function stampFace(given: StampIn, leapSeconds: LeapSecondTable): FaceWriter {
  const { scale, form = "iso" } = given;
  const held = typeof given.leapSeconds === "object" ? given.leapSeconds.heldAt : null;
  if (given.leapSeconds !== undefined && scale !== "UTC") {
    throw new Problem("impossible-clock", `${scale} has no leap seconds to follow or to hold.`, [
      { place: ["leapSeconds"], expected: "leapSeconds only where the scale is UTC" },
    ]);
  }
  const writer = form === "iso" ? isoWriter(scale, held, leapSeconds) : secondsWriter(given, form, leapSeconds);
  return {
    ...writer,
    face: () => ({ kind: "stamp", resolution: given.resolutionS ?? null }),
  };
}

type Written = Pick<FaceWriter, "read" | "write">;

function momentOf(indicated: Indication): Instant {
  invariant(typeof indicated !== "bigint", "a stamped clock shows a moment");
  return indicated;
}

function isoWriter(scale: StampIn["scale"], held: number | null, leapSeconds: LeapSecondTable): Written {
  const wanted = scale === "UTC" ? "an ISO 8601 time that ends in Z" : "an ISO 8601 time without a suffix";
  const text = (value: ReadingIn): string => {
    if (typeof value !== "string") throw unreadable(value, `${wanted}, as text`);
    return value;
  };
  if (held === null) {
    return {
      read: (value) => parseInstant(text(value), scale, leapSeconds),
      write: (indicated) => formatInstant(momentOf(indicated), scale, leapSeconds),
    };
  }
  // A clock that holds its leap seconds runs evenly: TAI less a constant, written like UTC.
  return {
    read(value) {
      const given = text(value);
      if (!given.endsWith("Z")) throw unreadable(given, wanted);
      return addSeconds(parseInstant(given.slice(0, -1), "TAI", leapSeconds), held);
    },
    write: (indicated) => `${formatInstant(addSeconds(momentOf(indicated), -held), "TAI", leapSeconds)}Z`,
  };
}

/** Seconds, or weeks and seconds of the week, since the scale's own epoch: "seconds" or "week seconds", exact decimals. */
function secondsWriter({ scale }: StampIn, form: "week-seconds" | "seconds", leapSeconds: LeapSecondTable): Written {
  const epochText = ownEpochs[scale];
  if (epochText === undefined) {
    throw new Problem("impossible-clock", `${scale} has no epoch of its own to count ${form} from.`, [
      { place: ["form"], received: form, expected: `"iso", or one of the scales ${Object.keys(ownEpochs).join(", ")}` },
    ]);
  }
  const epoch = parseInstant(epochText, scale, leapSeconds);
  const shape = form === "seconds" ? /^(\d{1,12})(?:\.(\d{1,12}))?$/ : /^(\d{1,5}) (\d{1,6})(?:\.(\d{1,12}))?$/;
  const wanted = form === "seconds" ? 'seconds such as "1456000000.25"' : 'week and seconds such as "2408 86400.25"';
  return {
    read(value) {
      const m = shape.exec(String(value));
      if (!m) throw unreadable(value, `${wanted}, with up to 12 decimals`);
      const [weeks, seconds, decimals = ""] = form === "seconds" ? ["0", m[1]!, m[2]] : [m[1]!, m[2]!, m[3]];
      if (form === "week-seconds" && Number(seconds) >= week)
        throw unreadable(value, "seconds of the week below 604800");
      const since: Duration = {
        seconds: Number(weeks) * week + Number(seconds),
        femtoseconds: Number(decimals.padEnd(15, "0")),
      };
      return addDuration(epoch, since);
    },
    write(indicated) {
      const { seconds, femtoseconds } = durationBetween(epoch, momentOf(indicated));
      const decimals = String(femtoseconds / 1000).padStart(12, "0");
      if (form === "seconds") return `${seconds}.${decimals}`;
      const weeks = Math.floor(seconds / week);
      return `${weeks} ${seconds - weeks * week}.${decimals}`;
    },
  };
}

/** The anchor: when, and what the clock showed then. Errors with places inside the clock. */
export function readAnchor(
  clock: ClockIn,
  writer: FaceWriter,
  leapSeconds: LeapSecondTable,
): { instant: Instant; shown: Indication } {
  return {
    instant: at(["anchor", "at"], () => readInstant(clock.anchor.at, leapSeconds)),
    shown: at(["anchor", "reading"], () => writer.read(clock.anchor.reading)),
  };
}
