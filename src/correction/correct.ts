import {
  counterModulus,
  durationToTicks,
  oscillatorTerms,
  tickSeconds,
  ticksToDuration,
  unbroken,
} from "../clock/index.ts";
import { invariant, Problem } from "../problem/index.ts";
import {
  addDuration,
  addDurations,
  type Duration,
  durationBetween,
  formatInstant,
  secondsBetween,
  sumDurations,
  toTwoPartSeconds,
} from "../time/index.ts";
import { clockMinusTt, latchOf } from "./clockMinusTt.ts";
import { clockStateAt, isInside, outsideSpan } from "./clockState.ts";
import { correctThroughEvents } from "./eventReading.ts";
import { fixedPoint } from "./fixedPoint.ts";
import { beyondWidth, fits, indicatedSpan, roundedQuotient, whenInWords } from "./indication.ts";
import type { CorrectedReading, Face, Flag, Reading, Setting, Unwrap } from "./model.ts";

type CounterFace = Extract<Face, { kind: "counter" }>;

/**
 * Corrects one reading: counter -> indicated elapsed time (exact) -> the fixed point of
 * TT = anchor + indicated - (clock - TT)(TT), to below a femtosecond -> an instant rounded once to the picosecond.
 * Errors: ambiguous-rollover, reading-beyond-width, outside-span, impossible-clock (an oscillator that does not converge);
 * those of correctThroughEvents for a clock with events.
 */
export function correctReading(setting: Setting, reading: Reading, unwrap: Unwrap | null): CorrectedReading {
  const flags: Flag[] = [];
  const { clock, timeline } = setting;
  if (timeline !== null) return correctThroughEvents(setting, timeline, reading, unwrap);
  const indicated = indicatedSinceAnchor(setting, reading, unwrap, flags);
  const outside = (elapsed: Duration) =>
    outsideSpan(setting, "The reading", reading.written, whenInWords(setting, elapsed)).within("reading");
  // A reading that is far outside by the oscillator alone is refused before anything is propagated for it.
  const rough = withoutRelativity(setting, indicated);
  if (!isNear(setting, rough)) throw outside(rough);
  const elapsed = settle(setting, indicated);
  if (!isInside(setting, addDuration(clock.anchor.at, elapsed))) throw outside(elapsed);
  return clockStateAt(setting, elapsed, true, flags);
}

/** Whether an instant that is known without relativity can lie inside: relativity moves it by less than 1e-8 of itself. */
function isNear(setting: Setting, elapsed: Duration): boolean {
  const margin = 1 + 1e-8 * Math.abs(elapsed.seconds);
  const at = addDuration(setting.clock.anchor.at, elapsed);
  const { first, last } = setting.window;
  return secondsBetween(last, at) < margin && secondsBetween(at, first) < margin;
}

/** TT since the anchor at which the clock indicates `indicated` since the anchor. */
function settle(setting: Setting, indicated: Duration): Duration {
  return fixedPoint(indicated, (elapsed) => clockMinusTt(setting, elapsed, true, false).total);
}

/** The same by the oscillator alone, without relativity; it costs no propagation. */
function withoutRelativity(setting: Setting, indicated: Duration): Duration {
  if (Math.abs(indicated.seconds) > 1e11) return indicated;
  return fixedPoint(indicated, (elapsed) => offByOscillator(setting, elapsed));
}

function offByOscillator({ clock }: Setting, elapsed: Duration): Duration {
  const terms = oscillatorTerms(clock.oscillator, unbroken(toTwoPartSeconds(elapsed)), 1);
  return sumDurations([...terms.map(({ accumulated }) => accumulated), latchOf(clock)]);
}

/** What the clock has counted since the anchor's instant: exact, with the rollovers put back. */
function indicatedSinceAnchor(setting: Setting, reading: Reading, unwrap: Unwrap | null, flags: Flag[]): Duration {
  const { face } = setting.clock;
  const { indicated } = reading;
  if (face.kind === "stamp") return indicatedSpan(setting.clock, indicated);
  invariant(typeof indicated === "bigint", "a counter is read as ticks");
  return ticksToDuration(elapsedTicks(setting, face, indicated, reading, unwrap, flags), face.ticksPerSecond);
}

