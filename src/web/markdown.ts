import { type Html, html, joined } from "./html.ts";

/**
 * The little Markdown that the interface document's descriptions use: paragraphs, bold, inline code, tables. Anything
 * else is shown as it was typed; nothing of it becomes HTML by itself.
 */

/** One paragraph's worth of text. `code` writes an inline code span, where it is to be more than that (a link). */
export function inlineText(text: string, code: (span: string) => Html = plainCode): Html {
  // A text between backticks is code whatever is in it; between two asterisks it is bold.
  const pieces = text.split(/(`[^`]+`|\*\*[^*]+\*\*)/);
  return joined(
    pieces.map((piece, i) => {
      if (i % 2 === 0) return piece;
      return piece.startsWith("`") ? code(piece.slice(1, -1)) : html`<strong>${piece.slice(2, -2)}</strong>`;
    }),
    "",
  );
}

export const plainCode = (span: string): Html => html`<code>${span}</code>`;

export interface MarkdownTable {
  readonly head: readonly string[];
  readonly rows: readonly (readonly string[])[];
}

/** A part of a description: what a bold word and a full stop at the start of a paragraph open. */
export interface Part {
  /** The bold word; empty for what stands before the first one. */
  readonly title: string;
  readonly paragraphs: readonly string[];
  readonly tables: readonly MarkdownTable[];
}

/** Takes a description apart. Blocks stand apart by an empty line; "**Title.** text" opens a part. */
export function partsOf(description: string): readonly Part[] {
  const parts: { title: string; paragraphs: string[]; tables: MarkdownTable[] }[] = [];
  for (const block of description.split(/\n\s*\n/)) {
    const opening = /^\*\*([^*]+)\.\*\*\s*/.exec(block);
    if (opening !== null || parts.length === 0) parts.push({ title: opening?.[1] ?? "", paragraphs: [], tables: [] });
    const part = parts.at(-1)!;
    const text = block.slice(opening?.[0].length ?? 0).trim();
    const table = tableIn(text);
    if (table !== undefined) part.tables.push(table);
    else if (text !== "") part.paragraphs.push(text);
  }
  return parts;
}

/** A block that is a table: a head, a line of dashes, rows. Cells may hold a bar written as \|. */
function tableIn(block: string): MarkdownTable | undefined {
  const [head, dashes, ...rows] = block.split("\n");
  if (head === undefined || dashes === undefined || !/^\|(\s*:?-+:?\s*\|)+\s*$/.test(dashes)) return undefined;
  return { head: cellsOf(head), rows: rows.map(cellsOf) };
}

const cellsOf = (line: string): string[] =>
  line
    .trim()
    .replace(/^\||(?<!\\)\|$/g, "")
    .split(/(?<!\\)\|/)
    .map((cell) => cell.trim().replaceAll("\\|", "|"));
