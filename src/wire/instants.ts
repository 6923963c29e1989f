import { invariant, Problem } from "../problem/index.ts";
import { type Instant, type LeapSecondTable, parseInstant, type Scale } from "../time/index.ts";

/** An instant as it stands in a request. */
export type InstantIn = string | { readonly at: string; readonly scale: Scale };

/** Errors: invalid-instant, instant-out-of-range; the place is the text itself. */
export function readInstant(value: InstantIn, leapSeconds: LeapSecondTable): Instant {
  if (typeof value === "string") return parseInstant(value, "UTC", leapSeconds);
  try {
    return parseInstant(value.at, value.scale, leapSeconds);
  } catch (error) {
    throw error instanceof Problem ? error.within("at") : error;
  }
}

/** A counter value as it stands in a request. Errors: invalid-request for a number that has lost digits. */
export function readCounterValue(value: number | string): bigint {
  if (typeof value === "string") return BigInt(value);
  invariant(Number.isSafeInteger(value), "the schema takes safe integers only");
  return BigInt(value);
}

/** The other way: an integer where JSON carries it exactly, else a decimal string. */
export function writeCounterValue(value: bigint): number | string {
  const number = Number(value);
  return Number.isSafeInteger(number) ? number : String(value);
}
