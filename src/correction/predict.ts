import { counterModulus, durationToTicks, tickSeconds, wrap } from "../clock/index.ts";
import { addDuration, addDurations, durationBetween, formatInstant, type Instant } from "../time/index.ts";
import { clockStateAt, isInside, outsideSpan } from "./clockState.ts";
import { requireModelAt } from "./eventReading.ts";
import type { Flag, PredictedReading, Setting } from "./model.ts";

/**
 * What the counter shows at an instant: the inverse of correctReading. The latch belongs to a reading, not to the clock,
 * so it is not among the terms; what lies beyond the shown value is `fraction`.
 * Errors: outside-span, anchor-needed.
 */
export function predictReading(setting: Setting, instant: Instant): PredictedReading {
  const { clock } = setting;
  if (!isInside(setting, instant)) {
    const text = formatInstant(instant, "UTC", setting.leapSeconds);
    throw outsideSpan(setting, "The instant", text, `at ${text}`);
  }
  const elapsed = durationBetween(clock.anchor.at, instant);
  requireModelAt(setting, elapsed);
  const flags: Flag[] = [];
  const state = clockStateAt(setting, elapsed, false, []);
  const { face } = clock;
  const indicated = addDurations(elapsed, state.clockMinusTt);
  if (face.kind === "stamp") {
    const sigmaTicks = face.resolution === null ? null : state.combinedSigma / face.resolution;
    return { ...state, indicated: addDuration(clock.anchor.at, indicated), fraction: 0, sigmaTicks };
  }
  const { ticks, fraction } = durationToTicks(indicated, face);
  const total = face.anchorReading + ticks;
  const shown = face.widthBits === null ? total : wrap(total, counterModulus(face.widthBits));
  if (shown !== total) flags.push("rollover");
  return {
    ...state,
    flags: [...flags, ...state.flags],
    indicated: shown,
    fraction,
    sigmaTicks: state.combinedSigma / tickSeconds(face.ticksPerSecond),
  };
}
