import type { Readable, Writable } from "node:stream";
import { Command, CommanderError, Option } from "commander";
import { Problem, problemCatalogue } from "../problem/index.ts";
import { type LeapSecondTable, scales } from "../time/index.ts";
import { caution, corrections, plainBench, predictedReadings, problemDetails } from "../wire/index.ts";
import { budgetCommand } from "./budget.ts";
import { convertCommand } from "./convert.ts";
import { correctionReport, predictionReport } from "./report.ts";
import {
  assembleRequest,
  deliver,
  instantItems,
  readingItems,
  type Surroundings,
  type WorkOptions,
  WrongUse,
} from "./work.ts";

export interface CommandLineParts {
  readonly version: string;
  /** Asked for when there is work; may fail for a bad environment. */
  readonly leapSeconds: () => LeapSecondTable;
  readonly serve: () => Promise<void>;
  readonly input: Readable & { isTTY?: boolean };
  readonly output: Writable;
  readonly messages: Writable;
}

/** Runs one command. Gives the exit code: 0 all good, 1 wrong use or bad input. */
export async function runCommandLine(args: readonly string[], parts: CommandLineParts): Promise<number> {
  const { input, output, messages } = parts;
  const bench = () => plainBench(parts.leapSeconds(), parts.version);
  const surroundings: Surroundings = { bench, input, output, messages };
  const program = buildProgram(parts, surroundings);
  try {
    await program.parseAsync([...args], { from: "user" });
    return 0;
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? 0 : 1;
    if (error instanceof WrongUse) {
      messages.write(`tauline: ${error.message}\n`);
      return 1;
    }
    if (error instanceof Problem) {
      messages.write(problemText(error));
      return 1;
    }
    throw error;
  }
}

/** A problem in words, a line a fault. */
function problemText(problem: Problem): string {
  const { faults } = problemDetails(problem);
  const lines = [`tauline: ${problem.message} [${problem.code}]`];
  for (const { pointer, received, expected } of faults ?? []) {
    const found = received === undefined ? "" : `found ${JSON.stringify(received)}, `;
    lines.push(`  at ${pointer || "the top"}: ${found}expected ${expected}`);
  }
  lines.push(`  ${problemCatalogue[problem.code].remedy}`);
  return `${lines.join("\n")}\n`;
}

function buildProgram({ version, serve, output, messages }: CommandLineParts, surroundings: Surroundings): Command {
  const program = new Command("tauline")
    .description("Corrected, traceable time stamps for spacecraft clocks, term by term.")
    .version(version, "--version")
    .addHelpText(
      "after",
      `\nEnvironment: PORT, HOST, LOG_LEVEL, LEAP_SECONDS_FILE (see README).\n\nCaution: ${caution}`,
    )
    .exitOverride()
    .configureOutput({ writeOut: (text) => output.write(text), writeErr: (text) => messages.write(text) })
    .showHelpAfterError("(tauline --help shows the use)");
  program
    .command("serve")
    .description("start the HTTP service on HOST:PORT (127.0.0.1:8080 unless told otherwise)")
    .action(serve);
  workCommand(program, "correct", "turn readings (one a line: VALUE or VALUE,ROUGH-TIME) into corrected instants")
    .option("--value <reading...>", "readings to correct instead of a file")
    .option("--near <instant>", "rough time of readings that bring none of their own; settles rollovers")
    .addOption(
      new Option("--unwrap <rule>", "settles rollovers against the anchor").choices(["after", "before", "nearest"]),
    )
    .action(async (file: string | undefined, options: WorkOptions) => {
      const body = await assembleRequest(file, options, surroundings, readingItems);
      const answer = corrections(body, surroundings.bench());
      await deliver(options.json ? `${JSON.stringify(answer)}\n` : correctionReport(answer), options, surroundings);
    });
  workCommand(program, "predict", "tell what the counter will show at instants (one a line)")
    .option("--value <instant...>", "instants to predict for instead of a file")
    .action(async (file: string | undefined, options: WorkOptions) => {
      const body = await assembleRequest(file, options, surroundings, instantItems);
      const answer = predictedReadings(body, surroundings.bench());
      await deliver(options.json ? `${JSON.stringify(answer)}\n` : predictionReport(answer), options, surroundings);
    });
  budgetCommand(program, surroundings);
  convertCommand(program, surroundings);
  return program;
}

function workCommand(program: Command, name: string, description: string): Command {
  return program
    .command(`${name} [file]`)
    .description(`${description}; "-" or nothing: standard input`)
    .option("--clock <file>", "the clock, JSON as in the interface document")
    .option(
      "--trajectory <file>",
      "the trajectory: JSON as in the interface document, or an OEM, OPM, OMM or two-line elements as they are",
    )
    .option("--request <file>", 'a whole request as the service takes it; "-": standard input')
    .option("--scale <scale>", `scale of the answer: ${scales.join(", ")}`)
    .option("--terms <list>", "physical terms to compute, parted by commas; all when left out")
    .option("--out <file>", "where to write the result instead of standard output")
    .option("--json", "the service's JSON instead of a table");
}
