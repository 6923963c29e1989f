import { parseXml, XmlCdata, XmlElement, XmlError, XmlText } from "@rgrove/parse-xml";
import type { Block, Entry, PrintedBlock } from "./fields.ts";
import { withoutMark } from "./keyValue.ts";
import { broken } from "./message.ts";
import { tidyComment, tidyText } from "./values.ts";

/**
 * Orbit messages in XML: the tree of elements, found and printed. The reading of XML itself is left to a library that
 * takes no document type, resolves no entity but the five of XML, and opens nothing.
 * Source: CCSDS 505.0-B (XML specification for navigation data messages), CCSDS 502.0-B-3 section 8.
 */

/** Messages nest seven deep; what nests deeper than this is none. */
const deepest = 32;

/** How to name a place of the text. */
interface Locating {
  readonly kind: string;
  readonly starts: readonly number[];
  readonly linesBefore: number;
}

export class Element {
  /** Without a namespace prefix. */
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly children: readonly Element[];
  /** The text directly inside, tidied as a comment or as a value. */
  readonly text: string;
  private readonly offset: number;
  private readonly locating: Locating;

  constructor(source: XmlElement, locating: Locating) {
    const children: Element[] = [];
    let text = "";
    for (const child of source.children) {
      if (child instanceof XmlElement) children.push(new Element(child, locating));
      else if (child instanceof XmlText || child instanceof XmlCdata) text += child.text;
    }
    this.name = source.name.slice(source.name.indexOf(":") + 1);
    this.attributes = source.attributes;
    this.children = children;
    this.text = this.name === "COMMENT" ? tidyComment(text) : tidyText(text);
    this.offset = source.start;
    this.locating = locating;
    if (children.length > 0 && this.text !== "") {
      throw broken(`${this.where}, <${this.name}>`, this.text, "elements only, and no text between");
    }
  }

  /** "OEM, line 12". */
  get where(): string {
    const { kind, starts, linesBefore } = this.locating;
    return `${kind}, line ${lineOf(this.offset, starts) + linesBefore}`;
  }
}

/** Whether a text is meant as XML: its first character that is not white space opens an element. */
export const looksLikeXml = (text: string): boolean => withoutMark(text).trimStart().startsWith("<");

/**
 * The root element of an XML text.
 * Errors: invalid-message when it is not well formed, brings a document type, or nests deeper than a message does.
 */
export function readXml(text: string, kind: string): Element {
  const whole = withoutMark(text).replace(/\r\n?/g, "\n").trimEnd();
  const source = whole.trimStart();
  const linesBefore = lineStarts(whole.slice(0, whole.length - source.length)).length - 1;
  if (source.includes("<!DOCTYPE")) throw broken(kind, "<!DOCTYPE", "no document type: a message has none");
  requireShallow(source, kind);
  try {
    const { root } = parseXml(source, { includeOffsets: true });
    if (root === null) throw broken(kind, null, "an XML element");
    return new Element(root, { kind, starts: lineStarts(source), linesBefore });
  } catch (error) {
    if (!(error instanceof XmlError)) throw error;
    const reason = error.message.split(" (line ")[0]!;
    throw broken(`${kind}, line ${error.line + linesBefore}`, null, `well-formed XML; ${reason}`);
  }
}

/** Counts how deep elements nest, without reading them: the library would go as deep as the text does. */
function requireShallow(source: string, kind: string): void {
  let depth = 0;
  for (let at = source.indexOf("<"); at >= 0; at = source.indexOf("<", at + 1)) {
    const skipTo = source.startsWith("<!--", at) ? "-->" : source.startsWith("<![CDATA[", at) ? "]]>" : null;
    if (skipTo !== null) {
      at = source.indexOf(skipTo, at);
      if (at < 0) return;
      continue;
    }
    const next = source[at + 1];
    if (next === "/") depth--;
    else if (next !== "?" && next !== "!") {
      const end = source.indexOf(">", at);
      if (end < 0) return;
      if (source[end - 1] !== "/") depth++;
      at = end - 1;
    }
    if (depth > deepest) throw broken(kind, null, `elements nested at most ${deepest} deep`);
  }
}

/** Offsets at which lines begin. */
function lineStarts(source: string): number[] {
  const starts = [0];
  for (let at = source.indexOf("\n"); at >= 0; at = source.indexOf("\n", at + 1)) starts.push(at + 1);
  return starts;
}

function lineOf(offset: number, starts: readonly number[]): number {
  let low = 0;
  let high = starts.length;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (starts[middle]! <= offset) low = middle;
    else high = middle;
  }
  return low + 1;
}

/**
 * The one message of a kind ("opm", "omm", "oem") in an XML text: the root itself, or inside a combined message (ndm).
 * Errors: invalid-message when there is none, or more than one.
 */
