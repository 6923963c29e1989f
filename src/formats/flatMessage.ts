import { type Block, type BlockRules, keywordsOf, type PrintedBlock } from "./fields.ts";
import {
  assignment,
  type BlockLayout,
  commentOf,
  dealBlocks,
  messageLines,
  printLines,
  requireVersion,
  splitVersion,
  unknownKeyword,
} from "./keyValue.ts";
import type { MessageHeader, MessageVersion, Remarks, SpacecraftParameters, UserDefined } from "./message.ts";
import {
  blockElement,
  blockFrom,
  looksLikeXml,
  only,
  printXml,
  requireChildren,
  soleMessage,
  versionOf,
} from "./xml.ts";

/** Messages of one epoch (OPM, OMM): header, metadata and blocks of data, in KVN or in XML. */

export interface MessageLayout {
  /** "OPM" or "OMM". */
  readonly kind: string;
  readonly versions: readonly MessageVersion[];
  /** In the order of the standard, header and metadata first. The first block of data must be there. */
  readonly blocks: readonly BlockLayout[];
}

export interface FlatMessage {
  readonly version: MessageVersion;
  readonly blocks: ReadonlyMap<string, readonly Block[]>;
}

/** Source: CCSDS 502.0-B-3 tables 3-1, 4-1 and 5-2. */
export const headerRules: BlockRules<MessageHeader> = {
  classification: { keyword: "CLASSIFICATION", kind: "text", since: "3.0" },
  creationDate: { keyword: "CREATION_DATE", kind: "epoch", mayBeEmpty: true },
  originator: { keyword: "ORIGINATOR", kind: "text", mayBeEmpty: true },
  messageId: { keyword: "MESSAGE_ID", kind: "text", since: "3.0" },
};

export const headerLayout: BlockLayout = { element: "header", keywords: keywordsOf(headerRules), beforeData: true };

/** Source: CCSDS 502.0-B-3 tables 3-3 and 4-3. */
export const spacecraftRules: BlockRules<SpacecraftParameters> = {
  massKg: { keyword: "MASS", kind: "number", unit: "kg" },
  solarRadiationAreaM2: { keyword: "SOLAR_RAD_AREA", kind: "number", unit: "m**2" },
  solarRadiationCoefficient: { keyword: "SOLAR_RAD_COEFF", kind: "number" },
  dragAreaM2: { keyword: "DRAG_AREA", kind: "number", unit: "m**2" },
  dragCoefficient: { keyword: "DRAG_COEFF", kind: "number" },
};

export const spacecraftLayout: BlockLayout = {
  element: "spacecraftParameters",
  keywords: keywordsOf(spacecraftRules),
};

export const userDefinedLayout: BlockLayout = { element: "userDefinedParameters", keywords: [] };

/**
 * The blocks of an OPM or OMM in KVN or XML.
 * Errors: invalid-message for what cannot be told apart into blocks.
 */
export function readFlatMessage(text: string, layout: MessageLayout, remarks: Remarks): FlatMessage {
  return looksLikeXml(text) ? fromXml(text, layout, remarks) : fromLines(text, layout, remarks);
}

function fromLines(text: string, layout: MessageLayout, remarks: Remarks): FlatMessage {
  const { kind } = layout;
  const lines = messageLines(text, kind, remarks);
  const { version, rest } = splitVersion(lines, kind, layout.versions);
  const entries = rest.map((line) => {
    const comment = commentOf(line.text);
    if (comment === null) return assignment(line, kind);
    return { keyword: "COMMENT", value: comment, unit: null, where: `${kind}, line ${line.number}`, place: [] };
  });
  return { version: version as MessageVersion, blocks: dealBlocks(entries, layout.blocks, kind, remarks) };
}

function fromXml(text: string, layout: MessageLayout, remarks: Remarks): FlatMessage {
  const { kind } = layout;
  const { message, others } = soleMessage(text, kind);
  if (others > 0) remarks.add(`The combined message holds ${others} more; only its ${kind} was read.`);
  const version = requireVersion(versionOf(message, kind), `${message.where}, <${message.name}>`, layout.versions);
  requireChildren(message, ["header", "body"]);
  const body = only(message, "body", true)!;
  requireChildren(body, ["segment"]);
  const segment = only(body, "segment", true)!;
  requireChildren(segment, ["metadata", "data"]);
  const data = only(segment, "data", true)!;
  const [header, metadata, ...dataLayouts] = layout.blocks;
  requireChildren(data, ["COMMENT", ...dataLayouts.map(({ element }) => element)]);
  const blocks = new Map<string, Block[]>();
  blocks.set("header", [blockFrom(only(message, "header", true)!)]);
  blocks.set("metadata", [blockFrom(only(segment, "metadata", true)!)]);
  const stray = blockFrom(
    data,
    dataLayouts.map(({ element }) => element),
  ).comments;
  for (const one of dataLayouts) {
    const found = one.repeats
      ? data.children.filter(({ name }) => name === one.element)
      : [only(data, one.element, one === dataLayouts[0])].filter((child) => child !== null);
    const list = found.map((child) => blockFrom(child));
    // A block without a value is none, but its comments are kept with those of the data.
    for (const block of list) if (block.entries.length === 0) stray.push(...block.comments);
    const filled = list.filter((block) => block.entries.length > 0);
    if (filled.length > 0) blocks.set(one.element, filled);
  }
  blocks.get(dataLayouts[0]!.element)?.[0]?.comments.unshift(...stray);
  for (const one of [header!, metadata!, ...dataLayouts]) refuseStrangers(blocks.get(one.element) ?? [], one, kind);
  return { version: version as MessageVersion, blocks };
}

function refuseStrangers(blocks: readonly Block[], layout: BlockLayout, kind: string): void {
  for (const entry of blocks.flatMap((block) => block.entries)) {
    if (layout.keywords.includes(entry.keyword)) continue;
    if (layout === userDefinedLayout && entry.keyword.startsWith("USER_DEFINED_")) continue;
    throw unknownKeyword(entry, layout.keywords, `<${layout.element}> of an ${kind}`);
  }
}

/** User-defined parameters, in their order. */
export function readUserDefined(block: Block | undefined): UserDefined | null {
  if (block === undefined) return null;
  const parameters = block.entries.map(({ keyword, value }) => ({ name: keyword.slice(13), value }));
  return { comments: block.comments, parameters };
}

export const printUserDefined = (record: UserDefined): PrintedBlock => ({
  element: "userDefinedParameters",
  comments: record.comments,
  entries: record.parameters.map(({ name, value }) => [`USER_DEFINED_${name}`, value] as const),
});

/** The text of an OPM or OMM; blocks come in the order of the standard. */
export function printFlatMessage(
  kind: string,
  version: MessageVersion,
  blocks: readonly PrintedBlock[],
  form: "kvn" | "xml",
): string {
  const filled = blocks.filter(({ element, entries }) => element === "header" || entries.length > 0);
  if (form === "kvn") {
    const parts = filled.map((block) => printLines(block).join("\n"));
    return `CCSDS_${kind}_VERS = ${version}\n${parts.join("\n\n")}\n`;
  }
  const [header, metadata, ...data] = filled.map(blockElement);
  const segment = { name: "segment", content: [metadata!, { name: "data", content: data }] };
  return printXml(kind, version, [header!, { name: "body", content: [segment] }]);
}
