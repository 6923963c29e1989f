import { readFileSync } from "node:fs";
import { expect, it } from "vitest";
import { coordinateTimes } from "./coordinateTimes.ts";
import type { Row } from "./row.ts";
import { shared } from "./sharedFolder.ts";
import { timeCodes } from "./timeCodes.ts";

interface Listed {
  readonly id: string;
  readonly issue: string;
  readonly topic: string;
  readonly published: number | string[] | number[] | string;
  readonly tolerance: number;
  readonly source: string;
  readonly standing: string;
}

const mine = (row: Listed): boolean =>
  row.issue === "width" &&
  (row.topic === "time scales" || row.topic === "CCSDS 301.0-B-4" || ["K03", "K04", "K06", "K07"].includes(row.id));

/** Hexadecimal as its octets, other texts as their characters' numbers, numbers as they are. */
function asNumbers(published: Listed["published"]): readonly number[] {
  const list = Array.isArray(published) ? published : [published];
  return list.flatMap((item: number | string) => {
    if (typeof item === "number") return [item];
    if (/^([0-9a-f]{2})+$/.test(item)) return item.match(/../g)!.map((pair) => Number.parseInt(pair, 16));
    return [...item].map((character) => character.charCodeAt(0));
  });
}

const numbers = (published: Row["published"]): readonly number[] =>
  typeof published === "number" ? [published] : published;

const list = shared("checks/published-values.json");
if (list.absent === null) {
  it("holds the listed figures of time scales and time codes, with their tolerances, sources and standings", () => {
    const wanted = (JSON.parse(readFileSync(list.path, "utf8")) as Listed[]).filter(mine);
    expect(wanted).toHaveLength(31);
    const here = new Map([...coordinateTimes, ...timeCodes].map((row) => [row.id, row]));
    for (const { id, published, tolerance, source, standing } of wanted) {
      const row = here.get(id);
      expect(row, `a row ${id}`).toBeDefined();
      expect(numbers(row!.published), id).toEqual(asNumbers(published));
      expect(row!.tolerance, id).toBe(tolerance);
      expect(row!.source, id).toBe(source);
      expect(row!.standing, id).toBe(standing === "built from the standard layout" ? "derived" : standing);
    }
  });
} else {
  it.skip(`the listed figures of time scales and codes: skipped, ${list.absent}`, () => {});
}
