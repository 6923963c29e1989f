import type { Command } from "commander";
import { scales } from "../time/index.ts";
import { type ConversionResponse, parseJson, timeConversions } from "../wire/index.ts";
import { remarks, table } from "./report.ts";
import { deliver, parseInput, readLines, type Surroundings, type WorkOptions, WrongUse } from "./work.ts";

interface ConvertOptions extends WorkOptions {
  readonly to?: string;
  readonly toCode?: readonly string[];
  readonly fromCode?: string;
}

/** `tauline convert`: instants and time codes to other scales and codes. */
export function convertCommand(program: Command, surroundings: Surroundings): void {
  program
    .command("convert [file]")
    .description(
      'turn instants (one a line: UTC ending in Z, or a text, a blank and its scale) into other scales and time codes; "-" or nothing: standard input',
    )
    .option("--to <list>", `scales to convert to, parted by commas: ${scales.join(", ")}`)
    .option("--to-code <format...>", "time codes to convert to, each a JSON object as in the interface document")
    .option("--from-code <format>", "the lines are time codes of this format, a JSON object, instead of instants")
    .option("--value <instant...>", "instants or time codes to convert instead of a file")
    .option("--request <file>", 'a whole request as the service takes it; "-": standard input')
    .option("--out <file>", "where to write the result instead of standard output")
    .option("--json", "the service's JSON instead of a table")
    .action(async (file: string | undefined, options: ConvertOptions) => {
      const answer = timeConversions(await assemble(file, options, surroundings), surroundings.bench());
      await deliver(options.json ? `${JSON.stringify(answer)}\n` : conversionReport(answer), options, surroundings);
    });
}

async function assemble(file: string | undefined, options: ConvertOptions, surroundings: Surroundings) {
  const { request, value, to, toCode, fromCode } = options;
  if (request !== undefined) {
    const others = { "--to": to, "--to-code": toCode, "--from-code": fromCode, "--value": value, "the file": file };
    const given = Object.entries(others).filter(([, option]) => option !== undefined);
    if (given.length > 0) {
      throw new WrongUse(`--request brings everything with it; leave out ${given.map(([name]) => name).join(", ")}`);
    }
    return parseInput(request, surroundings);
  }
  if (to === undefined && toCode === undefined) {
    throw new WrongUse("--to SCALES or --to-code FORMAT is needed (or --request FILE with everything)");
  }
  if (file !== undefined && value !== undefined) throw new WrongUse("either a file or --value, not both");
  const codes = (toCode ?? []).map((text) => readFormat("--to-code", text));
  const format = fromCode === undefined ? undefined : readFormat("--from-code", fromCode);
  const lines = value ?? (await readLines(file, surroundings));
  if (lines.length === 0) throw new WrongUse("there is nothing to work on: the input has no lines");
  return {
    values: lines.map((line) => (format === undefined ? instantOf(line) : { timeCode: line, format })),
    to: [...(to === undefined ? [] : to.split(",").map((scale) => scale.trim())), ...codes],
  };
}

function readFormat(option: string, text: string): unknown {
  try {
    return parseJson(text);
  } catch {
    throw new WrongUse(
      `${option} takes a JSON object such as '{ "format": "CUC", "coarseOctets": 4, "fineOctets": 2, "pField": true }', found ${text.slice(0, 80)}`,
    );
  }
}

/** A text alone is UTC; with a blank and a scale behind it is of that scale. */
function instantOf(line: string): unknown {
  const [at = "", scale, ...more] = line.trim().split(/\s+/);
  return scale === undefined || more.length > 0 ? line : { at, scale };
}

type Row = ConversionResponse["results"][number];

const inputText = ({ input }: Row): string =>
  typeof input === "string" ? input : "at" in input ? `${input.at} ${input.scale}` : input.timeCode;

const nameOf = (value: Row["values"][number]): string => ("scale" in value ? value.scale : value.format.format);

/** Conversions as text for people: a row an instant, a column a scale or code. */
function conversionReport(answer: ConversionResponse): string {
  const { results } = answer;
  const rows = results.map((row) => [
    inputText(row),
    ...row.values.map((value) => ("scale" in value ? value.at : value.timeCode)),
    row.flags.join(" ") || "-",
  ]);
  const head = ["input", ...results[0]!.values.map(nameOf), "flags"];
  const everyColumn = head.map((_, i) => i);
  const most = results
    .flatMap(({ values }) => values.map((value) => ("lostPs" in value ? value.lostPs : 0)))
    .reduce((a, b) => Math.max(a, b), 0);
  const lost =
    most === 0 ? [] : [`  codes are truncated to their resolution: up to ${most} ps lost here (--json tells each)`];
  return [table(head, everyColumn, rows), "", ...lost, ...remarks(answer), ""].join("\n");
}
