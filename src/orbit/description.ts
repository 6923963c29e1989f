import type { Vec3 } from "../numeric/index.ts";
import type { Place } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";
import type { Frame, Kinematics } from "./frames.ts";
import type { MeanElements } from "./meanElements.ts";
import type { TableMethod } from "./table.ts";

/** What is known of a state's error; SI, null when not given. */
export interface StateError {
  readonly positionSigma: number | null;
  readonly velocitySigma: number | null;
  readonly semiMajorAxisSigma: number | null;
  /** 6 x 6, rows first: radial, transverse, normal position (m) and velocity (m/s). */
  readonly covarianceRtn: readonly number[] | null;
}

export interface GeodeticPoint {
  /** rad */
  readonly latitude: number;
  readonly longitude: number;
  /** m, above what heightOf says. */
  readonly height: number;
}

export type HeightOf = "ellipsoid" | "geoid";

/** About what a state is given. */
export type Center = "Earth" | "Moon";

export interface TableDescription {
  readonly frame: Frame;
  readonly center: Center;
  readonly states: readonly { readonly epoch: Instant; readonly position: Vec3; readonly velocity: Vec3 | null }[];
}

/** One segment of an ephemeris message. */
export interface SegmentDescription extends TableDescription {
  /** The useable part. */
  readonly first: Instant;
  readonly last: Instant;
  readonly method: TableMethod;
  /** Errors at some of its epochs, against the state there. */
  readonly errors: readonly { readonly epoch: Instant; readonly error: StateError }[];
}

/**
 * A trajectory as described by a user, in SI. `place`: where all faults of it are told, when it comes from a text that has
 * no places of its own (inside the trajectory).
 */
export type TrajectoryDescription = PlainDescription & { readonly place?: Place };

type PlainDescription =
  | ({
      readonly kind: "state-vector";
      readonly frame: Frame;
      readonly epoch: Instant;
      readonly error: StateError;
    } & Kinematics)
  | ({ readonly kind: "state-table" } & TableDescription)
  | { readonly kind: "ephemeris"; readonly segments: readonly SegmentDescription[] }
  | { readonly kind: "mean-elements"; readonly elements: MeanElements }
  | {
      readonly kind: "phases";
      readonly parts: readonly { readonly from: Instant; readonly trajectory: TrajectoryDescription }[];
    }
  | ({ readonly kind: "surface"; readonly heightOf: HeightOf } & GeodeticPoint)
  | ({ /** On the Moon; height above its mean sphere. */ readonly kind: "moon-surface" } & GeodeticPoint)
  | {
      readonly kind: "track";
      readonly heightOf: HeightOf;
      readonly points: readonly ({ readonly at: Instant } & GeodeticPoint)[];
    };

export type DescriptionOf<K extends TrajectoryDescription["kind"]> = Extract<TrajectoryDescription, { kind: K }>;
