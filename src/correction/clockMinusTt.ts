import { oscillatorTerms, properTime, tickFraction } from "../clock/index.ts";
import {
  type Duration,
  durationFromSeconds,
  secondsBetween,
  sumDurations,
  toSeconds,
  toTwoPartSeconds,
  zeroDuration,
} from "../time/index.ts";
import type { Clock, Setting, TermValue } from "./model.ts";

/** Time of the anchor on the trajectory's own axis, s. */
export const anchorTime = ({ trajectory, clock }: Setting): number =>
  secondsBetween(trajectory.reference, clock.anchor.at);

/** What a truncated reading has lost, as a term: half a tick behind. */
export function latchOf({ face }: Clock): Duration {
  if (face.kind !== "counter" || face.stands !== "truncated") return zeroDuration;
  return tickFraction(-1n, 2n, face.ticksPerSecond);
}

export interface Breakdown {
  readonly terms: readonly TermValue[];
  readonly total: Duration;
}

/**
 * Clock minus TT, `elapsed` TT after the anchor, term by term in the order of every answer. Each term is rounded to the
 * femtosecond once and the total is the sum of the rounded ones, so a breakdown adds up exactly.
 * Outside the trajectory's span the physical terms are held at the border with their rates: only iterations pass there.
 * `asRead`: with the latch term, which belongs to a reading and not to the clock.
 */
export function clockMinusTt(setting: Setting, elapsed: Duration, asRead: boolean, withRates: boolean): Breakdown {
  const { clock, window, properTime: integral } = setting;
  const start = anchorTime(setting);
  const wanted = start + toSeconds(elapsed);
  const t = Math.min(window.to, Math.max(window.from, wanted));
  const beyond = wanted - t;
  const values = integral.between(start, t);
  const rates = withRates || beyond !== 0 ? integral.rates(t) : values.map(() => 0);
  const physical = values.map((value, k) => value + (beyond === 0 ? 0 : beyond * rates[k]!));
  const relativity = physical.reduce((a, b) => a + b, 0);
  const relativityRate = rates.reduce((a, b) => a + b, 0);
  const tau = properTime(toTwoPartSeconds(elapsed), relativity);
  const terms: TermValue[] = oscillatorTerms(clock.oscillator, tau, 1 + relativityRate);
  if (asRead && clock.face.kind === "counter" && clock.face.stands === "truncated") {
    terms.push({ term: "latch", label: "Half a tick cut off by the latch", rate: 0, accumulated: latchOf(clock) });
  }
  for (const [k, { term, label }] of integral.terms.entries()) {
    terms.push({ term, label, rate: rates[k]!, accumulated: durationFromSeconds(physical[k]!) });
  }
  return { terms, total: sumDurations(terms.map((term) => term.accumulated)) };
}
