import { compareAll, gnssAbsent, gnssRow, gnssSummary } from "./gnssEccentricity.ts";
import { compareRow, type Row, worst } from "./row.ts";
import { publishedRows } from "./rows.ts";
import {
  testSatelliteMisfits,
  testSatelliteRow,
  testSatelliteSummary,
  testSatellitesAbsent,
} from "./testSatellites.ts";

/**
 * `npm run checks`: every figure from outside beside what the project computes. Fails when one does not agree, but for
 * those of which it is explained why they cannot.
 */

type Verdict = "agrees" | "explained" | "FAILS";

interface Line {
  readonly cells: readonly string[];
  readonly verdict: Verdict;
}

/** Heading and width of each column; numbers stand to the right. About 180 characters a line. */
const columns = [
  { heading: "id", width: 5 },
  { heading: "quantity [unit]", width: 44 },
  { heading: "published", width: 17, right: true },
  { heading: "computed", width: 17, right: true },
  { heading: "difference", width: 10, right: true },
  { heading: "tolerance", width: 9, right: true },
  { heading: "verdict", width: 9 },
  { heading: "source", width: 44 },
  { heading: "standing", width: 11 },
] as const;

/** Cut at the width with three dots. */
const shortened = (text: string, width: number): string =>
  text.length <= width ? text : `${text.slice(0, width - 3).trimEnd()}...`;

const inLine = (cells: readonly string[]): string =>
  columns
    .map((column, i) => {
      const text = shortened(cells[i] ?? "", column.width);
      return "right" in column ? text.padStart(column.width) : text.padEnd(column.width);
    })
    .join("  ")
    .trimEnd();

/** The quantity gives way to its unit and to the place of the number that is shown. */
function quantity(row: Row, suffix: string): string {
  const unit = row.unit === "1" ? "" : ` [${row.unit}]`;
  return shortened(row.what, columns[1].width - unit.length - suffix.length) + suffix + unit;
}

/** As many of fifteen digits as there is room for; less would cut published figures short. */
function plain(value: number, room: number): string {
  const small = value !== 0 && Math.abs(value) < 1e-3;
  for (let digits = 15; digits > 1; digits--) {
    const rounded = Number(value.toPrecision(digits));
    const text = small ? rounded.toExponential() : String(rounded);
    if (text.length <= room) return text;
  }
  return value.toExponential(1);
}

const small = (value: number): string => (value === 0 ? "0" : value.toExponential(1));

/** One line a row; of several numbers the one nearest to its tolerance. */
function lineOf(row: Row): Line {
  try {
    const numbers = compareRow(row);
    const shown = worst(numbers);
    const agrees = numbers.every((one) => one.agrees);
    const verdict: Verdict = agrees ? "agrees" : row.explained === undefined ? "FAILS" : "explained";
    const place = numbers.length === 1 ? "" : ` (${numbers.indexOf(shown) + 1} of ${numbers.length})`;
    const { published, computed, difference, tolerance } = shown;
    const figures = [
      plain(published, columns[2].width),
      plain(computed, columns[3].width),
      small(difference),
      small(tolerance),
    ];
    return { cells: [row.id, quantity(row, place), ...figures, verdict, row.source, row.standing], verdict };
  } catch (error) {
    const message = error instanceof Error ? error.message : String(error);
    return {
      cells: [row.id, quantity(row, ""), "", message, "", "", "FAILS", row.source, row.standing],
      verdict: "FAILS",
    };
  }
}

const comparisons = gnssAbsent === null ? compareAll() : [];
const misfits = testSatellitesAbsent === null ? testSatelliteMisfits() : [];
const rows = [...publishedRows, ...comparisons.map(gnssRow), ...misfits.map(testSatelliteRow)];
const lines = rows.map(lineOf);

console.log(inLine(columns.map(({ heading }) => heading)));
console.log(inLine(columns.map(({ width }) => "-".repeat(width))));
for (const { cells } of lines) console.log(inLine(cells));

const count = (verdict: Verdict): number => lines.filter((line) => line.verdict === verdict).length;
const standing = (name: Row["standing"]): number => rows.filter((row) => row.standing === name).length;
const explained = rows.filter((_, i) => lines[i]!.verdict === "explained");
console.log(`\n${count("agrees")} of ${rows.length} agree, ${explained.length} are explained, ${count("FAILS")} fail.`);
for (const row of explained) console.log(`Explained, ${row.id}: ${row.explained}`);
console.log(
  `Published figures: ${standing("read")} read in their source, ${standing("from memory")} only from memory, ` +
    `${standing("derived")} derived from printed figures, ${standing("identity")} identities.`,
);
console.log("Of rows with several numbers the one nearest to its tolerance is shown; all of them count.");
console.log(
  gnssAbsent === null
    ? gnssSummary(comparisons)
    : `Real orbits of day 118 of 2021: skipped, ${gnssAbsent}. Twelve figures of them are in rows D01 to D12.`,
);
console.log(
  testSatellitesAbsent === null
    ? testSatelliteSummary(misfits)
    : `Test satellites of the mean-element theory: skipped, ${testSatellitesAbsent}. Six of their states are in rows P0000 to P4320.`,
);
if (count("FAILS") > 0) process.exitCode = 1;
