import type { EpochCovariance } from "./covariance.ts";
import type { Block, BlockRules } from "./fields.ts";
import {
  broken,
  type MessageEpoch,
  type MessageHeader,
  type MessageVersion,
  type Remarks,
  type Triple,
} from "./message.ts";
import { compareEpochs, type EpochKey, readEpoch } from "./values.ts";

/**
 * Orbit ephemeris message: tables of states, one or more segments.
 * Source: CCSDS 502.0-B-3 section 5, tables 5-1 to 5-4; versions 1.0 and 2.0 as in 502.0-B-1 and B-2.
 */
export interface Oem {
  readonly version: MessageVersion;
  readonly header: MessageHeader;
  /** In the order of the message. Nothing may be interpolated from one into the next (section 5.2.4.6). */
  readonly segments: readonly OemSegment[];
}

export interface OemSegment {
  readonly metadata: OemMetadata;
  /** Those at the head of the ephemeris data. */
  readonly comments: readonly string[];
  /** In rising order of epochs; either all have accelerations or none. */
  readonly states: readonly OemState[];
  /** In rising order of epochs. */
  readonly covariances: readonly EpochCovariance[];
}

export interface OemMetadata {
  readonly comments: readonly string[];
  readonly objectName: string;
  readonly objectId: string;
  readonly centerName: string;
  readonly refFrame: string;
  readonly refFrameEpoch: MessageEpoch | null;
  /** The same in all segments. */
  readonly timeSystem: string;
  readonly startTime: MessageEpoch;
  readonly useableStartTime: MessageEpoch | null;
  readonly useableStopTime: MessageEpoch | null;
  readonly stopTime: MessageEpoch;
  /** As written: "HERMITE", "LAGRANGE", "LINEAR", in any case of letters. */
  readonly interpolation: string | null;
  readonly interpolationDegree: number | null;
}

/** In the frame and about the centre of the metadata. */
export interface OemState {
  readonly epoch: MessageEpoch;
  readonly positionKm: Triple;
  readonly velocityKmPerS: Triple;
  readonly accelerationKmPerS2: Triple | null;
}

export const oemMetadataRules: BlockRules<OemMetadata> = {
  objectName: { keyword: "OBJECT_NAME", kind: "text", required: true },
  objectId: { keyword: "OBJECT_ID", kind: "text", required: true },
  centerName: { keyword: "CENTER_NAME", kind: "text", required: true },
  refFrame: { keyword: "REF_FRAME", kind: "text", required: true },
  refFrameEpoch: { keyword: "REF_FRAME_EPOCH", kind: "epoch", since: "2.0" },
  timeSystem: { keyword: "TIME_SYSTEM", kind: "text", required: true },
  startTime: { keyword: "START_TIME", kind: "epoch", required: true },
  useableStartTime: { keyword: "USEABLE_START_TIME", kind: "epoch" },
  useableStopTime: { keyword: "USEABLE_STOP_TIME", kind: "epoch" },
  stopTime: { keyword: "STOP_TIME", kind: "epoch", required: true },
  interpolation: { keyword: "INTERPOLATION", kind: "text" },
  interpolationDegree: {
    keyword: "INTERPOLATION_DEGREE",
    kind: "whole",
    test: [(value) => value >= 1, "a whole number of at least 1"],
  },
};

const key = (epoch: MessageEpoch): EpochKey => readEpoch(epoch.text)!;

/**
 * Holds the metadata of a segment against itself. Errors: invalid-message for times out of order, for an interpolation
 * without its degree, and before version 3.0 (where table 5-3 names the two together) for one end of the useable span
 * without the other.
 */
