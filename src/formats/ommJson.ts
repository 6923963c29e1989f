import type { Place } from "../problem/index.ts";
import type { Block, Entry, PrintedBlock } from "./fields.ts";
import type { FlatMessage, MessageLayout } from "./flatMessage.ts";
import { withoutMark } from "./keyValue.ts";
import { broken, type MessageVersion, type Remarks } from "./message.ts";
import { hasUnreadableCharacter, numberText, tidyComment, tidyText } from "./values.ts";

/**
 * The JSON form of an OMM: one flat object of keywords, or an array of one. It has no standard; the keywords are those of
 * CCSDS 502.0-B, and what catalogues leave out or add is common practice, no source.
 */

const usual: readonly (readonly [keyword: string, value: string])[] = [
  ["CENTER_NAME", "EARTH"],
  ["REF_FRAME", "TEME"],
  ["TIME_SYSTEM", "UTC"],
  ["MEAN_ELEMENT_THEORY", "SGP4"],
  ["OBJECT_NAME", "UNKNOWN"],
  ["OBJECT_ID", "UNKNOWN"],
];

/** Whether a text is meant as JSON: it begins with a brace or a bracket. */
export function looksLikeJson(text: string): boolean {
  const first = withoutMark(text).trimStart()[0];
  return first === "{" || first === "[";
}

/** Errors: invalid-message for a text that is no JSON. */
export function parseOmmJson(text: string): unknown {
  try {
    return JSON.parse(withoutMark(text));
  } catch (error) {
    throw broken("OMM", null, `readable JSON; ${(error as Error).message.slice(0, 120)}`);
  }
}

/** The blocks of an OMM from a parsed JSON value. Errors: invalid-message for another shape or a value of a wrong type. */
export function flatFromJson(value: unknown, layout: MessageLayout, remarks: Remarks): FlatMessage {
  let source = value;
  let place: Place = [];
  if (Array.isArray(source)) {
    if (source.length !== 1) throw broken("OMM", null, `one object; the array holds ${source.length}`);
    source = source[0];
    place = [0];
  }
  if (typeof source !== "object" || source === null || Array.isArray(source)) {
    throw broken("OMM", null, "an object of keywords", place);
  }
  const blocks = new Map<string, Block[]>();
  const given = new Set<string>();
  const ignored: string[] = [];
  let version: MessageVersion = "3.0";
  const put = (element: string, entry: Entry | null, comments: readonly string[]): void => {
    let block = blocks.get(element)?.[0];
    if (block === undefined) {
      block = { where: "OMM", comments: [], entries: [] };
      blocks.set(element, [block]);
    }
    block.comments.push(...comments);
    if (entry) block.entries.push(entry);
  };
  put("header", null, []);
  for (const [keyword, found] of Object.entries(source)) {
    const here = [...place, keyword];
    if (found === null || (found === "" && !keyword.startsWith("USER_DEFINED_"))) continue;
    if (keyword === "CCSDS_OMM_VERS") {
      version = versionFrom(found, layout, here);
    } else if (keyword === "COMMENT") {
      put("header", null, commentsFrom(found, here));
    } else {
      const element = elementOf(keyword, layout);
      if (element === null) {
        ignored.push(keyword.slice(0, 40));
        continue;
      }
      given.add(keyword);
      put(element, { keyword, value: valueFrom(keyword, found, here), unit: null, where: "OMM", place: here }, []);
    }
  }
  if (ignored.length > 0) {
    const more = ignored.length > 10 ? ` and ${ignored.length - 10} more` : "";
    remarks.add(`These are no keywords of an OMM and were not read: ${ignored.slice(0, 10).join(", ")}${more}.`);
  }
  const filled = usual.filter(([keyword]) => !given.has(keyword));
  for (const [keyword, text] of filled) {
    put("metadata", { keyword, value: text, unit: null, where: "OMM", place }, []);
  }
  if (filled.length > 0) {
    remarks.add(`Not given and taken as usual: ${filled.map(([keyword, text]) => `${keyword} ${text}`).join(", ")}.`);
  }
  return { version, blocks };
}

function elementOf(keyword: string, layout: MessageLayout): string | null {
  if (keyword.startsWith("USER_DEFINED_"))
    return /^[!-<>-~]+$/.test(keyword.slice(13)) ? "userDefinedParameters" : null;
  return layout.blocks.find(({ keywords }) => keywords.includes(keyword))?.element ?? null;
}

function versionFrom(found: unknown, layout: MessageLayout, place: Place): MessageVersion {
  const text = typeof found === "number" && Number.isInteger(found) ? `${found}.0` : found;
  const version = layout.versions.find((one) => one === text);
  if (version !== undefined) return version;
  throw broken("OMM, CCSDS_OMM_VERS", String(found), `one of the versions ${layout.versions.join(", ")}`, place);
}

function commentsFrom(found: unknown, place: Place): string[] {
  const list: unknown[] = Array.isArray(found) ? found : [found];
  return list.map((one) => {
    if (typeof one === "string" && !hasUnreadableCharacter(one)) return tidyComment(one);
    throw broken("OMM, COMMENT", null, "a text or an array of texts", place);
  });
}

function valueFrom(keyword: string, found: unknown, place: Place): string {
  if (typeof found === "number" && Number.isFinite(found)) return numberText(found);
  if (typeof found === "string" && !hasUnreadableCharacter(found)) return tidyText(found);
  const shown = typeof found === "object" ? null : String(found);
  throw broken(`OMM, ${keyword}`, shown, "a number or a text of printable characters", place);
}

const texts = new Set([
  "CLASSIFICATION",
  "CREATION_DATE",
  "ORIGINATOR",
  "MESSAGE_ID",
  "REF_FRAME_EPOCH",
  "EPOCH",
  "CLASSIFICATION_TYPE",
  "COV_REF_FRAME",
  ...usual.map(([keyword]) => keyword),
]);

/** The JSON form of printed blocks. Numbers are JSON numbers; minus zero, which JSON would lose, is a text. */
export function printJson(version: MessageVersion, blocks: readonly PrintedBlock[]): string {
  const comments = blocks.flatMap((block) => block.comments);
  const members: [string, unknown][] = [["CCSDS_OMM_VERS", version]];
  if (comments.length > 0) members.push(["COMMENT", comments]);
  for (const [keyword, value] of blocks.flatMap(({ entries }) => entries)) {
    const isUserDefined = keyword.startsWith("USER_DEFINED_");
    if (value === "" && !isUserDefined) continue;
    members.push([keyword, isUserDefined || texts.has(keyword) || value === "-0" ? value : Number(value)]);
  }
  return `${JSON.stringify(Object.fromEntries(members), null, 2)}\n`;
}
