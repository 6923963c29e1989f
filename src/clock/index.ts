export {
  type Counter,
  counterModulus,
  decimalRational,
  durationToTicks,
  type Rational,
  rational,
  type Stands,
  tickFraction,
  tickSeconds,
  ticksToDuration,
  wrap,
} from "./counter.ts";
export {
  type ClockTerm,
  type FreeRun,
  type Oscillator,
  oscillatorSigmas,
  oscillatorTerms,
  properTime,
  unbroken,
} from "./oscillator.ts";
export { compareSpans, distance, portion, spanFemtoseconds } from "./span.ts";
