import { compareSpans, spanFemtoseconds, ticksToDuration } from "../clock/index.ts";
import { Problem } from "../problem/index.ts";
import { addDuration, addDurations, type Duration, subtractDurations, zeroDuration } from "../time/index.ts";
import { type ClockEvent, type DatedEvent, nameOfEvent } from "./clockEvent.ts";
import { isInside } from "./clockState.ts";
import { indicatedIn, settleIn } from "./crossing.ts";
import { indicatedSpan, rolloverOf, roundedQuotient } from "./indication.ts";
import type { Setting } from "./model.ts";
import type { Stretch } from "./stretch.ts";

/** The event whose reading the clock shows first from the start of this stretch on, if nothing else happens. */
export function nextByReading(setting: Setting, here: Stretch, waiting: ReadonlySet<ClockEvent>): DatedEvent | null {
  if (waiting.size === 0) return null;
  const { clock } = setting;
  const from = here.start ?? zeroDuration;
  const shown = indicatedIn(setting, here, from);
  let found: { event: ClockEvent; indicated: Duration } | null = null;
  for (const event of waiting) {
    if (!("reading" in event.when)) continue;
    const indicated = firstFrom(setting, indicatedSpan(clock, event.when.reading), shown);
    if (compareSpans(indicated, shown) < 0) continue;
    if (found === null || compareSpans(indicated, found.indicated) < 0) found = { event, indicated };
  }
  if (found === null) return null;
  const elapsed = settleIn(setting, here, found.indicated);
  if (!isInside(setting, addDuration(clock.anchor.at, elapsed))) return null;
  const turn = turnOf(setting);
  if (turn !== null && isInside(setting, addDuration(clock.anchor.at, addDurations(elapsed, turn)))) {
    throw new Problem(
      "ambiguous-rollover",
      `The reading of ${nameOfEvent(found.event)} could mean more than one time inside the trajectory's span.`,
      [
        {
          place: ["clock", "events", found.event.index, "atReading"],
          received: "written" in found.event.when ? found.event.when.written : undefined,
          expected: "the event's instant as at, in place of atReading",
        },
      ],
    );
  }
  return { ...found.event, elapsed };
}

function turnOf({ clock }: Setting): Duration | null {
  const rollover = rolloverOf(clock);
  return rollover === null || clock.face.kind !== "counter"
    ? null
    : ticksToDuration(rollover, clock.face.ticksPerSecond);
}

/** The first indication from `shown` on that a counter with a width writes alike. */
function firstFrom(setting: Setting, indicated: Duration, shown: Duration): Duration {
  const rollover = rolloverOf(setting.clock);
  const { face } = setting.clock;
  if (rollover === null || face.kind !== "counter") return indicated;
  const after = (turns: bigint): Duration =>
    addDurations(indicated, ticksToDuration(turns * rollover, face.ticksPerSecond));
  const turn = spanFemtoseconds(ticksToDuration(rollover, face.ticksPerSecond));
  let turns = roundedQuotient(spanFemtoseconds(subtractDurations(shown, indicated)), turn);
  while (compareSpans(after(turns), shown) >= 0) turns--;
  while (compareSpans(after(turns), shown) < 0) turns++;
  return after(turns);
}

/** An event whose reading the clock does not come to show. */
export function neverRead(setting: Setting, event: ClockEvent, last: Stretch): Problem {
  const written = "written" in event.when ? event.when.written : "";
  const later =
    "reading" in event.when &&
    compareSpans(indicatedSpan(setting.clock, event.when.reading), last.low ?? zeroDuration) > 0;
  const where = later ? "inside the trajectory's span" : "at or after the anchor";
  return new Problem(
    later ? "outside-span" : "impossible-clock",
    `The clock does not come to show ${written}, the reading of ${nameOfEvent(event)}, ${where}.`,
    [
      {
        place: ["clock", "events", event.index, "atReading"],
        received: written,
        expected: `a reading that the clock shows ${where}; for an event before the anchor its instant as at`,
      },
    ],
  );
}
