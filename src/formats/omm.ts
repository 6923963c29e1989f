import { printCovariance, readCovariance } from "./covariance.ts";
import { type Block, type Context, type PrintedBlock, printFields, readFields } from "./fields.ts";
import {
  type FlatMessage,
  headerRules,
  printFlatMessage,
  printUserDefined,
  readFlatMessage,
  readUserDefined,
  spacecraftRules,
} from "./flatMessage.ts";
import { broken, type ReadMessage, Remarks } from "./message.ts";
import { flatFromJson, looksLikeJson, parseOmmJson, printJson } from "./ommJson.ts";
import {
  type Omm,
  type OmmElements,
  type OmmTleParameters,
  ommElementRules,
  ommLayout,
  ommMetadataRules,
  ommTleRules,
} from "./ommRecord.ts";

/** Orbit mean-elements messages: read, checked against what their theory needs, and printed. */

const noBlock = { where: "OMM", comments: [], entries: [] };

/** The record of an OMM from its blocks, in whichever form they came. */
function fromBlocks({ version, blocks }: FlatMessage, remarks: Remarks, headerless: boolean): ReadMessage<Omm> {
  const metadataBlock = blocks.get("metadata")?.[0] ?? noBlock;
  const timeSystem = metadataBlock.entries.find(({ keyword }) => keyword === "TIME_SYSTEM")?.value ?? "";
  const context: Context = { version, timeSystem, remarks, headerless };
  const header = readFields(headerRules, blocks.get("header")?.[0] ?? noBlock, context);
  const metadata = readFields(ommMetadataRules, metadataBlock, context);
  const elementBlock = blocks.get("meanElements")?.[0] ?? noBlock;
  const elements = readFields(ommElementRules, elementBlock, context);
  const spacecraftBlock = blocks.get("spacecraftParameters")?.[0];
  const tleBlock = blocks.get("tleParameters")?.[0];
  const covarianceBlock = blocks.get("covarianceMatrix")?.[0];
  const tle = tleBlock ? readFields(ommTleRules, tleBlock, context) : null;
  requireOneSize(elements, elementBlock);
  if (tle) requireNoContradiction(tle, tleBlock!);
  requireForTheory(metadata.meanElementTheory, elements, tle, context, metadataBlock);
  const message: Omm = {
    version,
    header,
    metadata,
    elements,
    spacecraft: spacecraftBlock ? readFields(spacecraftRules, spacecraftBlock, context) : null,
    tle,
    covariance: covarianceBlock ? readCovariance(covarianceBlock, metadata.refFrame, context) : null,
    userDefined: readUserDefined(blocks.get("userDefinedParameters")?.[0]),
  };
  return { message, remarks: remarks.list };
}

function requireOneSize(elements: OmmElements, block: Block): void {
  if ((elements.semiMajorAxisKm === null) !== (elements.meanMotionRevPerDay === null)) return;
  const found = elements.semiMajorAxisKm === null ? "neither" : "both";
  throw broken(block.where, null, `exactly one of SEMI_MAJOR_AXIS and MEAN_MOTION; there are ${found}`);
}

function requireNoContradiction(tle: OmmTleParameters, block: Block): void {
  if (tle.bstarPerEarthRadius !== null && tle.btermM2PerKg !== null) {
    throw broken(block.where, null, "one of BSTAR and BTERM, not both");
  }
  if (tle.meanMotionDdotRevPerDay3 !== null && tle.agomM2PerKg !== null) {
    throw broken(block.where, null, "one of MEAN_MOTION_DDOT and AGOM, not both");
  }
  if (tle.classificationType !== null && tle.classificationType.length !== 1) {
    throw broken(`${block.where}, CLASSIFICATION_TYPE`, tle.classificationType, "one letter");
  }
}

/** What each mean-element theory of the two-line element family needs. Source: CCSDS 502.0-B-3 table 4-3, section 4.2.4.6. */
function requireForTheory(
  theory: string,
  elements: OmmElements,
  tle: OmmTleParameters | null,
  { version }: Context,
  metadata: Block,
): void {
  const entry = metadata.entries.find(({ keyword }) => keyword === "MEAN_ELEMENT_THEORY");
  const where = `${entry?.where ?? metadata.where}, MEAN_ELEMENT_THEORY`;
  const name = theory.toUpperCase();
  const need = (value: unknown, keyword: string): void => {
    if (value === null || value === undefined) {
      throw broken(where, theory, `the keyword ${keyword} in the message, which this theory needs`);
    }
  };
  if (!["SGP", "SGP4", "SGP/SGP4", "SGP4-XP", "PPT3"].includes(name)) return;
  if (name === "SGP4-XP" && version === "2.0") {
    throw broken(where, theory, "a theory of version 2.0: this one came with 3.0");
  }
  need(elements.meanMotionRevPerDay, "MEAN_MOTION");
  if (name !== "PPT3") need(tle?.catalogueNumber, "NORAD_CAT_ID");
  if (name === "SGP4" || name === "SGP/SGP4") need(tle?.bstarPerEarthRadius, "BSTAR");
  if (name === "SGP" || name === "PPT3") {
    need(tle?.meanMotionDotRevPerDay2, "MEAN_MOTION_DOT");
    need(tle?.meanMotionDdotRevPerDay3, "MEAN_MOTION_DDOT");
  }
  if (name === "SGP4-XP") {
    need(tle?.btermM2PerKg, "BTERM");
    need(tle?.agomM2PerKg, "AGOM");
  }
}

/**
 * Reads an OMM in KVN, XML (also as the only OMM of a combined message) or JSON.
 * Errors: invalid-message, naming line and keyword, what was found and what would be right.
 */
export function parseOmm(text: string): ReadMessage<Omm> {
  const remarks = new Remarks();
  if (!looksLikeJson(text)) return fromBlocks(readFlatMessage(text, ommLayout, remarks), remarks, false);
  return fromBlocks(flatFromJson(parseOmmJson(text), ommLayout, remarks), remarks, true);
}

/**
 * Reads an OMM from a parsed JSON value: an object of keywords, or an array of one; numbers may be numeric strings. What
 * catalogues leave out is filled in with a remark: EARTH, TEME, UTC, SGP4, version 3.0.
 * Errors: invalid-message, with a place in the value.
 */
export function ommFromJson(value: unknown): ReadMessage<Omm> {
  const remarks = new Remarks();
  return fromBlocks(flatFromJson(value, ommLayout, remarks), remarks, true);
}

/** The blocks of an OMM, in the order of the standard. */
function printedBlocks(omm: Omm): PrintedBlock[] {
  const blocks: (PrintedBlock | null)[] = [
    printFields("header", headerRules, omm.header),
    printFields("metadata", ommMetadataRules, omm.metadata),
    printFields("meanElements", ommElementRules, omm.elements),
    omm.spacecraft && printFields("spacecraftParameters", spacecraftRules, omm.spacecraft),
    omm.tle && printFields("tleParameters", ommTleRules, omm.tle),
    omm.covariance && printCovariance(omm.covariance),
    omm.userDefined && printUserDefined(omm.userDefined),
  ];
  return blocks.filter((block) => block !== null);
}

/**
 * The text of an OMM; parseOmm reads it back to an equal record. JSON has one list of comments, so that those of all blocks
 * stand at its head; a block without any value is left out.
 */
export function writeOmm(omm: Omm, form: "kvn" | "xml" | "json" = "kvn"): string {
  const blocks = printedBlocks(omm);
  return form === "json" ? printJson(omm.version, blocks) : printFlatMessage("OMM", omm.version, blocks, form);
}
