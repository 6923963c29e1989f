import type { Duration, Instant } from "../time/index.ts";

/** A reading freed of its writing: ticks of a counter, or the moment that a stamp names. */
export type Indication = bigint | Instant;

/** What a clock event does. Steps and slews are positive when the clock then shows more. */
export type EventEffect =
  | { readonly kind: "step" | "leap-second"; readonly step: Duration }
  /** Gains `step` evenly over `length`, by TT. */
  | { readonly kind: "slew"; readonly step: Duration; readonly length: Duration }
  /** Changes the fractional frequency against proper time. */
  | { readonly kind: "rate"; readonly change: number }
  /** From this instant the clock shows `to`. */
  | { readonly kind: "set"; readonly to: Indication }
  /** Ends the model on the far side of the anchor. */
  | { readonly kind: "oscillator" | "reset" }
  /** Follows its scale from then on; runs free again. */
  | { readonly kind: "locked" | "free" };

/** Somebody or something touched the clock. */
export interface ClockEvent {
  /** When: the instant, or the reading that the clock showed just before. */
  readonly when: { readonly at: Instant } | { readonly reading: Indication; readonly written: string };
  readonly effect: EventEffect;
  /** One sigma of what it did to the clock, s. Null: not given. */
  readonly sigma: number | null;
  /** Its place in the list that was given. */
  readonly index: number;
}

/** An event whose moment is known. */
export interface DatedEvent extends ClockEvent {
  /** TT since the anchor. */
  readonly elapsed: Duration;
}

/** How an event is named in messages, for example "events[3] (step)". */
export const nameOfEvent = ({ index, effect }: ClockEvent): string => `events[${index}] (${effect.kind})`;
