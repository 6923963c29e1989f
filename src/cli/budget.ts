import type { Command } from "commander";
import { type BudgetResponse, driftBudgets } from "../wire/index.ts";
import { remarks, table } from "./report.ts";
import {
  deliver,
  parseInput,
  readJsonFile,
  readTrajectoryFile,
  type Surroundings,
  type WorkOptions,
  WrongUse,
} from "./work.ts";

interface BudgetOptions extends WorkOptions {
  readonly horizon?: string;
  readonly from?: string;
}

/** `tauline budget`: how far an ideal clock drifts along a trajectory. */
export function budgetCommand(program: Command, surroundings: Surroundings): void {
  program
    .command("budget")
    .description("tell how far an ideal clock drifts along a trajectory, term by term")
    .option(
      "--trajectory <file>",
      "the trajectory: JSON as in the interface document, or an OEM, OPM, OMM or two-line elements as they are",
    )
    .option("--clock <file>", "a clock; its oscillator.nominalHz turns the frequency preset into Hz")
    .option("--horizon <seconds>", "how far to look, s")
    .option("--from <instant>", "where to begin; the trajectory's own start when left out")
    .option("--terms <list>", "physical terms to compute, parted by commas; all when left out")
    .option("--request <file>", 'a whole request as the service takes it; "-": standard input')
    .option("--out <file>", "where to write the result instead of standard output")
    .option("--json", "the service's JSON instead of a table")
    .action(async (options: BudgetOptions) => {
      const answer = driftBudgets(await assemble(options, surroundings), surroundings.bench());
      await deliver(options.json ? `${JSON.stringify(answer)}\n` : budgetReport(answer), options, surroundings);
    });
}

async function assemble(options: BudgetOptions, surroundings: Surroundings): Promise<unknown> {
  if (options.request !== undefined) {
    const others = ["trajectory", "clock", "horizon", "from", "terms"] as const;
    const given = others.filter((name) => options[name] !== undefined).map((name) => `--${name}`);
    if (given.length > 0) throw new WrongUse(`--request brings everything with it; leave out ${given.join(", ")}`);
    return parseInput(options.request, surroundings);
  }
  if (options.trajectory === undefined || options.horizon === undefined) {
    throw new WrongUse("--trajectory FILE and --horizon SECONDS are needed (or --request FILE with everything)");
  }
  return {
    trajectory: readTrajectoryFile(options.trajectory),
    horizonS: Number(options.horizon),
    ...(options.clock === undefined ? {} : { clock: readJsonFile(options.clock, "the clock") }),
    ...(options.from === undefined ? {} : { from: options.from }),
    ...(options.terms === undefined ? {} : { terms: options.terms.split(",").map((term) => term.trim()) }),
  };
}

const digits = (value: number, count: number): string => Number(value.toPrecision(count)).toString();

/** A budget as text for people. */
function budgetReport(answer: BudgetResponse): string {
  const { orbit, closedForm, frequencyPreset } = answer;
  const rows = [...answer.terms, answer.total].map(({ term, meanRate, perOrbitNs, perDayUs, peakToPeakNs, label }) => [
    term,
    meanRate.toExponential(6),
    perOrbitNs === null ? "-" : perOrbitNs.toFixed(6),
    perDayUs.toFixed(9),
    peakToPeakNs.toFixed(6),
    label,
  ]);
  const head = ["term", "mean rate", "per orbit, ns", "per day, us", "peak to peak, ns", ""];
  const lines = [table(head, [0, 5], rows), ""];
  if (orbit === null)
    lines.push(`  ${answer.withoutOrbit} Means run from end to end, ${answer.meanOverS} s from ${answer.from}.`);
  else {
    lines.push(
      `  orbit: ${orbit.semiMajorAxisKm.toFixed(3)} km (mean ${orbit.meanSemiMajorAxisKm.toFixed(3)}), e ${digits(orbit.eccentricity, 6)}, i ${digits(orbit.inclinationDeg, 7)} deg, period ${orbit.periodS.toFixed(3)} s`,
      `  means over ${orbit.revolutions} revolutions by ${orbit.countedBy}, ${answer.meanOverS.toFixed(3)} s from ${answer.from}`,
    );
  }
  if (closedForm !== null) {
    lines.push(
      `  closed forms: osculating ${closedForm.osculatingRate.toExponential(6)}, secular ${closedForm.secularRate.toExponential(6)}; integral less secular ${digits(closedForm.differenceNs, 4)} ns`,
      `  ${closedForm.why}`,
    );
  }
  const { fractional, hz, setHz } = frequencyPreset;
  const inHz = hz === undefined ? "" : `, ${hz} Hz: set ${setHz} Hz`;
  lines.push(`  frequency preset ${fractional}${inHz}`, "", ...remarks(answer), "");
  return lines.join("\n");
}
