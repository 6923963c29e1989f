import type { Block, Entry, PrintedBlock } from "./fields.ts";
import { broken, nearest, quoted, type Remarks } from "./message.ts";
import { hasUnreadableCharacter, isAscii, tidyComment, tidyText } from "./values.ts";

/**
 * Keyword = value notation: the lines of a message and the blocks that their keywords belong to.
 * Source: CCSDS 502.0-B-3 sections 7.3, 7.4, 7.7, 7.8.
 */

export interface Line {
  /** Counted from 1, blank lines included. */
  readonly number: number;
  /** Without the white space around it. */
  readonly text: string;
}

/** One block of a message: the name of its XML element and the keywords that it may hold. */
export interface BlockLayout {
  readonly element: string;
  readonly keywords: readonly string[];
  /** Header and metadata stand before all data; a later return to them is refused. */
  readonly beforeData?: true;
  /** May be there several times; each begins with its first keyword. */
  readonly repeats?: true;
}

/** Without the byte-order mark that some editors put before a text. */
export const withoutMark = (text: string): string => (text.charCodeAt(0) === 0xfeff ? text.slice(1) : text);

/**
 * The lines of a message that are not blank. Lines end in CR, LF or both.
 * Errors: invalid-message for a control character. A character that is no ASCII is remarked on.
 */
export function messageLines(text: string, kind: string, remarks: Remarks): Line[] {
  const lines: Line[] = [];
  const clean = withoutMark(text);
  let beyondAscii = false;
  const suspect = !isAscii(clean) || hasUnreadableCharacter(clean);
  for (const [index, raw] of clean.split(/\r\n|\n\r|\r|\n/).entries()) {
    const line = raw.trim();
    if (line === "") continue;
    const number = index + 1;
    if (suspect && hasUnreadableCharacter(line)) {
      throw broken(`${kind}, line ${number}`, line, "printable characters only");
    }
    if (suspect && !beyondAscii && !isAscii(line)) {
      beyondAscii = true;
      remarks.add(`${kind}, line ${number}: there are characters beyond ASCII; the standard has none.`);
    }
    lines.push({ number, text: line });
  }
  return lines;
}

/** The text of a comment line, or null when the line is none. */
export function commentOf(line: string): string | null {
  if (!line.startsWith("COMMENT")) return null;
  if (line.length === 7) return "";
  const next = line[7]!;
  return next === " " || next === "\t" ? tidyComment(line.slice(8)) : null;
}

/**
 * One assignment. Errors: invalid-message when there is no "=", no keyword before it, or a blank inside the keyword.
 */
export function assignment(line: Line, kind: string): Entry {
  const where = `${kind}, line ${line.number}`;
  const equals = line.text.indexOf("=");
  if (equals < 0) throw broken(where, line.text, "KEYWORD = value (there is no equals sign)");
  const keyword = line.text.slice(0, equals).trimEnd();
  if (keyword === "") throw broken(where, line.text, "a keyword before the equals sign");
  if (!/^[!-<>-~]+$/.test(keyword)) throw broken(where, keyword, "a keyword without blanks, in capital letters");
  return { keyword, value: tidyText(line.text.slice(equals + 1)), unit: null, where, place: [] };
}

/** Says that a keyword is unknown, and which one was probably meant. */
export function unknownKeyword(entry: Entry, known: Iterable<string>, of: string): Error {
  const meant = nearest(entry.keyword, known);
  const hint = meant === null || meant === entry.keyword ? "" : ` (perhaps ${meant} was meant)`;
  return broken(entry.where, entry.keyword, `a keyword of ${of}${hint}`, entry.place);
}

const userPrefix = "USER_DEFINED_";

/** The index of the block that a keyword belongs to, or -1. */
function blockOf(keyword: string, layouts: readonly BlockLayout[]): number {
  if (keyword.startsWith(userPrefix) && keyword.length > userPrefix.length) {
    return layouts.findIndex((layout) => layout.element === "userDefinedParameters");
  }
  return layouts.findIndex((layout) => layout.keywords.includes(keyword));
}

/**
 * Deals the entries of a message without block marks (OPM, OMM) out to its blocks. COMMENT entries go to the block of the
 * keyword that follows them.
 * Errors: invalid-message for an unknown keyword and for header or metadata after the data have begun. Keywords of the
 * data in another order than the standard's are remarked on, as their meaning is not in doubt.
 */
