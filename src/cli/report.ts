import type { CorrectionResponse, PredictionResponse } from "../wire/index.ts";

type State = Pick<CorrectionResponse["results"][number], "clockMinusTtNs" | "terms" | "uncertaintyNs" | "flags">;
type Remarks = Pick<CorrectionResponse, "notices" | "evidence">;

/** A table without lines: columns parted by two spaces, numbers to the right, the columns of `left` to the left. */
export function table(head: readonly string[], left: readonly number[], rows: readonly (readonly string[])[]): string {
  const widths = head.map((title, i) => rows.reduce((most, row) => Math.max(most, row[i]!.length), title.length));
  const line = (cells: readonly string[]): string =>
    `  ${cells.map((cell, i) => (left.includes(i) ? cell.padEnd(widths[i]!) : cell.padStart(widths[i]!))).join("  ")}`;
  return [head, ...rows].map((cells) => line(cells).trimEnd()).join("\n");
}

/** Nanoseconds, grouped: three decimals, or below one all six there are (a term is whole femtoseconds). */
function nanoseconds(ns: number): string {
  const size = Math.abs(ns);
  const [whole = "", fraction = ""] = size.toFixed(size < 1 ? 6 : 3).split(".");
  return `${ns < 0 ? "-" : ""}${whole.replace(/\B(?=(\d{3})+$)/g, " ")}.${fraction}`;
}

/** Uncertainties: two digits say enough. */
const sigmaText = (ns: number): string => (ns === 0 ? "0" : Number(ns.toPrecision(2)).toString());

/** The terms of several results side by side, in ns. */
function breakdown(results: readonly State[], headings: readonly string[]): string {
  const first = results[0]!;
  const rows = first.terms.map(({ term, label }, k) => [
    term,
    ...results.map((result) => nanoseconds(result.terms[k]!.accumulatedNs)),
    label,
  ]);
  rows.push(["sum", ...results.map((result) => nanoseconds(result.clockMinusTtNs)), "Clock minus TT"]);
  return table(["term, ns", ...headings, ""], [0, headings.length + 1], rows);
}

/** At most so many results stand side by side in a breakdown. */
const widest = 4;

export function remarks({ notices, evidence }: Remarks): string[] {
  const lines = notices.map(({ code, text }) => `  notice ${code}: ${text}`);
  lines.push(
    `  evidence: inputs ${evidence.inputsSha256.slice(0, 16)}..., ${evidence.leapSeconds.source.split(",")[0]}, version ${evidence.version}`,
  );
  lines.push("  caution: decision support, not qualified for flight safety; tauline --help says more");
  return lines;
}

/** Corrected readings as text for people. */
export function correctionReport(response: CorrectionResponse): string {
  const { results } = response;
  const scale = results[0]!.scale;
  const named = results.some(({ id }) => id !== undefined);
  const rows = results.map((result) => [
    ...(named ? [result.id ?? ""] : []),
    String(result.reading),
    result.corrected,
    nanoseconds(result.clockMinusTtNs),
    sigmaText(result.uncertaintyNs),
    result.flags.join(" ") || "-",
  ]);
  const head = [...(named ? ["id"] : []), "reading", `corrected ${scale}`, "clock - TT, ns", "u (k=1), ns", "flags"];
  const shown = results.slice(0, widest);
  const headings = shown.map(({ id, reading }) => id ?? String(reading));
  const more = results.length > widest ? [`  (terms of the first ${widest} readings; --json gives all)`] : [];
  return [
    table(head, [head.length - 1], rows),
    "",
    breakdown(shown, headings),
    ...more,
    "",
    ...remarks(response),
    "",
  ].join("\n");
}

/** Predicted readings as text for people. */
export function predictionReport(response: PredictionResponse): string {
  const { results } = response;
  const rows = results.map((result) => [
    result.at,
    String(result.reading),
    result.fraction.toFixed(6),
    result.sigmaTicks === null ? "-" : sigmaText(result.sigmaTicks),
    nanoseconds(result.clockMinusTtNs),
    result.flags.join(" ") || "-",
  ]);
  const head = [`at ${results[0]!.scale}`, "reading", "and ticks", "u (k=1), ticks", "clock - TT, ns", "flags"];
  return [table(head, [5], rows), "", ...remarks(response), ""].join("\n");
}
