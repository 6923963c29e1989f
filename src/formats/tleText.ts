import { messageLines } from "./keyValue.ts";
import { broken, Remarks } from "./message.ts";

/** The two lines of one object out of a text, with the name that may stand before them. */
export interface ElementSet {
  readonly name: string | null;
  readonly line1: string;
  readonly line2: string;
  /** Number of line 1 in the text, counted from 1. */
  readonly lineNumber: number;
}

const begins = (line: string | undefined, digit: "1" | "2"): boolean => line?.startsWith(`${digit} `) ?? false;

/**
 * Splits a text into objects, each of two lines or of three with a name before them ("0 NAME" or "NAME"). Blank lines and
 * lines that begin with # are passed over. The lines themselves are read by parseTle.
 * Errors: invalid-message for a line that belongs to no pair. Source: common practice, no source.
 */
export function splitElementSets(text: string): ElementSet[] {
  const lines = messageLines(text, "TLE", new Remarks()).filter(({ text: line }) => !line.startsWith("#"));
  const found: ElementSet[] = [];
  for (let i = 0; i < lines.length; i++) {
    let { text: line, number } = lines[i]!;
    let name: string | null = null;
    const following = lines[i + 1];
    // A name may itself begin with "1 ": it is one when the real first line follows.
    if (!begins(line, "1") || (begins(following?.text, "1") && begins(lines[i + 2]?.text, "2"))) {
      if (!begins(following?.text, "1")) throw broken(`TLE, line ${number}`, line, "line 1 of an object, or its name");
      name = line.startsWith("0 ") ? line.slice(2).trim() : line;
      ({ text: line, number } = following!);
      i++;
    }
    const second = lines[i + 1];
    if (!begins(second?.text, "2")) {
      throw broken(
        `TLE, line ${second?.number ?? number}`,
        second?.text ?? null,
        `line 2 after line 1 (line ${number})`,
      );
    }
    found.push({ name, line1: line, line2: second!.text, lineNumber: number });
    i++;
  }
  return found;
}
