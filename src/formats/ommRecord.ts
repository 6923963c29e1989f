import { type Covariance, covarianceKeywords } from "./covariance.ts";
import { type BlockRules, keywordsOf } from "./fields.ts";
import { headerLayout, type MessageLayout, spacecraftLayout, userDefinedLayout } from "./flatMessage.ts";
import type { MessageEpoch, MessageHeader, MessageVersion, SpacecraftParameters, UserDefined } from "./message.ts";

/**
 * Orbit mean-elements message in KVN, XML or JSON.
 * Source: CCSDS 502.0-B-3 section 4, tables 4-1 to 4-3 (version 3.0) and 502.0-B-2 (version 2.0). The JSON form, one flat
 * object of the same keywords, is common practice of public catalogues, no source.
 */
export interface Omm {
  readonly version: MessageVersion;
  readonly header: MessageHeader;
  readonly metadata: OmmMetadata;
  readonly elements: OmmElements;
  readonly spacecraft: SpacecraftParameters | null;
  /** What SGP4 needs beside the elements. */
  readonly tle: OmmTleParameters | null;
  readonly covariance: Covariance | null;
  readonly userDefined: UserDefined | null;
}

export interface OmmMetadata {
  readonly comments: readonly string[];
  readonly objectName: string;
  readonly objectId: string;
  readonly centerName: string;
  readonly refFrame: string;
  readonly refFrameEpoch: MessageEpoch | null;
  readonly timeSystem: string;
  /** "SGP4", "SGP/SGP4", "SGP4-XP", "DSST", ... as written. */
  readonly meanElementTheory: string;
}

/** Mean elements at the epoch. Exactly one of mean motion and semi-major axis is given. */
export interface OmmElements {
  readonly comments: readonly string[];
  readonly epoch: MessageEpoch;
  readonly semiMajorAxisKm: number | null;
  readonly meanMotionRevPerDay: number | null;
  readonly eccentricity: number;
  readonly inclinationDeg: number;
  readonly ascendingNodeDeg: number;
  readonly pericentreArgumentDeg: number;
  readonly meanAnomalyDeg: number;
  readonly gmKm3PerS2: number | null;
}

export interface OmmTleParameters {
  readonly comments: readonly string[];
  readonly ephemerisType: number | null;
  readonly classificationType: string | null;
  readonly catalogueNumber: number | null;
  readonly elementSetNumber: number | null;
  readonly revolutionAtEpoch: number | null;
  /** 1/(Earth radii). */
  readonly bstarPerEarthRadius: number | null;
  readonly btermM2PerKg: number | null;
  /** As in the message: half the derivative when the message comes from two-line elements (section 4.2.4.7). */
  readonly meanMotionDotRevPerDay2: number | null;
  /** As in the message: a sixth of the derivative when the message comes from two-line elements. */
  readonly meanMotionDdotRevPerDay3: number | null;
  readonly agomM2PerKg: number | null;
}

export const ommMetadataRules: BlockRules<OmmMetadata> = {
  objectName: { keyword: "OBJECT_NAME", kind: "text", required: true },
  objectId: { keyword: "OBJECT_ID", kind: "text", required: true },
  centerName: { keyword: "CENTER_NAME", kind: "text", required: true },
  refFrame: { keyword: "REF_FRAME", kind: "text", required: true },
  refFrameEpoch: { keyword: "REF_FRAME_EPOCH", kind: "epoch" },
  timeSystem: { keyword: "TIME_SYSTEM", kind: "text", required: true },
  meanElementTheory: { keyword: "MEAN_ELEMENT_THEORY", kind: "text", required: true },
};

const positive = [(value: number) => value > 0, "a number above 0"] as const;

export const ommElementRules: BlockRules<OmmElements> = {
  epoch: { keyword: "EPOCH", kind: "epoch", required: true },
  semiMajorAxisKm: { keyword: "SEMI_MAJOR_AXIS", kind: "number", unit: "km", test: positive },
  meanMotionRevPerDay: { keyword: "MEAN_MOTION", kind: "number", unit: "rev/day", test: positive },
  eccentricity: {
    keyword: "ECCENTRICITY",
    kind: "number",
    required: true,
    test: [(value) => value >= 0 && value < 1, "a number of at least 0 and below 1"],
  },
  inclinationDeg: {
    keyword: "INCLINATION",
    kind: "number",
    unit: "deg",
    required: true,
    test: [(value) => value >= 0 && value <= 180, "an angle from 0 to 180 (deg)"],
  },
  ascendingNodeDeg: { keyword: "RA_OF_ASC_NODE", kind: "number", unit: "deg", required: true },
  pericentreArgumentDeg: { keyword: "ARG_OF_PERICENTER", kind: "number", unit: "deg", required: true },
  meanAnomalyDeg: { keyword: "MEAN_ANOMALY", kind: "number", unit: "deg", required: true },
  gmKm3PerS2: { keyword: "GM", kind: "number", unit: "km**3/s**2", test: positive },
};

export const ommTleRules: BlockRules<OmmTleParameters> = {
  ephemerisType: { keyword: "EPHEMERIS_TYPE", kind: "whole" },
  classificationType: { keyword: "CLASSIFICATION_TYPE", kind: "text" },
  catalogueNumber: {
    keyword: "NORAD_CAT_ID",
    kind: "whole",
    test: [(value) => value >= 0 && value < 1e9, "a whole number of up to nine digits"],
  },
  elementSetNumber: { keyword: "ELEMENT_SET_NO", kind: "whole" },
  revolutionAtEpoch: { keyword: "REV_AT_EPOCH", kind: "whole" },
  bstarPerEarthRadius: { keyword: "BSTAR", kind: "number", unit: "1/ER" },
  btermM2PerKg: { keyword: "BTERM", kind: "number", unit: "m**2/kg", since: "3.0" },
  meanMotionDotRevPerDay2: { keyword: "MEAN_MOTION_DOT", kind: "number", unit: "rev/day**2" },
  meanMotionDdotRevPerDay3: { keyword: "MEAN_MOTION_DDOT", kind: "number", unit: "rev/day**3" },
  agomM2PerKg: { keyword: "AGOM", kind: "number", unit: "m**2/kg", since: "3.0" },
};

export const ommLayout: MessageLayout = {
  kind: "OMM",
  versions: ["2.0", "3.0"],
  blocks: [
    headerLayout,
    { element: "metadata", keywords: keywordsOf(ommMetadataRules), beforeData: true },
    { element: "meanElements", keywords: keywordsOf(ommElementRules) },
    spacecraftLayout,
    { element: "tleParameters", keywords: keywordsOf(ommTleRules) },
    { element: "covarianceMatrix", keywords: covarianceKeywords },
    userDefinedLayout,
  ],
};
