import { type FreeRun, oscillatorTerms, properTime, tickFraction, unbroken } from "../clock/index.ts";
import {
  type Duration,
  durationFromSeconds,
  secondsBetween,
  subtractDurations,
  sumDurations,
  toSeconds,
  toTwoPartSeconds,
  zeroDuration,
} from "../time/index.ts";
import type { Clock, Setting, TermValue } from "./model.ts";
import { eventTerm, firstRun, freeRun, type Stretch, slewRate, stretchAt } from "./stretch.ts";

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
 * `asRead`: with the latch term, which belongs to a reading and not to the clock. `stretch`: between two events; its
 * state holds outside it too, where iterations pass.
 */
export function clockMinusTt(
  setting: Setting,
  elapsed: Duration,
  asRead: boolean,
  withRates: boolean,
  stretch: Stretch | null = stretchOf(setting, elapsed),
): Breakdown {
  const { clock, properTime: integral } = setting;
  const { physical, rates, free } = runningState(setting, elapsed, withRates, stretch);
  const relativityRate = rates.reduce((a, b) => a + b, 0);
  const tauRate = stretch?.locked ? 0 : 1 + relativityRate;
  const terms: TermValue[] = oscillatorTerms(clock.oscillator, free, tauRate);
  if (stretch !== null) {
    const rate = stretch.change * tauRate + slewRate(stretch);
    const accumulated = eventTerm(stretch, elapsed, free.total);
    terms.push({ term: "event", label: "Commanded and found clock events", rate, accumulated });
  }
  if (asRead && clock.face.kind === "counter" && clock.face.stands === "truncated") {
    terms.push({ term: "latch", label: "Half a tick cut off by the latch", rate: 0, accumulated: latchOf(clock) });
  }
  for (const [k, { term, label }] of integral.terms.entries()) {
    terms.push({ term, label, rate: rates[k]!, accumulated: durationFromSeconds(physical[k]!) });
  }
  return { terms, total: sumDurations(terms.map((term) => term.accumulated)) };
}

/** The stretch between two events that a moment belongs to; null when nothing touched the clock. */
export const stretchOf = ({ timeline }: Pick<Setting, "timeline">, elapsed: Duration): Stretch | null =>
  timeline === null ? null : stretchAt(timeline, elapsed);

interface RunningState {
  /** Accumulated physical terms since the anchor, s, and their rates. */
  readonly physical: readonly number[];
  readonly rates: readonly number[];
  readonly free: FreeRun;
}

/** What has accumulated while the clock ran freely. A locked clock follows its scale: nothing is added, all rates are zero. */
export function runningState(
  setting: Setting,
  elapsed: Duration,
  withRates: boolean,
  stretch: Stretch | null,
): RunningState {
  const { window, properTime: integral } = setting;
  const run = stretch?.run ?? firstRun;
  if (stretch?.locked) {
    const zeros = integral.terms.map(() => 0);
    return { physical: run.physical ?? zeros, rates: zeros, free: freeRun(stretch, { high: 0, low: 0 }) };
  }
  const start = anchorTime(setting);
  const wanted = start + toSeconds(elapsed);
  const t = Math.min(window.to, Math.max(window.from, wanted));
  const beyond = wanted - t;
  const values = integral.between(start + toSeconds(run.from), t);
  const rates = withRates || beyond !== 0 ? integral.rates(t) : values.map(() => 0);
  const own = values.map((value, k) => value + (beyond === 0 ? 0 : beyond * rates[k]!));
  const relativity = own.reduce((a, b) => a + b, 0);
  const tau = properTime(toTwoPartSeconds(subtractDurations(elapsed, run.from)), relativity);
  const { physical } = run;
  return {
    physical: physical === null ? own : own.map((value, k) => value + physical[k]!),
    rates,
    free: stretch === null ? unbroken(tau) : freeRun(stretch, tau),
  };
}
