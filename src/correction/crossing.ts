import { compareSpans, oscillatorTerms, ticksToDuration } from "../clock/index.ts";
import { invariant, Problem } from "../problem/index.ts";
import {
  addDurations,
  type Duration,
  subtractDurations,
  sumDurations,
  toSeconds,
  toTwoPartSeconds,
  zeroDuration,
} from "../time/index.ts";
import { type DatedEvent, type EventEffect, nameOfEvent } from "./clockEvent.ts";
import { clockMinusTt, latchOf, runningState } from "./clockMinusTt.ts";
import { fixedPoint } from "./fixedPoint.ts";
import { indicatedSpan, rolloverOf } from "./indication.ts";
import type { Setting } from "./model.ts";
import { eventTerm, freeRun, freeSpans, type Slew, type Stretch, slewEnd, slewRate } from "./stretch.ts";

/** Largest change of the fractional frequency that rate events may add up to. */
const mostChange = 0.1;

/** What a reading indicates since the anchor at a moment of a stretch. */
export const indicatedIn = (setting: Setting, stretch: Stretch, elapsed: Duration): Duration =>
  addDurations(elapsed, clockMinusTt(setting, elapsed, true, false, stretch).total);

/** The moment (TT since the anchor) at which a stretch's state gives that indication. */
export const settleIn = (setting: Setting, stretch: Stretch, indicated: Duration): Duration =>
  fixedPoint(
    indicated,
    (elapsed) => clockMinusTt(setting, elapsed, true, false, stretch).total,
    stretch.change + slewRate(stretch),
  );

/** Clock minus TT as read, without relativity from the present run's start on; it costs no propagation. */
export function roughlyOff({ clock }: Setting, stretch: Stretch, elapsed: Duration): Duration {
  const free = freeRun(stretch, toTwoPartSeconds(subtractDurations(elapsed, stretch.run.from)));
  const terms = oscillatorTerms(clock.oscillator, free, 1).map(({ accumulated }) => accumulated);
  return sumDurations([...terms, eventTerm(stretch, elapsed, free.total), latchOf(clock)]);
}

export function faultyEvent(
  event: Pick<DatedEvent, "index">,
  field: string[],
  detail: string,
  expected: string,
): Problem {
  return new Problem("impossible-clock", detail, [{ place: ["clock", "events", event.index, ...field], expected }]);
}

/** How far a set moves the clock: the smallest step that makes a counter with a width show the value. */
function jumpOfSet(
  setting: Setting,
  here: Stretch,
  border: Duration,
  to: (EventEffect & { kind: "set" })["to"],
): Duration {
  const shown = addDurations(border, clockMinusTt(setting, border, false, false, here).total);
  const jump = subtractDurations(indicatedSpan(setting.clock, to), shown);
  const { face } = setting.clock;
  const rollover = rolloverOf(setting.clock);
  if (rollover === null || face.kind !== "counter") return jump;
  const turn = ticksToDuration(rollover, face.ticksPerSecond);
  const turns = BigInt(Math.round(toSeconds(jump) / toSeconds(turn)));
  return subtractDurations(jump, ticksToDuration(turns * rollover, face.ticksPerSecond));
}

/** The stretch beyond an event, or beyond the end of a slew (null), going outwards from the anchor. */
export function crossForward(setting: Setting, here: Stretch, border: Duration, event: DatedEvent | null): Stretch {
  const next = stepOver(setting, here, border, event);
  const open = { ...next, start: border, end: null, high: null };
  if (event === null) return finish(setting, { ...open, slew: null }, border, "low");
  const { effect } = event;
  switch (effect.kind) {
    case "step":
    case "leap-second":
      return finish(setting, { ...open, base: addDurations(open.base, effect.step) }, border, "low");
    case "set": {
      const jump = jumpOfSet(setting, here, border, effect.to);
      return finish(setting, { ...open, base: addDurations(open.base, jump) }, border, "low");
    }
    case "rate":
      return finish(setting, changed(open, effect.change, event), border, "low");
    case "slew":
      requireNoSlew(here, event);
      return finish(setting, { ...open, slew: slewOf(event) }, border, "low");
    case "locked":
      if (here.locked) throw lockedTwice(event);
      return finish(setting, lockedFrom(setting, open, here, border), border, "low");
    case "free":
      if (!here.locked) throw freeWithoutLocked(event);
      return finish(setting, { ...open, locked: false, run: { ...open.run, from: border } }, border, "low");
    default:
      return open; // the model ends here; the caller does not come this far
  }
}

