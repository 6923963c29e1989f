import { execFileSync } from "node:child_process";
import { availableParallelism, cpus } from "node:os";
import { keplerClosedForm } from "./keplerClosedForm.ts";
import { lowOrbitDay } from "./lowOrbitDay.ts";
import { manyReadings } from "./manyReadings.ts";
import type { Row } from "./measure.ts";
import { overHttp } from "./overHttp.ts";
import { propagatedState } from "./propagatedState.ts";
import { serve } from "./servers.ts";
import { timeTexts } from "./timeTexts.ts";

/**
 * npm run bench: every bench once, one table. With "service" or "echo" it is one of the two servers of the HTTP bench.
 * The exit code is 0 whether targets are met or not: a timing is never a test.
 */
const benches: readonly (() => Row[] | Promise<Row[]>)[] = [
  keplerClosedForm,
  propagatedState,
  timeTexts,
  lowOrbitDay,
  manyReadings,
  overHttp,
];

function commit(): string {
  try {
    const git = (...args: string[]): string =>
      execFileSync("git", ["--no-optional-locks", ...args], { encoding: "utf8" }).trim();
    return git("rev-parse", "--short", "HEAD") + (git("status", "--porcelain") === "" ? "" : ", with changes");
  } catch {
    return "unknown";
  }
}

const word = ({ met }: Row): string => (met === null ? "" : met ? "met" : "NOT MET");

async function printTable(): Promise<void> {
  console.log(
    `Node ${process.version}, ${availableParallelism()} cores (${cpus()[0]?.model.trim() ?? "unknown"}), commit ${commit()}`,
  );
  console.log(
    "Medians; ratios are of speeds, ours over theirs, in turns in one run; spread: the middle half of the rounds.\n",
  );
  console.log("| id | definition | reached | target | | spread |\n|---|---|---|---|---|---|");
  for (const bench of benches) {
    for (const row of await bench()) {
      const { id, definition, reached, target, spread } = row;
      console.log(`| ${id} | ${definition} | ${reached} | ${target} | ${word(row)} | ${spread} |`);
    }
  }
}

const [what] = process.argv.slice(2);
if (what === "service" || what === "echo") await serve(what);
else await printTable();
