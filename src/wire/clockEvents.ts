import type { Clock, ClockEvent, EventEffect } from "../correction/index.ts";
import { forEachItem, at as inPlace, Problem } from "../problem/index.ts";
import { durationFromNanoseconds, durationFromSeconds, type LeapSecondTable } from "../time/index.ts";
import { NS } from "../units/index.ts";
import type { FaceWriter, ReadingIn } from "./clockFace.ts";
import type { ClockEventIn } from "./clockSchemas.ts";
import { readInstant } from "./instants.ts";

/** Fastest slew, seconds a second. */
const fastest = 0.5;

/**
 * The events of a clock, places inside the clock. Errors: invalid-request (both or neither of at and atReading, a reading
 * that cannot be read), invalid-instant, reading-beyond-width, impossible-clock (a slew that is too fast).
 */
export function readEvents(
  given: readonly ClockEventIn[] | undefined,
  writer: FaceWriter,
  face: Clock["face"],
  leapSeconds: LeapSecondTable,
): ClockEvent[] {
  const read = (value: ReadingIn) => {
    const shown = writer.read(value);
    if (face.kind === "counter" && face.widthBits !== null && typeof shown === "bigint") {
      const most = (1n << BigInt(face.widthBits)) - 1n;
      if (shown < 0n || shown > most) {
        throw new Problem(
          "reading-beyond-width",
          `The reading ${shown} does not fit a counter of ${face.widthBits} bits.`,
          [{ place: [], received: String(shown), expected: `0 to 2^${face.widthBits} - 1 = ${most}` }],
        );
      }
    }
    return shown;
  };
  return forEachItem(["events"], given ?? [], (event, index): ClockEvent => {
    const { at, atReading } = event;
    if ((at === undefined) === (atReading === undefined)) {
      const found = at === undefined ? "neither" : "both";
      throw new Problem(
        "invalid-request",
        `A clock event has exactly one of at and atReading; this one has ${found}.`,
        [{ place: at === undefined ? [] : ["atReading"], expected: "exactly one of at (an instant) and atReading" }],
      );
    }
    return {
      when:
        at === undefined
          ? { reading: inPlace(["atReading"], () => read(atReading!)), written: String(atReading) }
          : { at: inPlace(["at"], () => readInstant(at, leapSeconds)) },
      effect: readEffect(event, read),
      sigma: event.sigmaNs === undefined ? null : event.sigmaNs * NS,
      index,
    };
  });
}

function readEffect(event: ClockEventIn, read: (value: ReadingIn) => ReturnType<FaceWriter["read"]>): EventEffect {
  switch (event.kind) {
    case "step":
    case "leap-second":
      return { kind: event.kind, step: durationFromNanoseconds(event.stepNs) };
    case "slew": {
      const [step, length] = [durationFromNanoseconds(event.stepNs), durationFromSeconds(event.durationS)];
      if (!(Math.abs(event.stepNs * NS) <= fastest * event.durationS)) {
        throw new Problem(
          "impossible-clock",
          `A slew of ${event.stepNs} ns in ${event.durationS} s is no slew any more.`,
          [
            {
              place: ["durationS"],
              received: event.durationS,
              expected: `at least ${Math.abs(event.stepNs * NS) / fastest} s for that many nanoseconds, or a step`,
            },
          ],
        );
      }
      return { kind: event.kind, step, length };
    }
    case "rate":
      return { kind: event.kind, change: event.fractionalChange };
    case "set":
      return { kind: event.kind, to: inPlace(["toReading"], () => read(event.toReading)) };
    default:
      return { kind: event.kind };
  }
}
