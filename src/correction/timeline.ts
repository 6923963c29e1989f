import { compareSpans } from "../clock/index.ts";
import { addDuration, durationBetween, formatInstant, zeroDuration } from "../time/index.ts";
import { type ClockEvent, type DatedEvent, nameOfEvent } from "./clockEvent.ts";
import { isInside, outsideSpan } from "./clockState.ts";
import {
  crossBackward,
  crossForward,
  faultyEvent,
  freeWithoutLocked,
  indicatedIn,
  lockedTwice,
  requireNoSlew,
  slewOf,
} from "./crossing.ts";
import { neverRead, nextByReading } from "./eventByReading.ts";
import type { Setting } from "./model.ts";
import { shownIn } from "./shown.ts";
import { homeStretch, type Stretch, slewEnd, type Timeline } from "./stretch.ts";

/**
 * The clock's life about its anchor: the stretches between its events, each with the state at its nearer end.
 * The anchor's model is the state at the anchor; later events act on it forwards, earlier ones are undone backwards.
 * Errors, with places: outside-span, ambiguous-rollover (an event by reading), impossible-clock.
 */
export function buildTimeline(setting: Setting): Timeline | null {
  const { events } = setting.clock;
  if (events.length === 0) return null;
  const dated = events.filter((event) => "at" in event.when).map((event) => dateEvent(setting, event));
  const byReading = events.filter((event) => "reading" in event.when);
  dated.sort(inOrder);
  const past = dated.filter(({ elapsed }) => compareSpans(elapsed, zeroDuration) <= 0);
  const home = homeOf(past);
  const forward = goForward(setting, home, dated.slice(past.length), byReading);
  const backward = goBackward(setting, forward.stretches[0]!, past);
  const all = [...past, ...forward.met].sort(inOrder);
  requireCompatible(all);
  const freed = all.filter(({ effect }) => effect.kind === "free");
  const stretches = [...backward.stretches, ...forward.stretches.slice(1)].map((stretch) => ({
    ...stretch,
    holdover:
      !stretch.locked &&
      stretch.start !== null &&
      freed.some(({ elapsed }) => compareSpans(elapsed, stretch.start!) <= 0),
  }));
  return {
    stretches,
    shown: stretches.map((stretch) => shownIn(setting, stretch)),
    jumps: all.filter(({ effect }) => ["step", "leap-second", "set"].includes(effect.kind)),
    endBefore: backward.end,
    endAfter: forward.end,
  };
}

function dateEvent(setting: Setting, event: ClockEvent): DatedEvent {
  const { clock, leapSeconds } = setting;
  if (!("at" in event.when)) throw new TypeError("only an event with an instant is dated by it");
  const { at } = event.when;
  if (!isInside(setting, at)) {
    const text = formatInstant(at, "UTC", leapSeconds);
    throw outsideSpan(setting, nameOfEvent(event), text, `at ${text}`).within("clock", "events", event.index, "at");
  }
  return { ...event, elapsed: durationBetween(clock.anchor.at, at) };
}

const size = ({ effect }: DatedEvent): number => (effect.kind === "rate" ? effect.change : 0);

/** By instant; those at one instant so that the order of the list given does not matter. */
function inOrder(a: DatedEvent, b: DatedEvent): number {
  return (
    compareSpans(a.elapsed, b.elapsed) ||
    a.effect.kind.localeCompare(b.effect.kind) ||
    size(a) - size(b) ||
    (a.sigma ?? 0) - (b.sigma ?? 0)
  );
}

/** The stretch of the anchor, from the events at and before it. */
function homeOf(past: readonly DatedEvent[]): Stretch {
  let locked = false;
  for (const event of past) {
    if (event.effect.kind === "locked" && locked) throw lockedTwice(event);
    if (event.effect.kind === "free" && !locked) throw freeWithoutLocked(event);
    if (event.effect.kind === "locked" || event.effect.kind === "free") locked = event.effect.kind === "locked";
  }
  let home = homeStretch(null, locked);
  for (const event of past) {
    if (event.effect.kind !== "slew" || compareSpans(slewEnd(slewOf(event)), zeroDuration) <= 0) continue;
    requireNoSlew(home, event);
    home = homeStretch(slewOf(event), locked);
  }
  return home;
}

