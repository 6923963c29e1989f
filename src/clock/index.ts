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
export { type ClockTerm, type Oscillator, oscillatorSigmas, oscillatorTerms, properTime } from "./oscillator.ts";