function elapsedTicks(
  setting: Setting,
  face: CounterFace,
  ticks: bigint,
  { near, written }: Reading,
  unwrap: Unwrap | null,
  flags: Flag[],
): bigint {
  const difference = ticks - face.anchorReading;
  if (face.widthBits === null) return difference;
  const modulus = counterModulus(face.widthBits);
  if (!fits(ticks, face.widthBits)) throw beyondWidth(ticks, face.widthBits).within("reading");
  const turns =
    near !== null
      ? turnsNear(setting, face, difference, modulus, near, flags)
      : turnsByRule(setting, face, difference, modulus, unwrap, written);
  if (turns !== 0n) flags.unshift("rollover");
  return difference + turns * modulus;
}

/** The number of rollovers that brings the reading nearest to a rough time. */
function turnsNear(
  setting: Setting,
  face: CounterFace,
  difference: bigint,
  modulus: bigint,
  near: NonNullable<Reading["near"]>,
  flags: Flag[],
): bigint {
  const { clock } = setting;
  const elapsed = durationBetween(clock.anchor.at, near);
  if (!isInside(setting, near)) {
    throw outsideSpan(
      setting,
      "The rough time",
      undefined,
      `at ${formatInstant(near, "UTC", setting.leapSeconds)}`,
    ).within("near");
  }
  // Relativity moves the clock by less than 1e-8 of the span: where that is far below half a rollover it is not asked.
  const rollover = Number(modulus) * tickSeconds(face.ticksPerSecond);
  const total =
    1e-8 * Math.abs(elapsed.seconds) < 1e-4 * rollover
      ? offByOscillator(setting, elapsed)
      : clockMinusTt(setting, elapsed, false, false).total;
  const { ticks } = durationToTicks(addDurations(elapsed, total), { ...face, stands: "rounded" });
  const gap = ticks - difference;
  const turns = roundedQuotient(gap, modulus);
  // The rough time lies within a thousandth of the middle between two candidates: it does not settle much.
  const rest = gap - turns * modulus;
  const fromMiddle = modulus - 2n * (rest < 0n ? -rest : rest);
  if (fromMiddle * 1000n < modulus) flags.push("ambiguous-rollover");
  return turns;
}

function turnsByRule(
  setting: Setting,
  face: CounterFace,
  difference: bigint,
  modulus: bigint,
  unwrap: Unwrap | null,
  written: string,
): bigint {
  if (unwrap === "nearest") return roundedQuotient(-difference, modulus);
  if (unwrap === "after") return difference >= 0n ? 0n : 1n; // |difference| < modulus
  if (unwrap === "before") return difference <= 0n ? 0n : -1n;
  const inside = candidates(setting, face, difference, modulus);
  const first = inside[0];
  if (first === undefined) return 0n; // not inside at all: the span test says so
  if (inside.length === 1) return first.turns;
  const times = inside.map(({ elapsed }) => whenInWords(setting, elapsed).replace(/^at /, ""));
  throw new Problem(
    "ambiguous-rollover",
    `The reading could mean ${times[0]} or ${times[1]}: both lie inside the trajectory's span.`,
    [
      {
        place: ["reading"],
        received: written,
        expected: 'a rough time "near", or "unwrap" to say which is meant',
      },
    ],
  );
}

/**
 * The rollovers for which the reading falls into the span, first ones about the anchor. The span holds the anchor, so
 * whatever is inside on one side of it is inside from the anchor outwards: three on either side are enough to find two
 * (one to spare for a clock that is off at the anchor). The span's ends are met without relativity, to a microsecond, so
 * that the question costs no propagation.
 */
function candidates(
  setting: Setting,
  face: CounterFace,
  difference: bigint,
  modulus: bigint,
): { turns: bigint; elapsed: Duration }[] {
  const rate = face.ticksPerSecond;
  const out: { turns: bigint; elapsed: Duration }[] = [];
  const firstAfter = difference >= 0n ? 0n : 1n; // |difference| < modulus
  for (const step of [0n, -1n, 1n, -2n, 2n, -3n]) {
    const turns = firstAfter + step;
    const elapsed = withoutRelativity(setting, ticksToDuration(difference + turns * modulus, rate));
    if (isInside(setting, addDuration(setting.clock.anchor.at, elapsed))) out.push({ turns, elapsed });
  }
  return out;
}
