import { counterModulus, ticksToDuration } from "../clock/index.ts";
import { invariant, Problem } from "../problem/index.ts";
import { addDuration, type Duration, durationBetween, formatInstant, isCovered, toSeconds } from "../time/index.ts";
import type { Clock, Indication, Setting } from "./model.ts";

/** Whether a value can stand on a counter of so many bits. */
export const fits = (value: bigint, widthBits: number): boolean => value >= 0n && value < counterModulus(widthBits);

export function beyondWidth(reading: bigint, widthBits: number): Problem {
  return new Problem("reading-beyond-width", `The reading ${reading} does not fit a counter of ${widthBits} bits.`, [
    { place: [], received: String(reading), expected: `0 to 2^${widthBits} - 1 = ${counterModulus(widthBits) - 1n}` },
  ]);
}

/** What a clock has indicated since the anchor's instant when it shows this, rollovers not counted: exact. */
export function indicatedSpan({ face, anchor }: Clock, shown: Indication): Duration {
  if (face.kind === "stamp") {
    invariant(typeof shown !== "bigint", "a stamped clock is read as a moment");
    return durationBetween(anchor.at, shown);
  }
  invariant(typeof shown === "bigint", "a counter is read as ticks");
  return ticksToDuration(shown - face.anchorReading, face.ticksPerSecond);
}

/** Ticks until the counter shows the same again; null for what does not roll over. */
export const rolloverOf = ({ face }: Clock): bigint | null =>
  face.kind === "counter" && face.widthBits !== null ? counterModulus(face.widthBits) : null;

export function roundedQuotient(a: bigint, b: bigint): bigint {
  const twice = 2n * a + b;
  const q = twice / (2n * b);
  return twice < 0n && twice % (2n * b) !== 0n ? q - 1n : q;
}

export function whenInWords(setting: Pick<Setting, "clock" | "leapSeconds">, elapsed: Duration): string {
  const { clock, leapSeconds } = setting;
  const at = addDuration(clock.anchor.at, elapsed);
  if (isCovered(at, leapSeconds)) return `at ${formatInstant(at, "UTC", leapSeconds)}`;
  const seconds = toSeconds(elapsed);
  return `${Math.abs(seconds).toPrecision(6)} s ${seconds < 0 ? "before" : "after"} the anchor`;
}
