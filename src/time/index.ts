export { calendarDate, dayNumber } from "./calendar.ts";
export { readTimeCode, type TimeCodeFormat, writeTimeCode } from "./codes/timeCode.ts";
export type { WrittenCode } from "./codes/written.ts";
export { daysUntil, displayDate } from "./display.ts";
export {
  addDurations,
  type Duration,
  durationFromNanoseconds,
  durationFromSeconds,
  formatDuration,
  subtractDurations,
  sumDurations,
  toNanoseconds,
  toSeconds,
  toTwoPartSeconds,
  zeroDuration,
} from "./duration.ts";
export {
  addDuration,
  addSeconds,
  compareInstants,
  durationBetween,
  earlier,
  type Instant,
  later,
  secondsBetween,
} from "./instant.ts";
export { defaultLeapSeconds, LeapSecondTable } from "./leapSeconds.ts";
export {
  coveredYears,
  formatInstant,
  isCovered,
  isInLeapSecond,
  parseInstant,
  type Scale,
  scales,
  ttSecondsSinceJ2000,
} from "./scales.ts";
export { type EarthPlace, geocentricTdbMinusTt, tdbMinusTt, topocentricTdbMinusTt } from "./tdbMinusTt.ts";
