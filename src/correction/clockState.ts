import { compareSpans, tickSeconds } from "../clock/index.ts";
import { Problem } from "../problem/index.ts";
import {
  addDuration,
  compareInstants,
  type Duration,
  formatInstant,
  type Instant,
  isInLeapSecond,
  subtractDurations,
  toSeconds,
} from "../time/index.ts";
import { clockMinusTt, stretchOf } from "./clockMinusTt.ts";
import type { ClockState, Flag, Setting } from "./model.ts";
import type { Stretch } from "./stretch.ts";
import { combine, faceStep, uncertaintyItems } from "./uncertainty.ts";

/** Everything that is said of the clock `elapsed` TT after the anchor. The instant lies inside the span. */
export function clockStateAt(
  setting: Setting,
  elapsed: Duration,
  asRead: boolean,
  flags: readonly Flag[],
  stretch: Stretch | null = stretchOf(setting, elapsed),
): ClockState {
  const { terms, total } = clockMinusTt(setting, elapsed, asRead, true, stretch);
  const at = addDuration(setting.clock.anchor.at, elapsed);
  const uncertainty = uncertaintyItems(setting, toSeconds(elapsed), asRead, stretch);
  return {
    at,
    elapsed,
    terms,
    clockMinusTt: total,
    uncertainty,
    combinedSigma: combine(uncertainty),
    flags: [...flags, ...commonFlags(setting, at), ...eventFlags(setting, elapsed, stretch)],
  };
}

function commonFlags({ trajectory, leapSeconds, clock, basis }: Setting, at: Instant): Flag[] {
  const out: Flag[] = [];
  if (compareInstants(at, clock.anchor.at) < 0) out.push("before-anchor");
  if (basis === "predicted") out.push("predicted-orbit");
  if (trajectory.coarse) out.push("coarse-ephemeris");
  if (trajectory.implausible) out.push("implausible-orbit");
  if (isInLeapSecond(at, leapSeconds)) out.push("leap-second");
  if (compareInstants(at, leapSeconds.expires) >= 0) out.push("leap-table-expired");
  return out;
}

/** Flags that the clock's events bring. Those of a stretch hold for all of it. */
function eventFlags({ timeline, clock }: Setting, elapsed: Duration, stretch: Stretch | null): Flag[] {
  if (timeline === null || stretch === null) return [];
  const out: Flag[] = [];
  // One second, or one tick when that is longer. A reading whose tick was cut short by a jump may come just before it.
  const step = clock.face.kind === "counter" ? tickSeconds(clock.face.ticksPerSecond) : (faceStep(clock.face) ?? 0);
  const soon = Math.max(1, step);
  const touched = timeline.jumps.some(({ elapsed: jump }) => {
    if (Math.abs(elapsed.seconds - jump.seconds) > soon + 1) return false;
    const since = toSeconds(subtractDurations(elapsed, jump));
    return since < soon && (since >= 0 || (compareSpans(stretch.reference, jump) === 0 && since > -step));
  });
  if (touched) out.push("clock-event");
  if (stretch.slew !== null) out.push("slewing");
  if (stretch.locked) out.push("locked");
  if (stretch.holdover) out.push("holdover");
  return out;
}

/** An instant that lies outside the span or the years that are covered. `name`: what it is, for the sentence. */
export function outsideSpan(
  setting: Pick<Setting, "window" | "leapSeconds">,
  name: string,
  received: unknown,
  when: string,
): Problem {
  const { window, leapSeconds } = setting;
  const [first, last] = [window.first, window.last].map((end) => formatInstant(end, "UTC", leapSeconds));
  return new Problem("outside-span", `${name} lies ${when}, outside the trajectory's span ${first} to ${last}.`, [
    { place: [], received, expected: `an instant from ${first} to ${last}` },
  ]);
}

/** Whether an instant can be answered for. */
export const isInside = ({ window }: Pick<Setting, "window">, at: Instant): boolean =>
  compareInstants(at, window.first) >= 0 && compareInstants(at, window.last) <= 0;