export function checkMetadata(metadata: OemMetadata, version: MessageVersion, block: Block, remarks: Remarks): void {
  const locate = (keyword: string): string =>
    `${block.entries.find((entry) => entry.keyword === keyword)?.where ?? block.where}, ${keyword}`;
  const named: readonly (readonly [string, MessageEpoch | null])[] = [
    ["START_TIME", metadata.startTime],
    ["USEABLE_START_TIME", metadata.useableStartTime],
    ["USEABLE_STOP_TIME", metadata.useableStopTime],
    ["STOP_TIME", metadata.stopTime],
  ];
  const given = named.filter((one): one is readonly [string, MessageEpoch] => one[1] !== null);
  for (const [i, [name, epoch]] of given.entries()) {
    const before = given[i - 1];
    if (before !== undefined && compareEpochs(key(before[1]), key(epoch)) > 0) {
      throw broken(locate(name), epoch.text, `a time not before ${before[0]} (${before[1].text})`);
    }
  }
  if ((metadata.useableStartTime === null) !== (metadata.useableStopTime === null)) {
    const given = metadata.useableStartTime === null ? "USEABLE_STOP_TIME" : "USEABLE_START_TIME";
    if (version < "3.0") {
      throw broken(locate(given), null, "both USEABLE_START_TIME and USEABLE_STOP_TIME, or neither; there is one");
    }
    remarks.add(`${locate(given)}: only one end of the useable span is given; the other is that of the whole span.`);
  }
  if (metadata.interpolation !== null && metadata.interpolationDegree === null) {
    throw broken(locate("INTERPOLATION"), null, "INTERPOLATION_DEGREE beside it");
  }
}

/** What is checked when all segments are read. Errors: invalid-message. */
export function checkSegments(oem: Oem, remarks: Remarks): void {
  for (const [i, { metadata, states }] of oem.segments.entries()) {
    const where = `OEM, segment ${i + 1}`;
    remarkOnSpan(metadata, states, where, remarks);
    const before = oem.segments[i - 1]?.metadata;
    if (before === undefined) continue;
    if (metadata.timeSystem !== before.timeSystem) {
      throw broken(
        `${where}, TIME_SYSTEM`,
        metadata.timeSystem,
        `${before.timeSystem} as before: it is fixed in a message`,
      );
    }
    if (metadata.objectId !== before.objectId) {
      throw broken(
        `${where}, OBJECT_ID`,
        metadata.objectId,
        `${before.objectId} as before: a message is about one object`,
      );
    }
    const start = metadata.useableStartTime ?? metadata.startTime;
    const stop = before.useableStopTime ?? before.stopTime;
    if (compareEpochs(key(start), key(stop)) >= 0) continue;
    if (metadata.useableStartTime !== null || before.useableStopTime !== null) {
      throw broken(
        `${where}, USEABLE_START_TIME`,
        start.text,
        `a time not before the useable stop of the segment before (${stop.text})`,
      );
    }
    remarks.add(`${where} begins before the one before it ends, and neither names a useable span.`);
  }
}

function remarkOnSpan(metadata: OemMetadata, states: readonly OemState[], where: string, remarks: Remarks): void {
  const first = states[0]!.epoch;
  const last = states.at(-1)!.epoch;
  if (compareEpochs(key(first), key(metadata.startTime)) < 0) {
    remarks.add(`${where}: the first state (${first.text}) lies before START_TIME (${metadata.startTime.text}).`);
  }
  if (compareEpochs(key(last), key(metadata.stopTime)) > 0) {
    remarks.add(`${where}: the last state (${last.text}) lies after STOP_TIME (${metadata.stopTime.text}).`);
  }
}

/** Takes one thing after another whose epochs must rise, and refuses one that does not. */
export class RisingEpochs {
  private before: EpochKey | null = null;
  private text = "";

  /** Errors: invalid-message when `epoch` is none or does not lie after the one before. */
  take(epoch: string, where: string, expected: string): void {
    const read = readEpoch(epoch);
    if (read === null) throw broken(where, epoch, expected);
    if (this.before !== null && compareEpochs(this.before, read) >= 0) {
      throw broken(where, epoch, `an epoch after the one before it (${this.text})`);
    }
    this.before = read;
    this.text = epoch;
  }
}
