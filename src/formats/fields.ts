import type { Place } from "../problem/index.ts";
import { broken, type MessageEpoch, type MessageVersion, type Remarks } from "./message.ts";
import { epochExpected, numberText, readEpoch, readNumber, readWhole } from "./values.ts";

/**
 * Blocks of keywords: one table of rules per block says what is read, checked and printed, for KVN, XML and JSON alike.
 */

/** One keyword with its value, from a KVN line, an XML element or a member of a JSON object. */
export interface Entry {
  readonly keyword: string;
  readonly value: string;
  /** Unit from an XML attribute; in KVN it still stands behind the value. */
  readonly unit: string | null;
  /** "OEM, line 12". */
  readonly where: string;
  /** Where in a parsed request; empty for texts. */
  readonly place: Place;
}

/** The keywords of one logical block, with the comments at its head. */
export interface Block {
  readonly where: string;
  readonly comments: string[];
  readonly entries: Entry[];
}

type KindOf<V> = V extends string ? "text" : V extends number ? "number" | "whole" : "epoch";

export interface Rule<V> {
  readonly keyword: string;
  readonly kind: KindOf<NonNullable<V>>;
  /** Must be there. */
  readonly required?: null extends V ? never : true;
  /** Must be there, but real messages leave the value empty: read as null, with a remark. */
  readonly mayBeEmpty?: true;
  readonly unit?: string;
  /** The version that brought this keyword. */
  readonly since?: MessageVersion;
  /** What a number must be beyond being one: a test, and the words for it. */
  readonly test?: readonly [(value: number) => boolean, string];
}

export type BlockRules<T> = { readonly [K in Exclude<keyof T, "comments">]: Rule<T[K]> };

type AnyRule = Rule<string | number | MessageEpoch | null>;

/** What the reading of a block has to know of its message. */
export interface Context {
  readonly version: MessageVersion;
  readonly timeSystem: string;
  readonly remarks: Remarks;
  /** JSON has no header: what may be empty may then be absent. */
  readonly headerless?: boolean;
}

export const keywordsOf = <T>(rules: BlockRules<T>): string[] =>
  (Object.values(rules) as AnyRule[]).map((rule) => rule.keyword);

/**
 * Reads a block by its rules. Errors: invalid-message for a keyword that is missing, twice there, of a later version, or
 * whose value or unit is not as documented. Keywords that the rules do not know must have been refused before.
 */
export function readFields<T extends { readonly comments: readonly string[] }>(
  rules: BlockRules<T>,
  block: Block,
  context: Context,
): T {
  const found = new Map<string, Entry>();
  for (const entry of block.entries) {
    const before = found.get(entry.keyword);
    if (before !== undefined) {
      throw broken(`${entry.where}, ${entry.keyword}`, entry.value, `this keyword once (it stands at ${before.where})`);
    }
    found.set(entry.keyword, entry);
  }
  const record: Record<string, unknown> = { comments: block.comments };
  for (const [field, rule] of Object.entries(rules) as [string, AnyRule][]) {
    record[field] = readField(rule, found.get(rule.keyword), block, context);
  }
  return record as unknown as T;
}

function readField(rule: AnyRule, entry: Entry | undefined, block: Block, context: Context): unknown {
  if (entry === undefined) {
    if (rule.required || (rule.mayBeEmpty && !context.headerless)) {
      throw broken(block.where, null, `the keyword ${rule.keyword}, which must be given`);
    }
    return null;
  }
  const where = `${entry.where}, ${rule.keyword}`;
  if (rule.since !== undefined && context.version < rule.since) {
    throw broken(where, entry.value, `no such keyword in version ${context.version}: it came with ${rule.since}`);
  }
  if (entry.value === "" && rule.mayBeEmpty) {
    context.remarks.add(`${rule.keyword} is empty.`);
    return null;
  }
  if (entry.value === "" && rule.kind === "text" && !rule.required) {
    context.remarks.add(`${rule.keyword} is empty and taken as not given.`);
    return null;
  }
  return readValue(rule, entry, where, context);
}

function readValue(rule: AnyRule, entry: Entry, where: string, context: Context): unknown {
  const { place } = entry;
  if (rule.kind === "text") {
    if (entry.value === "") throw broken(where, "", "a value", place);
    return entry.value;
  }
  if (rule.kind === "epoch") {
    if (readEpoch(entry.value) === null) throw broken(where, entry.value, epochExpected, place);
    return { text: entry.value, timeSystem: rule.keyword === "CREATION_DATE" ? "UTC" : context.timeSystem };
  }
  return readQuantity(entry, rule);
}

/** A number with its unit. Errors: invalid-message when it is none, has another unit, or fails the rule's test. */
export function readQuantity(entry: Entry, rule: Pick<AnyRule, "kind" | "unit" | "test">): number {
  const where = `${entry.where}, ${entry.keyword}`;
  const { place } = entry;
  const { digits, unit } = splitUnit(entry);
  const value = rule.kind === "whole" ? readWhole(digits) : readNumber(digits);
  if (value === null) {
    const range = rule.kind === "whole" ? "a whole number" : "a number within the range of a double";
    throw broken(where, entry.value, rule.unit === undefined ? range : `${range} (${rule.unit})`, place);
  }
  if (unit !== null && unit.toLowerCase() !== rule.unit?.toLowerCase()) {
    const right = rule.unit === undefined ? "no unit: this value has none" : `the unit [${rule.unit}], or none`;
    throw broken(where, `[${unit}]`, right, place);
  }
  if (rule.test && !rule.test[0](value)) throw broken(where, entry.value, rule.test[1], place);
  return value;
}

/** A value and the unit behind it in square brackets, which is for the eye only (CCSDS 502.0-B-3 section 7.7.1). */
function splitUnit(entry: Entry): { digits: string; unit: string | null } {
  if (entry.unit !== null) return { digits: entry.value, unit: entry.unit };
  const open = entry.value.indexOf("[");
  if (open < 0 || !entry.value.endsWith("]")) return { digits: entry.value, unit: null };
  return { digits: entry.value.slice(0, open).trimEnd(), unit: entry.value.slice(open + 1, -1).trim() };
}

/** A block on its way out: keywords with their values, in the order of the standard. */
export interface PrintedBlock {
  /** The name of its XML element. */
  readonly element: string;
  readonly comments: readonly string[];
  readonly entries: readonly (readonly [keyword: string, value: string])[];
}

/** The keywords and values of a block, in the order of its rules. What is null is left out, or left empty where it must be there. */
export function printFields<T extends { readonly comments: readonly string[] }>(
  element: string,
  rules: BlockRules<T>,
  record: T,
): PrintedBlock {
  const entries: [string, string][] = [];
  for (const [field, rule] of Object.entries(rules) as [string, AnyRule][]) {
    const value = record[field as keyof T] as string | number | MessageEpoch | null;
    if (value !== null) entries.push([rule.keyword, valueText(value)]);
    else if (rule.mayBeEmpty) entries.push([rule.keyword, ""]);
  }
  return { element, comments: record.comments, entries };
}

const valueText = (value: string | number | MessageEpoch): string =>
  typeof value === "string" ? value : typeof value === "number" ? numberText(value) : value.text;
