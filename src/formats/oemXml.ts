import { readEpochCovariance } from "./covariance.ts";
import { type BlockRules, type Context, keywordsOf, readFields } from "./fields.ts";
import { headerLayout, headerRules } from "./flatMessage.ts";
import { requireVersion, unknownKeyword } from "./keyValue.ts";
import { broken, type MessageEpoch, type MessageVersion, type Remarks, versions } from "./message.ts";
import {
  checkMetadata,
  type Oem,
  type OemSegment,
  type OemState,
  oemMetadataRules,
  RisingEpochs,
} from "./oemRecord.ts";
import { epochExpected } from "./values.ts";
import { blockFrom, type Element, only, requireChildren, soleMessage, versionOf } from "./xml.ts";

/** An OEM in XML, into the same record as its lines. Source: CCSDS 505.0-B (oem), CCSDS 502.0-B-3 section 8. */

/** The elements of one <stateVector>. */
interface StateVector {
  readonly comments: readonly string[];
  readonly epoch: MessageEpoch;
  readonly x: number;
  readonly y: number;
  readonly z: number;
  readonly xDot: number;
  readonly yDot: number;
  readonly zDot: number;
  readonly xDotDot: number | null;
  readonly yDotDot: number | null;
  readonly zDotDot: number | null;
}

const stateRules: BlockRules<StateVector> = {
  epoch: { keyword: "EPOCH", kind: "epoch", required: true },
  x: { keyword: "X", kind: "number", unit: "km", required: true },
  y: { keyword: "Y", kind: "number", unit: "km", required: true },
  z: { keyword: "Z", kind: "number", unit: "km", required: true },
  xDot: { keyword: "X_DOT", kind: "number", unit: "km/s", required: true },
  yDot: { keyword: "Y_DOT", kind: "number", unit: "km/s", required: true },
  zDot: { keyword: "Z_DOT", kind: "number", unit: "km/s", required: true },
  xDotDot: { keyword: "X_DDOT", kind: "number", unit: "km/s**2", since: "2.0" },
  yDotDot: { keyword: "Y_DDOT", kind: "number", unit: "km/s**2", since: "2.0" },
  zDotDot: { keyword: "Z_DDOT", kind: "number", unit: "km/s**2", since: "2.0" },
};

const stateKeywords = keywordsOf(stateRules);
const metadataKeywords = keywordsOf(oemMetadataRules);

/** Errors: invalid-message, naming line and element. */
export function oemFromXml(text: string, remarks: Remarks): Oem {
  const { message, others } = soleMessage(text, "OEM");
  if (others > 0) remarks.add(`The combined message holds ${others} more; only its OEM was read.`);
  const where = `${message.where}, <oem>`;
  const version = requireVersion(versionOf(message, "OEM"), where, versions) as MessageVersion;
  requireChildren(message, ["header", "body"]);
  const header = known(only(message, "header", true)!, headerLayout.keywords);
  const body = only(message, "body", true)!;
  requireChildren(body, ["segment"]);
  if (body.children.length === 0) throw broken(`${body.where}, <body>`, null, "at least one <segment>");
  return {
    version,
    header: readFields(headerRules, header, { version, timeSystem: "UTC", remarks }),
    segments: body.children.map((segment) => readSegment(segment, version, remarks)),
  };
}

function known(element: Element, keywords: readonly string[]) {
  const block = blockFrom(element);
  for (const entry of block.entries) {
    if (!keywords.includes(entry.keyword)) throw unknownKeyword(entry, keywords, `<${element.name}> of an OEM`);
  }
  return block;
}

function readSegment(segment: Element, version: MessageVersion, remarks: Remarks): OemSegment {
  requireChildren(segment, ["metadata", "data"]);
  const block = known(only(segment, "metadata", true)!, metadataKeywords);
  const timeSystem = block.entries.find(({ keyword }) => keyword === "TIME_SYSTEM")?.value ?? "";
  const context: Context = { version, timeSystem, remarks };
  const metadata = readFields(oemMetadataRules, block, context);
  checkMetadata(metadata, version, block, remarks);
  const data = only(segment, "data", true)!;
  requireChildren(data, ["COMMENT", "stateVector", "covarianceMatrix"]);
  const { comments } = blockFrom(data, ["stateVector", "covarianceMatrix"]);
  const states = readStates(data, comments, context);
  const rising = new RisingEpochs();
  const covariances = data.children
    .filter(({ name }) => name === "covarianceMatrix")
    .map((element) => {
      const covariance = readEpochCovariance(blockFrom(element), metadata.refFrame, context);
      rising.take(covariance.epoch.text, `${element.where}, EPOCH`, epochExpected);
      return covariance;
    });
  return { metadata, comments, states, covariances };
}

function readStates(data: Element, comments: string[], context: Context): OemState[] {
  const states: OemState[] = [];
  const rising = new RisingEpochs();
  for (const element of data.children) {
    if (element.name !== "stateVector") continue;
    const state = readFields(stateRules, known(element, stateKeywords), context);
    comments.push(...state.comments);
    const { x, y, z, xDot, yDot, zDot, xDotDot, yDotDot, zDotDot } = state;
    const accelerations = [xDotDot, yDotDot, zDotDot].filter((one) => one !== null);
    const where = `${element.where}, <stateVector>`;
    if (accelerations.length !== 0 && accelerations.length !== 3) {
      throw broken(where, null, "all three accelerations or none");
    }
    const acceleration = accelerations.length === 0 ? null : ([xDotDot!, yDotDot!, zDotDot!] as const);
    const before = states.at(-1);
    if (before !== undefined && (before.accelerationKmPerS2 === null) !== (acceleration === null)) {
      throw broken(where, null, "accelerations in all states of a segment or in none");
    }
    rising.take(state.epoch.text, where, epochExpected);
    states.push({
      epoch: state.epoch,
      positionKm: [x, y, z],
      velocityKmPerS: [xDot, yDot, zDot],
      accelerationKmPerS2: acceleration,
    });
  }
  if (states.length === 0) throw broken(`${data.where}, <data>`, null, "at least one <stateVector>");
  return states;
}
