import { Problem } from "../problem/index.ts";
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
