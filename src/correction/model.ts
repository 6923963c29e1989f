import type { Counter, Oscillator } from "../clock/index.ts";
import type { Trajectory } from "../orbit/index.ts";
import type { ProperTime } from "../relativity/index.ts";
import type { Duration, Instant, LeapSecondTable } from "../time/index.ts";
import type { ClockEvent, Indication } from "./clockEvent.ts";
import type { Timeline } from "./stretch.ts";

/** What a clock shows: ticks counted since some moment, or the time itself as it knows it. */
export type Face =
  | ({ readonly kind: "counter" /** At the anchor. */; readonly anchorReading: bigint } & Counter)
  | {
      readonly kind: "stamp";
      /** Step in which the stamp is written, s; null when it is as good as its digits. */
      readonly resolution: number | null;
    };

export type { Indication };

/** A clock as the corrections see it. A stamped clock's offset at the anchor is part of its oscillator's offset. */
export interface Clock {
  readonly face: Face;
  readonly anchor: {
    readonly at: Instant;
    /** One sigma of `at`, s. Null: not given. */
    readonly sigma: number | null;
  };
  readonly oscillator: Oscillator | null;
  /** What touched the clock, in any order. */
  readonly events: readonly ClockEvent[];
}

/** A trajectory computed ahead, or afterwards from measurements. */
export type Basis = "predicted" | "reconstructed";

export type Unwrap = "after" | "before" | "nearest";

export interface Reading {
  readonly indicated: Indication;
  /** As the user wrote it, for messages. */
  readonly written: string;
  readonly near: Instant | null;
}

/** All that a correction works with. `properTime` is built once along the trajectory and grows as asked. */
export interface Setting {
  readonly clock: Clock;
  readonly trajectory: Trajectory;
  readonly properTime: ProperTime;
  readonly leapSeconds: LeapSecondTable;
  /** The trajectory's span inside the covered years: exact, and in TT seconds since the trajectory's reference. */
  readonly window: { readonly first: Instant; readonly last: Instant; readonly from: number; readonly to: number };
  /** Where the orbit comes from, as far as it was said. */
  readonly basis: Basis | null;
  /** What was given of the Earth's orientation. */
  readonly given: { readonly ut1: boolean; readonly pole: boolean };
  /** The clock's life about its anchor; null when nothing touched it. */
  readonly timeline: Timeline | null;
}

export type Flag =
  | "rollover"
  | "ambiguous-rollover"
  | "before-anchor"
  | "clock-event"
  | "slewing"
  | "locked"
  | "holdover"
  | "predicted-orbit"
  | "implausible-orbit"
  | "coarse-ephemeris"
  | "leap-second"
  | "leap-table-expired";

export interface TermValue {
  readonly term: string;
  readonly label: string;
  /** d(clock - TT)/dTT at the instant. */
  readonly rate: number;
  /** Since the anchor. */
  readonly accumulated: Duration;
}

export interface UncertaintyItem {
  readonly source: string;
  readonly type: "A" | "B";
  /** One standard uncertainty, s. */
  readonly sigma: number;
  /** With what the error is common: nothing ("row"), the neighbours ("pass"), the whole log. */
  readonly shared: "row" | "pass" | "log";
}

/** Clock minus TT at one instant, with everything that is said of it. */
export interface ClockState {
  readonly at: Instant;
  /** TT since the anchor. */
  readonly elapsed: Duration;
  readonly terms: readonly TermValue[];
  readonly clockMinusTt: Duration;
  readonly uncertainty: readonly UncertaintyItem[];
  /** s. */
  readonly combinedSigma: number;
  readonly flags: readonly Flag[];
}

export type CorrectedReading = ClockState;

export interface PredictedReading extends ClockState {
  readonly indicated: Indication;
  /** Part of a tick beyond the reading; zero for a stamp. */
  readonly fraction: number;
  /** Null for a stamp that is as good as its digits. */
  readonly sigmaTicks: number | null;
}
