export { type DriftBudget, driftBudget, type TermBudget } from "./budget.ts";
export type { ClockEvent, EventEffect } from "./clockEvent.ts";
export { isInside, outsideSpan } from "./clockState.ts";
export { correctReading } from "./correct.ts";
export { canonicalDigest, type Evidence, makeEvidence } from "./evidence.ts";
export type {
  Clock,
  ClockState,
  CorrectedReading,
  Face,
  Flag,
  Indication,
  PredictedReading,
  Reading,
  Setting,
  TermValue,
  UncertaintyItem,
  Unwrap,
} from "./model.ts";
export { predictReading } from "./predict.ts";
export {
  buildProperTime,
  clockNotices,
  type Footing,
  type GivenOrientation,
  makeSetting,
  orientationGiven,
  type PathRequest,
  settingNotices,
  usableWindow,
} from "./setting.ts";