export function soleMessage(text: string, kind: string): { message: Element; others: number } {
  const root = readXml(text, kind);
  const wanted = kind.toLowerCase();
  if (root.name === wanted) return { message: root, others: 0 };
  const where = `${root.where}, <${root.name}>`;
  if (root.name !== "ndm") throw broken(where, root.name, `the element <${wanted}>: this is another kind of message`);
  const messages = root.children.filter(({ name }) => name !== "COMMENT" && name !== "MESSAGE_ID");
  const matching = messages.filter(({ name }) => name === wanted);
  if (matching.length !== 1) {
    const found = messages.map(({ name }) => name).join(", ");
    throw broken(where, found, `one ${kind} in the combined message; there are ${matching.length}`);
  }
  return { message: matching[0]!, others: messages.length - 1 };
}

/** The version attribute of a message's element; its id must name the kind when there is one. */
export function versionOf(message: Element, kind: string): string {
  const id = message.attributes.id;
  const where = `${message.where}, <${message.name}>`;
  if (id !== undefined && id !== `CCSDS_${kind}_VERS`) throw broken(where, id, `id="CCSDS_${kind}_VERS"`);
  const { version } = message.attributes;
  if (version === undefined) throw broken(where, null, "the attribute version");
  return version;
}

/** An element that holds keywords and comments, as a block. `skip` names children that are blocks of their own. */
export function blockFrom(element: Element, skip: readonly string[] = []): Block {
  const comments: string[] = [];
  const entries: Entry[] = [];
  for (const child of element.children) {
    if (skip.includes(child.name)) continue;
    if (child.children.length > 0)
      throw broken(`${child.where}, <${child.name}>`, null, "a value, not further elements");
    if (child.name === "COMMENT") comments.push(child.text);
    else entries.push(entryFrom(child));
  }
  return { where: `${element.where}, <${element.name}>`, comments, entries };
}

function entryFrom(child: Element): Entry {
  const { units, parameter } = child.attributes;
  const where = child.where;
  let keyword = child.name;
  if (keyword === "USER_DEFINED") {
    if (parameter === undefined || !/^[!-<>-~]+$/.test(parameter)) {
      throw broken(`${where}, USER_DEFINED`, parameter ?? null, "the attribute parameter, a name without blanks");
    }
    keyword = `USER_DEFINED_${parameter}`;
  }
  return { keyword, value: child.text, unit: units === undefined ? null : units.trim(), where, place: [] };
}

/** The only child of a name. Errors: invalid-message when there are several, or none although there must be one. */
export function only(parent: Element, name: string, required: boolean): Element | null {
  const found = parent.children.filter((child) => child.name === name);
  if (found.length > 1) throw broken(`${found[1]!.where}, <${name}>`, null, `one <${name}> in <${parent.name}>`);
  if (found.length === 0 && required) throw broken(`${parent.where}, <${parent.name}>`, null, `the element <${name}>`);
  return found[0] ?? null;
}

/** Refuses children that an element does not have. */
export function requireChildren(parent: Element, known: readonly string[]): void {
  for (const { name, where } of parent.children) {
    if (known.includes(name)) continue;
    throw broken(`${where}, <${name}>`, null, `only ${known.map((one) => `<${one}>`).join(", ")} in <${parent.name}>`);
  }
}

const escaped = (text: string): string =>
  text.replace(/[&<>"]/g, (one) => (one === "&" ? "&amp;" : one === "<" ? "&lt;" : one === ">" ? "&gt;" : "&quot;"));

/** A tree on its way out: an element with either a text or children. */
export interface PrintedElement {
  readonly name: string;
  readonly attributes?: string;
  readonly content: string | readonly PrintedElement[];
}

/** A block as an element. */
export function blockElement({ element, comments, entries }: PrintedBlock): PrintedElement {
  return {
    name: element,
    content: [
      ...comments.map((content) => ({ name: "COMMENT", content })),
      ...entries.map(([keyword, content]) =>
        element === "userDefinedParameters"
          ? { name: "USER_DEFINED", attributes: ` parameter="${escaped(keyword.slice(13))}"`, content }
          : { name: keyword, content },
      ),
    ],
  };
}

/** A whole message in XML. */
export function printXml(kind: string, version: string, content: readonly PrintedElement[]): string {
  const lines = ['<?xml version="1.0" encoding="UTF-8"?>'];
  const attributes = ` id="CCSDS_${kind}_VERS" version="${version}"`;
  printElement({ name: kind.toLowerCase(), attributes, content }, "", lines);
  return `${lines.join("\n")}\n`;
}

function printElement({ name, attributes = "", content }: PrintedElement, indent: string, lines: string[]): void {
  if (typeof content === "string") {
    lines.push(`${indent}<${name}${attributes}>${escaped(content)}</${name}>`);
    return;
  }
  lines.push(`${indent}<${name}${attributes}>`);
  for (const child of content) printElement(child, `${indent}  `, lines);
  lines.push(`${indent}</${name}>`);
}
