import { compareSpans, distance, spanFemtoseconds, ticksToDuration } from "../clock/index.ts";
import { addDurations, type Duration, subtractDurations, toSeconds, zeroDuration } from "../time/index.ts";
import { roughlyOff } from "./crossing.ts";
import { rolloverOf, roundedQuotient } from "./indication.ts";
import type { Clock, Setting, Unwrap } from "./model.ts";
import { type Range, type Shown, type Stretch, stretchAt, type Timeline } from "./stretch.ts";

/** A way to understand a reading: in which stretch, after how many rollovers. */
export interface Candidate {
  readonly stretch: Stretch;
  readonly turns: bigint;
  readonly indicated: Duration;
  /** TT since the anchor, roughly: good enough to choose by. */
  readonly elapsed: Duration;
}

/** The numbers of rollovers that bring an indication into a range (low end inside, high end not). */
export function turnsInto(clock: Clock, span: Duration, { low, high }: Range): { first: bigint; last: bigint } | null {
  const rollover = rolloverOf(clock);
  if (compareSpans(low, high) >= 0) return null;
  if (rollover === null || clock.face.kind !== "counter") {
    return compareSpans(span, low) >= 0 && compareSpans(span, high) < 0 ? { first: 0n, last: 0n } : null;
  }
  const { ticksPerSecond } = clock.face;
  const after = (turns: bigint): Duration => addDurations(span, ticksToDuration(turns * rollover, ticksPerSecond));
  const turn = spanFemtoseconds(ticksToDuration(rollover, ticksPerSecond));
  const reach = (end: Duration): bigint => {
    let turns = roundedQuotient(spanFemtoseconds(subtractDurations(end, span)), turn);
    while (compareSpans(after(turns), end) >= 0) turns--;
    while (compareSpans(after(turns), end) < 0) turns++;
    return turns; // the first that is not below the end
  };
  const [first, last] = [reach(low), reach(high) - 1n];
  return first <= last ? { first, last } : null;
}

/**
 * The stretches that show the reading, outwards from the moment `about`, as far as they can matter to `rule`: of each the
 * rollovers nearest to that moment and those at its ends. A tick that an event has cut short was shown too: it counts
 * where nothing shows it whole.
 */
export function candidates(
  setting: Setting,
  timeline: Timeline,
  span: Duration,
  about: Duration,
  rule: Unwrap | null,
): Candidate[] {
  const { clock } = setting;
  const { shown } = timeline;
  const spanSeconds = toSeconds(span);
  const turn = turnSeconds(clock);
  const out: Candidate[] = [];
  const cut: Candidate[] = [];
  for (const entry of outwards(timeline, about)) {
    const away = distance(within(entry.stretch, about), about);
    if (isEnough(out, about, away, rule)) break;
    if (!mayShow(entry, spanSeconds, turn)) continue;
    const turns = turnsInto(clock, span, entry);
    if (turns !== null) {
      for (const k of picked(setting, entry.stretch, span, about, turns)) {
        out.push(candidate(setting, entry.stretch, span, k));
      }
    }
    for (const range of entry.cut) {
      const few = turnsInto(clock, span, range);
      if (few !== null) cut.push(candidate(setting, entry.stretch, span, few.first));
    }
  }
  const whole = ({ turns }: Candidate): boolean =>
    shown.some((entry) => {
      if (!mayShow(entry, spanSeconds, turn)) return false;
      const inside = turnsInto(clock, span, entry);
      return inside !== null && turns >= inside.first && turns <= inside.last;
    });
  for (const one of cut) {
    if (!out.some(({ turns }) => turns === one.turns) && !whole(one)) out.push(one);
  }
  return out;
}

/** Whether a candidate lies after the anchor, or before it. */
export const isOnSide = ({ elapsed }: Candidate, side: Unwrap): boolean =>
  side === "nearest" || compareSpans(elapsed, zeroDuration) * (side === "after" ? 1 : -1) >= 0;

/** Whether nothing that lies further away can change the choice. */
function isEnough(out: readonly Candidate[], about: Duration, away: Duration, rule: Unwrap | null): boolean {
  const wanted = rule === "after" || rule === "before" ? out.filter((one) => isOnSide(one, rule)) : out;
  const nearer = wanted.filter(({ elapsed }) => compareSpans(distance(elapsed, about), away) < 0);
  return nearer.length >= 2;
}

function* outwards({ shown, stretches }: Timeline, about: Duration): Generator<Shown> {
  let left = stretches.indexOf(stretchAt({ stretches }, about));
  let right = left + 1;
  const gap = (index: number): number => toSeconds(distance(within(stretches[index]!, about), about));
  while (left >= 0 || right < shown.length) {
    if (right >= shown.length || (left >= 0 && gap(left) <= gap(right))) yield shown[left--]!;
    else yield shown[right++]!;
  }
}

const turnSeconds = ({ face }: Clock): number | null => {
  if (face.kind !== "counter" || face.widthBits === null) return null;
  return (2 ** face.widthBits * Number(face.ticksPerSecond.denominator)) / Number(face.ticksPerSecond.numerator);
};

/** What doubles can tell: false when a stretch surely does not show the reading. */
function mayShow({ from, to }: Shown, span: number, turn: number | null): boolean {
  if (turn === null) return span >= from && span <= to;
  const spare = 1e-12 * Math.abs(span) + 1e-14 * turn;
  return span + Math.ceil((from - spare - span) / turn) * turn <= to + spare;
}

function picked(
  setting: Setting,
  stretch: Stretch,
  span: Duration,
  about: Duration,
  { first, last }: { first: bigint; last: bigint },
): Set<bigint> {
  const { clock } = setting;
  const rollover = rolloverOf(clock);
  if (rollover === null || clock.face.kind !== "counter" || first === last) return new Set([first]);
  const wanted = addDurations(about, roughlyOff(setting, stretch, within(stretch, about)));
  const turn = spanFemtoseconds(ticksToDuration(rollover, clock.face.ticksPerSecond));
  const middle = roundedQuotient(spanFemtoseconds(subtractDurations(wanted, span)), turn);
  return new Set([middle - 1n, middle, middle + 1n, first, last].filter((k) => k >= first && k <= last));
}

function candidate(setting: Setting, stretch: Stretch, span: Duration, turns: bigint): Candidate {
  const { clock } = setting;
  const rollover = rolloverOf(clock);
  const indicated =
    rollover === null || clock.face.kind !== "counter"
      ? span
      : addDurations(span, ticksToDuration(turns * rollover, clock.face.ticksPerSecond));
  // The clock's rate is within some percent of one: first guessed with the offset at the near end, then once again.
  const guess = within(stretch, subtractDurations(indicated, roughlyOff(setting, stretch, stretch.reference)));
  return { stretch, turns, indicated, elapsed: subtractDurations(indicated, roughlyOff(setting, stretch, guess)) };
}

/** The moment of a stretch that is nearest to another. */
function within({ start, end }: Stretch, elapsed: Duration): Duration {
  if (start !== null && compareSpans(elapsed, start) < 0) return start;
  return end !== null && compareSpans(elapsed, end) > 0 ? end : elapsed;
}