interface Journey {
  readonly stretches: Stretch[];
  readonly end: DatedEvent | null;
  readonly met: readonly DatedEvent[];
}

const endsModel = ({ effect: { kind } }: DatedEvent, past: boolean): boolean =>
  kind === "reset" || kind === "oscillator" || (past && kind === "set");

/** From the anchor into the future; events that are known by their reading are dated on the way. */
function goForward(
  setting: Setting,
  home: Stretch,
  later: readonly DatedEvent[],
  byReading: readonly ClockEvent[],
): Journey {
  const stretches: Stretch[] = [];
  const met: DatedEvent[] = [];
  const waiting = new Set(byReading);
  let here = home;
  let index = 0;
  for (;;) {
    let next: DatedEvent | null = later[index] ?? null;
    const read = nextByReading(setting, here, waiting);
    if (read !== null && (next === null || compareSpans(read.elapsed, next.elapsed) < 0)) next = read;
    const slewStops = here.slew === null ? null : slewEnd(here.slew);
    const stops = slewStops !== null && (next === null || compareSpans(slewStops, next.elapsed) <= 0);
    if (stops && !isInside(setting, addDuration(setting.clock.anchor.at, slewStops))) break;
    const border = stops ? slewStops : next?.elapsed;
    if (border === undefined) break;
    stretches.push({ ...here, end: border, high: indicatedIn(setting, here, border) });
    if (!stops && endsModel(next!, false)) return { stretches, end: next, met: [...met, next!] };
    here = crossForward(setting, here, border, stops ? null : next);
    if (stops) continue;
    met.push(next!);
    if (next === read) waiting.delete(byReading.find((event) => event.index === next!.index)!);
    else index++;
  }
  stretches.push(here);
  for (const event of waiting) throw neverRead(setting, event, here);
  return { stretches, end: null, met };
}

/** From the anchor's stretch into the past. `past`: in order of time. */
function goBackward(setting: Setting, home: Stretch, past: readonly DatedEvent[]): Journey {
  const borders = past.flatMap((event) => {
    const start = { border: event.elapsed, event, part: "start" as const };
    if (event.effect.kind !== "slew") return [start];
    const end = slewEnd(slewOf(event));
    return compareSpans(end, zeroDuration) > 0 ? [start] : [start, { border: end, event, part: "end" as const }];
  });
  // At one instant a slew that ends comes before whatever begins.
  borders.sort((a, b) => compareSpans(a.border, b.border) || a.part.localeCompare(b.part));
  const stretches: Stretch[] = [];
  let here = home;
  for (const { border, event, part } of borders.reverse()) {
    stretches.unshift({ ...here, start: border, low: indicatedIn(setting, here, border) });
    if (endsModel(event, true)) return { stretches, end: event, met: [] };
    here = crossBackward(setting, here, border, event, part);
  }
  stretches.unshift(here);
  return { stretches, end: null, met: [] };
}

/** Errors: impossible-clock when what happened at one instant depends on which came first. */
function requireCompatible(events: readonly DatedEvent[]): void {
  for (const [i, event] of events.entries()) {
    const jumps = (kind: string): boolean => ["set", "step", "leap-second"].includes(kind);
    const locks = (kind: string): boolean => kind === "locked" || kind === "free";
    for (let j = i - 1; j >= 0 && compareSpans(events[j]!.elapsed, event.elapsed) === 0; j--) {
      const [a, b] = [events[j]!.effect.kind, event.effect.kind];
      const setTwice = (a === "set" || b === "set") && jumps(a) && jumps(b);
      if (!setTwice && !(locks(a) && locks(b))) continue;
      const [first, second] = [events[j]!, event].sort((x, y) => x.index - y.index) as [DatedEvent, DatedEvent];
      throw faultyEvent(
        second,
        [],
        `${nameOfEvent(first)} and ${nameOfEvent(second)} are at one instant, and it matters which came first.`,
        "different instants, or one of the two",
      );
    }
  }
}
