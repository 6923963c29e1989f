export { correctReading } from "./correct.ts";
export { canonicalDigest, type Evidence, makeEvidence } from "./evidence.ts";
export type {
  Clock,
  ClockState,
  CorrectedReading,
  Flag,
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
  type GivenOrientation,
  makeSetting,
  type PathRequest,
  settingNotices,
} from "./setting.ts";
