import { Problem } from "../../problem/index.ts";
import type { Instant } from "../instant.ts";
import type { LeapSecondTable, UtcLabel } from "../leapSeconds.ts";
import { isCovered } from "../scales.ts";
import { invalidCode } from "./octets.ts";

/** An instant in a time code. */
export interface WrittenCode {
  readonly timeCode: string;
  /** What the code does not show: the instant less the one that the code reads back as, picoseconds, never negative. */
  readonly lostPicoseconds: number;
}

/** The instant, when it lies in the years that are covered. Errors: instant-out-of-range. */
export function requireCoveredCode(text: string, instant: Instant, leapSeconds: LeapSecondTable): Instant {
  if (isCovered(instant, leapSeconds)) return instant;
  throw new Problem(
    "instant-out-of-range",
    `The time code ${text} shows a time outside 1972-01-01 to 2100-12-31 (UTC).`,
    [{ place: [], received: text, expected: "the code of an instant from 1972-01-01 to 2100-12-31 (UTC)" }],
  );
}

/**
 * The instant of a second of a UTC day, 86 400 being the leap second.
 * Errors: invalid-time-code for a second that the day did not have, instant-out-of-range.
 */
export function instantOfUtc(
  text: string,
  { day, second }: UtcLabel,
  picoseconds: number,
  leapSeconds: LeapSecondTable,
): Instant {
  const length = leapSeconds.secondsInDay(day);
  if (second >= length) {
    const why =
      second >= 86_400 ? "there was no leap second at the end of that day" : "a leap second was left out there";
    throw invalidCode(
      text,
      `The time code ${text} shows second ${second} of a UTC day of ${length} s: ${why}.`,
      `a time below ${length} s of the day`,
    );
  }
  const instant = { seconds: day * 86_400 + second + leapSeconds.offsetOnDay(day), picoseconds };
  return requireCoveredCode(text, instant, leapSeconds);
}
