import { compareSpans, type FreeRun, portion, spanFemtoseconds } from "../clock/index.ts";
import { addToTwoPart, multiplyTwoPart, type TwoPart } from "../numeric/index.ts";
import {
  addDurations,
  type Duration,
  durationFromSeconds,
  subtractDurations,
  sumDurations,
  toSeconds,
  zeroDuration,
} from "../time/index.ts";
import type { DatedEvent } from "./clockEvent.ts";

/** A slew under way: `step` gained evenly between `start` and `start` + `length` (TT since the anchor). */
export interface Slew {
  readonly start: Duration;
  readonly step: Duration;
  readonly length: Duration;
}

/** Where a free run of the oscillator began, counted outwards from the anchor, and what stood there. */
export interface Run {
  /** TT since the anchor. */
  readonly from: Duration;
  /** Accumulated physical terms; null: all zero. */
  readonly physical: readonly number[] | null;
  /** Of all the runs nearer to the anchor: proper time, and the sum of each one's square. */
  readonly tau: TwoPart;
  readonly square: TwoPart;
  /** The runs nearer to the anchor, TT seconds since it. */
  readonly nearer: readonly (readonly [number, number])[];
}

/** A stretch between two events, in which the clock runs without a jump. */
export interface Stretch {
  /** TT since the anchor; null: as far as the trajectory goes. The start belongs to the stretch, the end does not. */
  readonly start: Duration | null;
  readonly end: Duration | null;
  /** The end that is nearer to the anchor, or the anchor; what follows is the state there. */
  readonly reference: Duration;
  /** The event term. */
  readonly base: Duration;
  /** Free proper time since the anchor. */
  readonly tau: TwoPart;
  /** What rate events have changed of the fractional frequency since the anchor. */
  readonly change: number;
  readonly slew: Slew | null;
  readonly locked: boolean;
  readonly holdover: boolean;
  readonly run: Run;
  /** Sum of the squares of the sigmas of the events between here and the anchor, s^2. */
  readonly variance: number;
  /** What a reading indicates since the anchor just inside the two ends; null at an end that is null. */
  readonly low: Duration | null;
  readonly high: Duration | null;
}

export interface Range {
  readonly low: Duration;
  readonly high: Duration;
}

/** What the readings of a stretch indicate since the anchor: the low end inside, the high end not. */
export interface Shown extends Range {
  readonly stretch: Stretch;
  /** Beyond its ends: what ticks stand for that an event has cut short. */
  readonly cut: readonly Range[];
  /** All of it in seconds, with a margin, for a quick look. */
  readonly from: number;
  readonly to: number;
}

/** The clock's life about its anchor. */
export interface Timeline {
  /** In order of time. */
  readonly stretches: readonly Stretch[];
  /** What each of them shows. */
  readonly shown: readonly Shown[];
  /** Events at which the clock jumped, in order. */
  readonly jumps: readonly DatedEvent[];
  /** Where the model ends on either side: a reset, another oscillator, a set before the anchor. */
  readonly endBefore: DatedEvent | null;
  readonly endAfter: DatedEvent | null;
}

const nothing: TwoPart = { high: 0, low: 0 };

export const firstRun: Run = { from: zeroDuration, physical: null, tau: nothing, square: nothing, nearer: [] };

/** The stretch that holds the anchor, before its ends are known. */
export const homeStretch = (slew: Slew | null, locked: boolean): Stretch => ({
  start: null,
  end: null,
  reference: zeroDuration,
  base: zeroDuration,
  tau: nothing,
  change: 0,
  slew,
  locked,
  holdover: false,
  run: firstRun,
  variance: 0,
  low: null,
  high: null,
});

/** What a slew has gained at a moment inside it. */
const gained = ({ start, step, length }: Slew, elapsed: Duration): Duration =>
  portion(step, subtractDurations(elapsed, start), length);

/** The event term at a moment, given the free proper time since the anchor there. */
export function eventTerm(stretch: Stretch, elapsed: Duration, tau: TwoPart): Duration {
  const { base, change, slew, reference } = stretch;
  const parts = [base];
  if (change !== 0) {
    const since = addToTwoPart(addToTwoPart(tau, -stretch.tau.high), -stretch.tau.low);
    const product = multiplyTwoPart(since, { high: change, low: 0 });
    parts.push(durationFromSeconds(product.high, product.low));
  }
  if (slew !== null) parts.push(subtractDurations(gained(slew, elapsed), gained(slew, reference)));
  return sumDurations(parts);
}

/** Seconds gained a second while a slew lasts. */
export const slewRate = ({ slew }: Pick<Stretch, "slew">): number =>
  slew === null ? 0 : Number(spanFemtoseconds(slew.step)) / Number(spanFemtoseconds(slew.length));

export const slewEnd = ({ start, length }: Slew): Duration => addDurations(start, length);

/** All the free running up to a moment, for the oscillator's polynomial, from the proper time of the present run. */
export function freeRun({ run, locked }: Stretch, own: TwoPart): FreeRun {
  if (locked) return { total: run.tau, square: run.square, since: 0 };
  const square = multiplyTwoPart(own, own);
  if (run.physical === null) return { total: own, square, since: own.high };
  return {
    total: addToTwoPart(addToTwoPart(own, run.tau.high), run.tau.low),
    square: addToTwoPart(addToTwoPart(square, run.square.high), run.square.low),
    since: own.high,
  };
}

/** The stretches of free running between the anchor and a moment, TT seconds since the anchor; for uncertainties. */
export function freeSpans(stretch: Stretch | null, elapsed: number): (readonly [number, number])[] {
  if (stretch === null) return [[0, elapsed]];
  const { run, locked } = stretch;
  return locked ? [...run.nearer] : [...run.nearer, [toSeconds(run.from), elapsed]];
}

/** The stretch that a moment belongs to, or the outermost one when it lies beyond the model's end. */
export function stretchAt({ stretches }: Pick<Timeline, "stretches">, elapsed: Duration): Stretch {
  let low = 0;
  let high = stretches.length;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (compareSpans(stretches[middle]!.start!, elapsed) <= 0) low = middle;
    else high = middle;
  }
  return stretches[low]!;
}
