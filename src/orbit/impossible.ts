import { Problem } from "../problem/index.ts";
import { compareInstants, type Instant } from "../time/index.ts";

/** A table or list that cannot be used. */
export function impossibleTable(place: (string | number)[], detail: string, expected: string): Problem {
  return new Problem("impossible-table", detail, [{ place, expected }]);
}

/** Errors: impossible-table at the first entry of `list` that does not come after the one before it. */
export function requireRising(instants: readonly Instant[], list: string, field: string): void {
  for (let i = 1; i < instants.length; i++) {
    const order = compareInstants(instants[i - 1]!, instants[i]!);
    if (order < 0) continue;
    const what = order === 0 ? "has the same instant as the one before it" : "lies before the one before it";
    throw impossibleTable([list, i, field], `Entry ${i} of ${list} ${what}.`, "instants that rise from entry to entry");
  }
}
