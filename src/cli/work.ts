import { readFileSync, writeFileSync } from "node:fs";
import type { Readable, Writable } from "node:stream";
import { messageKind, splitElementSets } from "../formats/index.ts";
import { Problem } from "../problem/index.ts";
import { type Bench, parseJson } from "../wire/index.ts";

/** What a command line works with; nothing of the process is reached for elsewhere. */
export interface Surroundings {
  readonly bench: () => Bench;
  readonly input: Readable & { isTTY?: boolean };
  readonly output: Writable;
  readonly messages: Writable;
}

export interface WorkOptions {
  readonly clock?: string;
  readonly trajectory?: string;
  readonly request?: string;
  readonly value?: readonly string[];
  readonly near?: string;
  readonly scale?: string;
  readonly unwrap?: string;
  readonly terms?: string;
  readonly out?: string;
  readonly json?: boolean;
}

/** Wrong use of the command line, said in one sentence. */
export class WrongUse extends Error {}

function readTextFile(file: string, what: string): string {
  try {
    return readFileSync(file, "utf8");
  } catch (error) {
    throw new WrongUse(`${what} ${file} cannot be read: ${(error as Error).message}`);
  }
}

/** Errors: WrongUse, naming the file and what is wrong with it. */
export function readJsonFile(file: string, what: string): unknown {
  const text = readTextFile(file, what);
  try {
    return parseJson(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    if (error instanceof Problem) throw new WrongUse(`${what} ${file}: ${error.message}`);
    throw error;
  }
}

/** A trajectory from a file as it is: our JSON, or an OEM, OPM, OMM or two-line elements. Errors: WrongUse. */
export function readTrajectoryFile(file: string): unknown {
  const text = readTextFile(file, "the trajectory");
  try {
    const found = messageKind(text);
    if (found === null) return readJsonFile(file, "the trajectory");
    if (found.kind !== "tle") return { kind: found.kind, text };
    const sets = splitElementSets(text);
    const [first] = sets;
    if (first === undefined || sets.length > 1)
      throw new WrongUse(`the trajectory ${file} holds ${sets.length} element sets; one is needed`);
    return { kind: "tle", line1: first.line1, line2: first.line2 };
  } catch (error) {
    if (error instanceof Problem) throw new WrongUse(`the trajectory ${file}: ${error.message}`);
    throw error;
  }
}

async function readAll(input: Readable): Promise<string> {
  const chunks: Buffer[] = [];
  for await (const chunk of input) chunks.push(Buffer.from(chunk as Uint8Array | string));
  return Buffer.concat(chunks).toString("utf8");
}

/** A JSON request from a file, or from standard input for "-". */
export async function parseInput(file: string, { input }: Surroundings): Promise<unknown> {
  return file === "-" ? parseJson(await readAll(input)) : readJsonFile(file, "the request");
}

/** Lines of a file or of standard input without blanks and comments. */
export async function readLines(file: string | undefined, { input }: Surroundings): Promise<string[]> {
  let text: string;
  if (file === undefined || file === "-") {
    if (input.isTTY) throw new WrongUse("nothing to work on: name a file, pipe lines in, or use --value");
    text = await readAll(input);
  } else {
    try {
      text = readFileSync(file, "utf8");
    } catch (error) {
      throw new WrongUse(`${file} cannot be read: ${(error as Error).message}`);
    }
  }
  return text
    .replace(/^\uFEFF/, "")
    .split(/\r?\n/)
    .map((line) => line.trim())
    .filter((line) => line !== "" && !line.startsWith("#"));
}

/** The body of a request from files and options; `items` turns lines into its list. */
export async function assembleRequest(
  file: string | undefined,
  options: WorkOptions,
  surroundings: Surroundings,
  items: (lines: readonly string[], near: string | undefined) => object,
): Promise<unknown> {
  if (options.request !== undefined) {
    const others = ["clock", "trajectory", "value", "near", "scale", "unwrap", "terms"] as const;
    const given = others.filter((name) => options[name] !== undefined).map((name) => `--${name}`);
    if (file !== undefined) given.push("the file");
    if (given.length > 0) throw new WrongUse(`--request brings everything with it; leave out ${given.join(", ")}`);
    return parseInput(options.request, surroundings);
  }
  if (options.clock === undefined || options.trajectory === undefined) {
    throw new WrongUse("--clock FILE and --trajectory FILE are needed (or --request FILE with everything)");
  }
  const clock = readJsonFile(options.clock, "the clock");
  const trajectory = readTrajectoryFile(options.trajectory);
  if (options.value !== undefined && file !== undefined)
    throw new WrongUse("--value and a file were given; use one of them");
  const lines = options.value ?? (await readLines(file, surroundings));
  if (lines.length === 0) throw new WrongUse("there is nothing to work on: the input has no lines");
  return {
    clock,
    trajectory,
    ...(options.scale === undefined ? {} : { scale: options.scale }),
    ...(options.unwrap === undefined ? {} : { unwrap: options.unwrap }),
    ...(options.terms === undefined ? {} : { terms: options.terms.split(",").map((term) => term.trim()) }),
    ...items(lines, options.near),
  };
}

/** Readings, one a line: the value, and after a comma a rough time if there is one. */
export const readingItems = (lines: readonly string[], near: string | undefined): object => ({
  readings: lines.map((line) => {
    const [reading = "", own, ...more] = line.split(",").map((part) => part.trim());
    if (more.length > 0)
      throw new WrongUse(`a line is VALUE or VALUE,ROUGH-TIME; this one has more: ${line.slice(0, 80)}`);
    const rough = own === undefined || own === "" ? near : own;
    return { reading, ...(rough === undefined ? {} : { near: rough }) };
  }),
});

export const instantItems = (lines: readonly string[]): object => ({ instants: [...lines] });

/** Writes a result to standard output or a file. */
export async function deliver(text: string, options: WorkOptions, { output }: Surroundings): Promise<void> {
  if (options.out !== undefined) {
    try {
      writeFileSync(options.out, text);
    } catch (error) {
      throw new WrongUse(`${options.out} cannot be written: ${(error as Error).message}`);
    }
    return;
  }
  await new Promise<void>((resolve, reject) => {
    output.once("error", (error: NodeJS.ErrnoException) => (error.code === "EPIPE" ? resolve() : reject(error)));
    output.write(text, () => resolve());
  });
}
