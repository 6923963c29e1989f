import { DateTime } from "luxon";
import type { Instant } from "./instant.ts";

/** Calendar texts for people. luxon knows milliseconds and no leap seconds: nothing here is ever computed with. */
function utcDateTime(instant: Instant, taiMinusUtc: number): DateTime {
  return DateTime.fromSeconds(instant.seconds - taiMinusUtc, { zone: "utc", locale: "en-GB" });
}

/** For example "28 June 2027". */
export const displayDate = (instant: Instant, taiMinusUtc: number): string =>
  utcDateTime(instant, taiMinusUtc).toFormat("d LLLL yyyy");

/** Whole calendar days from a moment on the wall clock (milliseconds since 1970 UTC) to an instant; negative when past. */
export const daysUntil = (instant: Instant, taiMinusUtc: number, nowMs: number): number =>
  Math.floor(utcDateTime(instant, taiMinusUtc).diff(DateTime.fromMillis(nowMs, { zone: "utc" }), "days").days);
