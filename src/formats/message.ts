import { type Place, Problem } from "../problem/index.ts";

/**
 * What all orbit messages share.
 * Sources: CCSDS 502.0-B-2 and B-3 (orbit data messages), CCSDS 505.0-B (the same in XML).
 */

export type Triple = readonly [number, number, number];

/** The versions of the orbit data messages that are blue books: 502.0-B-1, B-2 and B-3. */
export const versions = ["1.0", "2.0", "3.0"] as const;
export type MessageVersion = (typeof versions)[number];

/** A moment as the message writes it: calendar date or day of year, with or without Z, in its own time system. */
export interface MessageEpoch {
  readonly text: string;
  /** The value of TIME_SYSTEM as written ("UTC", "GPS", "SCLK", ...); UTC for CREATION_DATE. */
  readonly timeSystem: string;
}

export interface MessageHeader {
  readonly comments: readonly string[];
  /** From version 3.0 on. */
  readonly classification: string | null;
  /** Null when the message leaves it empty, which real ones do. */
  readonly creationDate: MessageEpoch | null;
  /** Null when the message leaves it empty. */
  readonly originator: string | null;
  /** From version 3.0 on. */
  readonly messageId: string | null;
}

export interface UserDefined {
  readonly comments: readonly string[];
  /** The names stand without the prefix USER_DEFINED_. */
  readonly parameters: readonly { readonly name: string; readonly value: string }[];
}

export interface SpacecraftParameters {
  readonly comments: readonly string[];
  readonly massKg: number | null;
  readonly solarRadiationAreaM2: number | null;
  readonly solarRadiationCoefficient: number | null;
  readonly dragAreaM2: number | null;
  readonly dragCoefficient: number | null;
}

/** A record together with what a careful reader would remark on the text it came from; remarks never change a value. */
export interface ReadMessage<T> {
  readonly message: T;
  readonly remarks: readonly string[];
}

/** A message that cannot be read. */
const unreadable = "invalid-message";

/** Shows a found text, cut to a length that fits a sentence. */
export const quoted = (text: string): string => JSON.stringify(text.length > 60 ? `${text.slice(0, 57)}...` : text);

/**
 * The Problem of a message that is broken: where ("OEM, line 12", with the keyword), what was found, what would be right.
 * `found` is null when something is missing.
 */
export function broken(where: string, found: string | null, expected: string, place: Place = []): Problem {
  const what = found === null ? "" : `found ${quoted(found)}, `;
  const fault = { place, expected: `${where}: ${expected}` };
  return new Problem(unreadable, `${where}: ${what}expected ${expected}.`, [
    found === null ? fault : { ...fault, received: found.length > 200 ? `${found.slice(0, 197)}...` : found },
  ]);
}

/** Collects remarks, each once and at most twenty. */
export class Remarks {
  readonly list: string[] = [];

  add(text: string): void {
    if (this.list.length < 20 && !this.list.includes(text)) this.list.push(text);
  }
}

/** The given word, or null; the nearest known word when it was misspelt by at most two letters or by its case. */
export function nearest(word: string, known: Iterable<string>): string | null {
  if (word.length > 40) return null;
  const upper = word.toUpperCase();
  let best: string | null = null;
  let least = 3;
  for (const candidate of known) {
    if (Math.abs(candidate.length - upper.length) >= least) continue;
    const distance = editDistance(upper, candidate);
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

/** Letters to insert, drop or change on the way from one word to another. */
function editDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, i) => i);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      const change = row[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1);
      next.push(Math.min(change, row[j]! + 1, next[j - 1]! + 1));
    }
    row = next;
  }
  return row[b.length]!;
}
