import { Problem } from "../problem/index.ts";
import {
  addDuration,
  compareInstants,
  type Duration,
  formatInstant,
  type Instant,
  isCovered,
  isInLeapSecond,
  toSeconds,
} from "../time/index.ts";
import { anchorTime, clockMinusTt } from "./clockMinusTt.ts";
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

function commonFlags({ trajectory, leapSeconds, clock }: Setting, at: Instant): Flag[] {
  const out: Flag[] = [];
  if (compareInstants(at, clock.anchor.at) < 0) out.push("before-anchor");
  if (trajectory.coarse) out.push("coarse-ephemeris");
  if (trajectory.implausible) out.push("implausible-orbit");
  if (isInLeapSecond(at, leapSeconds)) out.push("leap-second");
  if (compareInstants(at, leapSeconds.expires) >= 0) out.push("leap-table-expired");
  return out;
}

/** The span of a setting in words, UTC. */
export function spanInWords({ trajectory, leapSeconds }: Setting): string {
  const text = (t: number): string => {
    const whole = Math.floor(t);
    const picoseconds = trajectory.reference.picoseconds + Math.round((t - whole) * 1e12);
    const carry = Math.floor(picoseconds / 1e12);
    const instant = { seconds: trajectory.reference.seconds + whole + carry, picoseconds: picoseconds - carry * 1e12 };
    return isCovered(instant, leapSeconds)
      ? formatInstant(instant, "UTC", leapSeconds)
      : instant.seconds < 0
        ? "1972"
        : "2100";
  };
  if (!Number.isFinite(trajectory.from) || !Number.isFinite(trajectory.to)) {
    return "1972-01-01T00:00:00Z to 2100-12-31T23:59:59Z";
  }
  return `${text(trajectory.from)} to ${text(trajectory.to)}`;
}

/** An instant that lies outside the span or the years that are covered. `name`: what it is, for the sentence. */
export function outsideSpan(setting: Setting, name: string, received: unknown, when: string): Problem {
  const span = spanInWords(setting);
  return new Problem("outside-span", `${name} lies ${when}, outside the trajectory's span ${span}.`, [
    { place: [], received, expected: `an instant from ${span}` },
  ]);
}

/** Whether an instant `elapsed` seconds after the anchor can be answered for. */
export function isInside(setting: Setting, elapsed: number): boolean {
  const { trajectory, clock, leapSeconds } = setting;
  const t = anchorTime(setting) + elapsed;
  if (t < trajectory.from || t > trajectory.to) return false;
  return isCovered({ seconds: clock.anchor.at.seconds + Math.floor(elapsed), picoseconds: 0 }, leapSeconds);
}
