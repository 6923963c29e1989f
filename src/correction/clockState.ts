import { Problem } from "../problem/index.ts";
import {
  addDuration,
  compareInstants,
  type Duration,
  formatInstant,
  type Instant,
  isInLeapSecond,
  toSeconds,
} from "../time/index.ts";
import { clockMinusTt } from "./clockMinusTt.ts";
import type { ClockState, Flag, Setting } from "./model.ts";
import { combine, uncertaintyItems } from "./uncertainty.ts";

/** Everything that is said of the clock `elapsed` TT after the anchor. The instant lies inside the span. */
export function clockStateAt(setting: Setting, elapsed: Duration, asRead: boolean, flags: readonly Flag[]): ClockState {
  const { terms, total } = clockMinusTt(setting, elapsed, asRead, true);
  const at = addDuration(setting.clock.anchor.at, elapsed);
  const uncertainty = uncertaintyItems(setting, toSeconds(elapsed), asRead);
  return {
    at,
    elapsed,
    terms,
    clockMinusTt: total,
    uncertainty,
    combinedSigma: combine(uncertainty),
    flags: [...flags, ...commonFlags(setting, at)],
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
