import { Problem } from "../../problem/index.ts";

/** The code is not what it should be: what was found, what is wrong in a sentence, what would be right. */
export function invalidCode(received: unknown, detail: string, expected: string): Problem {
  return new Problem("invalid-time-code", detail, [{ place: [], received, expected }]);
}

/**
 * Hexadecimal text, upper or lower case, as octets.
 * Errors: invalid-time-code for anything else, an 0x in front and blanks included.
 */
export function readOctets(text: string): number[] {
  const pairs = "hexadecimal digits, two an octet, with nothing before, between or after them";
  const refuse = (why: string): Problem => invalidCode(text, `The time code "${text.slice(0, 80)}" ${why}.`, pairs);
  if (text === "") throw refuse("is empty");
  if (/^0x/i.test(text)) throw refuse("begins with 0x; the digits alone are wanted");
  if (/\s/.test(text)) throw refuse("holds blanks");
  const wrong = /[^0-9a-f]/i.exec(text);
  if (wrong) throw refuse(`holds "${wrong[0]}" at character ${wrong.index + 1}, which is no hexadecimal digit`);
  if (text.length % 2 !== 0) throw refuse(`has ${text.length} digits, an odd number: half an octet is missing`);
  return text.match(/../g)!.map((pair) => Number.parseInt(pair, 16));
}

const hexadecimal = (octet: number): string => octet.toString(16).padStart(2, "0");

export const writeOctets = (octets: readonly number[]): string => octets.map(hexadecimal).join("");

export const readNumber = (octets: readonly number[]): bigint =>
  octets.reduce((value, octet) => value * 256n + BigInt(octet), 0n);

/** The last `count` octets of a number, the most significant first. */
export const numberOctets = (value: bigint, count: number): number[] =>
  Array.from({ length: count }, (_, i) => Number((value >> BigInt(8 * (count - 1 - i))) & 255n));

/** Time-code identification, bits 1 to 3 of a P-field. Source: CCSDS 301.0-B-4, 3.2.2, 3.3.2, 3.4.2. */
const identifications: Readonly<Record<number, string>> = {
  1: "CUC with the epoch 1958-01-01 TAI",
  2: "CUC with an agency's own epoch",
  4: "CDS",
  5: "CCS",
};

/** What a P-field's first octet names, in words. */
export const named = (octet: number): string =>
  identifications[(octet >> 4) & 7] ?? `no code of the standard (identification ${(octet >> 4) & 7})`;

/**
 * Parts a code into its P-field (`pOctets` long; none: empty) and a time field of `length` octets.
 * Errors: invalid-time-code when the lengths do not add up.
 */
export function requireLength(
  text: string,
  octets: readonly number[],
  pOctets: number,
  length: number,
  layout: string,
): readonly number[] {
  const expected = pOctets + length;
  if (octets.length !== expected) {
    const parts = pOctets === 0 ? "no P-field" : `${pOctets} of P-field`;
    throw invalidCode(
      text,
      `The time code has ${octets.length} octets where the format takes ${expected}: ${parts}, ${layout}.`,
      `${expected} octets (${2 * expected} hexadecimal digits): ${parts}, ${layout}`,
    );
  }
  return octets.slice(pOctets);
}

/**
 * Holds a P-field of one octet against that of the format.
 * Errors: invalid-time-code naming both, in words and hexadecimal.
 */
export function requirePField(
  text: string,
  found: number | undefined,
  wanted: number,
  words: (octet: number) => string,
): void {
  if (found === wanted) return;
  const shown = found === undefined ? "is missing" : `${hexadecimal(found)} says ${words(found)}`;
  throw invalidCode(
    text,
    `The P-field ${shown}; the format given is ${words(wanted)}.`,
    `a P-field of ${hexadecimal(wanted)}, or a format that agrees with the code`,
  );
}
