import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { defaultLeapSeconds, parseInstant } from "../../src/time/index.ts";
import { compareRow, type Row, worst } from "./row.ts";
import { publishedRows } from "./rows.ts";
import { shared } from "./sharedFolder.ts";

describe("published figures", () => {
  it.each(publishedRows.map((row) => [row.id, row.what, row] as const))("%s %s", (_id, _what, row) => {
    expect(row.source.trim().length, "a row without a source").toBeGreaterThan(5);
    expect(row.place.trim().length, "a row that does not say what it exercises").toBeGreaterThan(5);
    const outside = compareRow(row).filter(({ agrees }) => !agrees);
    expect(outside, `${row.source}; ${row.place}`).toEqual([]);
  });

  it("have an id each", () => {
    const ids = publishedRows.map(({ id }) => id);
    expect(ids).toHaveLength(new Set(ids).size);
  });
});

describe("the comparison", () => {
  const row = (published: Row["published"], got: number[], tolerance: Row["tolerance"]): Row => ({
    ...publishedRows[0]!,
    published,
    got: () => got,
    tolerance,
  });

  it("takes a difference as large as the tolerance and nothing beyond", () => {
    const agrees = (got: number): boolean[] => compareRow(row(1, [got], 0.5)).map((one) => one.agrees);
    expect([agrees(1.5), agrees(0.5), agrees(1.5000001), agrees(-1), agrees(Number.NaN)]).toEqual([
      [true],
      [true],
      [false],
      [false],
      [false],
    ]);
  });

  it("holds every number to its own tolerance and shows the worst", () => {
    const numbers = compareRow(row([1, 2, 3], [1.01, 2.01, 3], [0.1, 0.001, 0]));
    expect(numbers.map(({ agrees }) => agrees)).toEqual([true, false, true]);
    expect(worst(numbers).published).toBe(2);
  });

  it("refuses rows whose counts of numbers differ", () => {
    expect(() => compareRow(row([1, 2], [1], 0))).toThrow("1 numbers were computed for 2");
    expect(() => compareRow(row([1, 2, 3], [1, 2, 3], [0, 0]))).toThrow("2 tolerances for 3");
  });
});

// Row S06 gives what TAI - UTC was before its first step; nothing of it may enter a result.
it("UTC before 1972 is refused", () => {
  expect(() => parseInstant("1971-12-31T23:59:59Z", "UTC", defaultLeapSeconds)).toThrow(/1972/);
});

type Listed = Pick<Row, "id" | "published" | "tolerance" | "unit" | "source" | "standing">;

const figuresOf = ({ id, published, tolerance, unit, source, standing }: Listed): Listed => ({
  id,
  published,
  tolerance,
  unit,
  source,
  standing,
});

const list = shared("checks/published-values.json");
if (list.absent === null) {
  it("holds the list of published values in full, with the same figures, tolerances, units, sources and standings", () => {
    const all = JSON.parse(readFileSync(list.path, "utf8")) as (Listed & { issue: string })[];
    const wanted = all.filter(({ issue }) => issue === "spine");
    expect(wanted).toHaveLength(44);
    const ids = new Set(wanted.map(({ id }) => id));
    const byId = (a: Listed, b: Listed): number => a.id.localeCompare(b.id);
    const here = publishedRows.filter(({ id }) => ids.has(id)).map(figuresOf);
    expect(here.sort(byId)).toEqual(wanted.map(figuresOf).sort(byId));
  });
} else {
  it.skip(`the list of published values: skipped, ${list.absent}`, () => {});
}
