import { compareSpans, distance } from "../clock/index.ts";
import { Problem } from "../problem/index.ts";
import { addDuration, type Duration, durationBetween, formatInstant, toSeconds, zeroDuration } from "../time/index.ts";
import { type Candidate, candidates, isOnSide, turnsInto } from "./candidates.ts";
import { type DatedEvent, nameOfEvent } from "./clockEvent.ts";
import { clockStateAt, isInside, outsideSpan } from "./clockState.ts";
import { settleIn } from "./crossing.ts";
import { beyondWidth, fits, indicatedSpan, rolloverOf, whenInWords } from "./indication.ts";
import type { CorrectedReading, Flag, Reading, Setting, Unwrap } from "./model.ts";
import type { Timeline } from "./stretch.ts";

/**
 * Corrects a reading of a clock that was touched: the stretches whose readings include it are found by what the clock
 * showed at their ends, and the fixed point is solved with that stretch's state.
 * Errors: reading-not-shown, ambiguous-reading, ambiguous-rollover, anchor-needed, outside-span, reading-beyond-width.
 */
export function correctThroughEvents(
  setting: Setting,
  timeline: Timeline,
  reading: Reading,
  unwrap: Unwrap | null,
): CorrectedReading {
  const { clock } = setting;
  const { face } = clock;
  const { indicated, near, written } = reading;
  if (face.kind === "counter" && face.widthBits !== null && !fits(indicated as bigint, face.widthBits)) {
    throw beyondWidth(indicated as bigint, face.widthBits).within("reading");
  }
  if (near !== null) requireInModel(setting, timeline, near, written);
  const span = indicatedSpan(clock, indicated);
  const about = near === null ? zeroDuration : durationBetween(clock.anchor.at, near);
  const found = candidates(setting, timeline, span, about, near === null ? unwrap : "nearest");
  const flags: Flag[] = [];
  const chosen = choose(setting, found, reading, unwrap, flags) ?? fail(setting, timeline, span, written);
  if (chosen.turns !== 0n) flags.unshift("rollover");
  const elapsed = settleIn(setting, chosen.stretch, chosen.indicated);
  if (!isInside(setting, addDuration(clock.anchor.at, elapsed))) {
    throw outsideSpan(setting, "The reading", written, whenInWords(setting, elapsed)).within("reading");
  }
  return clockStateAt(setting, elapsed, true, flags, chosen.stretch);
}

function choose(
  setting: Setting,
  found: readonly Candidate[],
  { near, written }: Reading,
  unwrap: Unwrap | null,
  flags: Flag[],
): Candidate | undefined {
  const { clock } = setting;
  if (found.length <= 1) return found[0];
  const wanted = near === null ? zeroDuration : durationBetween(clock.anchor.at, near);
  const gap = ({ elapsed }: Candidate): Duration => distance(elapsed, wanted);
  const ordered = [...found].sort((a, b) => compareSpans(gap(a), gap(b)));
  if (near !== null) {
    const [first, second] = ordered.map((candidate) => toSeconds(gap(candidate)));
    if (second! - first! < 1e-3 * (first! + second!) && rolloverOf(clock) !== null) flags.push("ambiguous-rollover");
    return ordered[0];
  }
  if (unwrap === "nearest") return ordered[0];
  if (unwrap !== null) {
    return ordered.find((candidate) => isOnSide(candidate, unwrap)) ?? ordered[0];
  }
  const [first, second] = ordered as [Candidate, Candidate];
  const times = [first, second].map(({ elapsed }) => whenInWords(setting, elapsed).replace(/^at /, ""));
  const again = first.turns === second.turns;
  throw new Problem(
    again ? "ambiguous-reading" : "ambiguous-rollover",
    again
      ? `The clock was put back and showed this reading more than once, at about ${times[0]} and ${times[1]}.`
      : `The reading could mean about ${times[0]} or ${times[1]}: both lie inside the trajectory's span.`,
    [{ place: ["reading"], received: written, expected: 'a rough time "near", or "unwrap" to say which is meant' }],
  );
}

/** Why a reading is shown by no stretch. */
function fail(setting: Setting, timeline: Timeline, span: Duration, written: string): never {
  const { clock } = setting;
  const { stretches, shown, jumps, endBefore, endAfter } = timeline;
  for (const [i, stretch] of stretches.slice(0, -1).entries()) {
    const gap = { low: stretch.high!, high: stretches[i + 1]!.low! };
    if (turnsInto(clock, span, gap) === null) continue;
    const event = jumps.find(({ elapsed }) => compareSpans(elapsed, stretch.end!) === 0);
    const name = event === undefined ? "an event" : nameOfEvent(event);
    throw new Problem("reading-not-shown", `The clock never showed ${written}: ${name} put it past that.`, [
      { place: ["reading"], received: written, expected: `a reading from before or after ${name}` },
    ]);
  }
  const early = compareSpans(span, shown[0]!.low) < 0;
  const end = rolloverOf(clock) !== null ? (endAfter ?? endBefore) : early ? endBefore : endAfter;
  if (end !== null) throw anchorNeeded(setting, end, "The reading", written).within("reading");
  throw outsideSpan(setting, "The reading", written, whenInWords(setting, span)).within("reading");
}

/** Beyond a reset, another oscillator or (backwards) a set nothing is known of the clock. */
function anchorNeeded(setting: Setting, event: DatedEvent, what: string, received: unknown): Problem {
  const { clock, leapSeconds } = setting;
  const text = formatInstant(addDuration(clock.anchor.at, event.elapsed), "UTC", leapSeconds);
  const side = compareSpans(event.elapsed, zeroDuration) > 0 ? "after" : "before";
  return new Problem(
    "anchor-needed",
    `${what} lies ${side} ${nameOfEvent(event)} at ${text}, where the model of this anchor ends.`,
    [{ place: [], received, expected: `a clock with an anchor ${side} ${text}, for what lies ${side} it` }],
  );
}

/** Errors: outside-span, anchor-needed, for a rough time or an instant that cannot be answered for. */
function requireInModel(
  setting: Setting,
  timeline: Timeline,
  near: NonNullable<Reading["near"]>,
  written: string,
): void {
  if (!isInside(setting, near)) {
    const text = formatInstant(near, "UTC", setting.leapSeconds);
    throw outsideSpan(setting, "The rough time", undefined, `at ${text}`).within("near");
  }
  const end = endBeyond(timeline, durationBetween(setting.clock.anchor.at, near));
  if (end !== null)
    throw anchorNeeded(setting, end, `The rough time of the reading ${written}`, undefined).within("near");
}

function endBeyond({ endBefore, endAfter }: Timeline, elapsed: Duration): DatedEvent | null {
  if (endAfter !== null && compareSpans(elapsed, endAfter.elapsed) >= 0) return endAfter;
  return endBefore !== null && compareSpans(elapsed, endBefore.elapsed) < 0 ? endBefore : null;
}

/** Errors: anchor-needed, for an instant beyond the end of the model. */
export function requireModelAt(setting: Setting, elapsed: Duration): void {
  const end = setting.timeline === null ? null : endBeyond(setting.timeline, elapsed);
  if (end === null) return;
  const text = formatInstant(addDuration(setting.clock.anchor.at, elapsed), "UTC", setting.leapSeconds);
  throw anchorNeeded(setting, end, `The instant ${text}`, text);
}