/** The same into the past. `part`: which end of a slew is crossed. */
export function crossBackward(
  setting: Setting,
  here: Stretch,
  border: Duration,
  event: DatedEvent,
  part: "start" | "end",
): Stretch {
  // A slew's sigma counts once: where it is met first, at its end, or at its start when it covers the anchor.
  const counted =
    part === "end" || event.effect.kind !== "slew" || compareSpans(slewEnd(slewOf(event)), zeroDuration) > 0;
  const next = stepOver(setting, here, border, counted ? event : null);
  const open = { ...next, start: null, end: border, low: null };
  const { effect } = event;
  switch (effect.kind) {
    case "step":
    case "leap-second":
      return finish(setting, { ...open, base: subtractDurations(open.base, effect.step) }, border, "high");
    case "rate":
      return finish(setting, changed(open, -effect.change, event), border, "high");
    case "slew": {
      if (part === "start") return finish(setting, { ...open, slew: null }, border, "high");
      requireNoSlew(here, event);
      return finish(setting, { ...open, slew: slewOf(event) }, border, "high");
    }
    case "locked":
      return finish(setting, { ...open, locked: false, run: { ...open.run, from: border } }, border, "high");
    case "free":
      return finish(setting, lockedFrom(setting, open, here, border), border, "high");
    default:
      return open;
  }
}

/** The slew that an event begins. */
export const slewOf = ({ effect, elapsed }: DatedEvent): Slew => {
  invariant(effect.kind === "slew", "only a slew lasts");
  return { step: effect.step, length: effect.length, start: elapsed };
};

/** The state at a border, as the reference of what lies beyond it. */
function stepOver(setting: Setting, here: Stretch, border: Duration, event: DatedEvent | null): Stretch {
  const { free } = runningState(setting, border, false, here);
  const variance = here.variance + (event?.sigma ?? 0) ** 2;
  return { ...here, reference: border, base: eventTerm(here, border, free.total), tau: free.total, variance };
}

function lockedFrom(setting: Setting, open: Stretch, here: Stretch, border: Duration): Stretch {
  const { physical, free } = runningState(setting, border, false, here);
  const nearer = freeSpans(here, toSeconds(border));
  return { ...open, locked: true, run: { from: border, physical, tau: free.total, square: free.square, nearer } };
}

/** What a reading indicates at the border, just beyond it. */
function finish(setting: Setting, stretch: Stretch, border: Duration, end: "low" | "high"): Stretch {
  return { ...stretch, [end]: indicatedIn(setting, stretch, border) };
}

function changed(open: Stretch, by: number, event: DatedEvent): Stretch {
  const change = open.change + by;
  if (Math.abs(change) > mostChange) {
    throw faultyEvent(
      event,
      ["fractionalChange"],
      `The rate events add up to a fractional frequency of ${change.toPrecision(3)} at ${nameOfEvent(event)}.`,
      `changes that stay within ${mostChange} in all`,
    );
  }
  return { ...open, change };
}

export function requireNoSlew(here: Pick<Stretch, "slew">, event: DatedEvent): void {
  if (here.slew === null) return;
  throw faultyEvent(
    event,
    [],
    `The slew of ${nameOfEvent(event)} overlaps another one; what the clock then does is not known.`,
    "slews one after another: join those that overlap into one",
  );
}

export const lockedTwice = (event: DatedEvent): Problem =>
  faultyEvent(
    event,
    ["kind"],
    `${nameOfEvent(event)} locks a clock that is locked already.`,
    'a "free" between two "locked"',
  );

export const freeWithoutLocked = (event: DatedEvent): Problem =>
  faultyEvent(
    event,
    ["kind"],
    `${nameOfEvent(event)} frees a clock that was not locked.`,
    'a "locked" at an earlier instant, or no "free"',
  );