export function dealBlocks(
  entries: readonly Entry[],
  layouts: readonly BlockLayout[],
  kind: string,
  remarks: Remarks,
): Map<string, Block[]> {
  const blocks = new Map<string, Block[]>();
  let pending: string[] = [];
  let furthest = 0;
  let last: Block | undefined;
  for (const entry of entries) {
    if (entry.keyword === "COMMENT") {
      pending.push(entry.value);
      continue;
    }
    const index = blockOf(entry.keyword, layouts);
    if (index < 0) {
      throw unknownKeyword(
        entry,
        layouts.flatMap((layout) => layout.keywords),
        `an ${kind}`,
      );
    }
    const layout = layouts[index]!;
    if (index < furthest) {
      if (layout.beforeData) {
        throw broken(
          `${entry.where}, ${entry.keyword}`,
          entry.value,
          `this keyword before ${layouts[furthest]!.keywords[0]}`,
        );
      }
      remarks.add(`${entry.where}: ${entry.keyword} stands later than the order of the standard has it.`);
    }
    furthest = Math.max(furthest, index);
    const list = blocks.get(layout.element) ?? [];
    blocks.set(layout.element, list);
    let block = list.at(-1);
    if (block === undefined || (layout.repeats && entry.keyword === layout.keywords[0])) {
      block = { where: entry.where, comments: [], entries: [] };
      list.push(block);
    } else if (pending.length > 0 && layout.keywords.length > 0) {
      remarks.add(`${entry.where}: a comment stands between the keywords of a block; it was moved to their head.`);
    }
    block.comments.push(...pending);
    pending = [];
    block.entries.push(entry);
    last = block;
  }
  if (pending.length > 0 && last !== undefined) {
    last.comments.push(...pending);
    remarks.add("A comment stands behind the last value; it was moved to the head of its block.");
  }
  orderRemarks(blocks, layouts, remarks);
  return blocks;
}

/** Remarks on keywords that stand in another order inside their block than in the tables of the standard. */
function orderRemarks(
  blocks: ReadonlyMap<string, readonly Block[]>,
  layouts: readonly BlockLayout[],
  remarks: Remarks,
): void {
  for (const { element, keywords } of layouts) {
    for (const block of blocks.get(element) ?? []) remarkOnOrder(block, keywords, remarks);
  }
}

export function remarkOnOrder(block: Block, keywords: readonly string[], remarks: Remarks): void {
  let before = -1;
  for (const { keyword, where } of block.entries) {
    const rank = keywords.indexOf(keyword);
    if (rank < 0) continue;
    if (rank < before) remarks.add(`${where}: ${keyword} stands later than the order of the standard has it.`);
    before = Math.max(before, rank);
  }
}

/** The lines of one block, comments first. */
export function printLines({ comments, entries }: PrintedBlock): string[] {
  return [
    ...comments.map((text) => (text === "" ? "COMMENT" : `COMMENT ${text}`)),
    ...entries.map(([keyword, value]) => (value === "" ? `${keyword} =` : `${keyword} = ${value}`)),
  ];
}

/**
 * The version in the first line of a KVN message, with the rest of its lines.
 * Errors: invalid-message when another line comes first, for another kind of message and for a version that was never
 * published.
 */
export function splitVersion(
  lines: readonly Line[],
  kind: string,
  published: readonly string[],
): { version: string; rest: readonly Line[] } {
  const first = lines[0];
  const wanted = `CCSDS_${kind}_VERS`;
  if (first === undefined) throw broken(kind, null, `the line ${wanted} = ${published.at(-1)}; the text is empty`);
  const where = `${kind}, line ${first.number}`;
  if (!first.text.startsWith("CCSDS_") || !first.text.includes("=")) {
    throw broken(where, first.text, `${wanted} = ${published.at(-1)} as the first line`);
  }
  const { keyword, value } = assignment(first, kind);
  if (keyword !== wanted) throw broken(where, keyword, `${wanted}: this is another kind of message`);
  return { version: requireVersion(value, `${where}, ${wanted}`, published), rest: lines.slice(1) };
}

/** Errors: invalid-message for a version that was never published. */
export function requireVersion(value: string, where: string, published: readonly string[]): string {
  if (published.includes(value)) return value;
  throw broken(where, value, `one of the versions ${published.map(quoted).join(", ")}`);
}
