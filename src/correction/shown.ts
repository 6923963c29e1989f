import { tickFraction } from "../clock/index.ts";
import {
  addDurations,
  type Duration,
  durationBetween,
  durationFromSeconds,
  subtractDurations,
  toSeconds,
  zeroDuration,
} from "../time/index.ts";
import { roughlyOff } from "./crossing.ts";
import { rolloverOf } from "./indication.ts";
import type { Clock, Setting } from "./model.ts";
import type { Range, Shown, Stretch } from "./stretch.ts";

/** Margin of what is told by doubles alone, s. */
const margin = 1e-3;

/**
 * What readings of a stretch indicate. Where the trajectory ends it is known without relativity: with a margin, or to a
 * microsecond when rollovers must be counted.
 */
export function shownIn(setting: Setting, stretch: Stretch): Shown {
  const { clock, window } = setting;
  const edge = (at: typeof window.first, sign: number): Duration => {
    const elapsed = durationBetween(clock.anchor.at, at);
    const spare = rolloverOf(clock) === null ? 1 + 1e-8 * Math.abs(elapsed.seconds) : 0;
    return addDurations(
      addDurations(elapsed, roughlyOff(setting, stretch, elapsed)),
      durationFromSeconds(sign * spare),
    );
  };
  const low = stretch.low ?? edge(window.first, -1);
  const high = stretch.high ?? edge(window.last, 1);
  const { before, after } = cellOf(clock);
  const cut: Range[] = [];
  if (stretch.low !== null) cut.push({ low: addDurations(subtractDurations(low, before), oneFemtosecond), high: low });
  if (stretch.high !== null) cut.push({ low: high, high: addDurations(high, after) });
  return {
    stretch,
    low,
    high,
    cut,
    from: toSeconds(low) - toSeconds(before) - margin,
    to: toSeconds(high) + toSeconds(after) + margin,
  };
}

const oneFemtosecond: Duration = { seconds: 0, femtoseconds: 1 };

/** How much of a tick before and after its nominal value a reading may stand for. */
function cellOf({ face }: Clock): { before: Duration; after: Duration } {
  if (face.kind === "stamp") {
    const half = durationFromSeconds((face.resolution ?? 0) / 2);
    return { before: half, after: half };
  }
  const half = tickFraction(1n, 2n, face.ticksPerSecond);
  return face.stands === "edge"
    ? { before: tickFraction(1n, 1n, face.ticksPerSecond), after: zeroDuration }
    : { before: half, after: half };
}
