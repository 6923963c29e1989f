import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import {
  defaultLeapSeconds,
  geocentricTdbMinusTt,
  parseInstant,
  tdbMinusTt,
  topocentricTdbMinusTt,
} from "../../src/time/index.ts";
import { tdbMinusTtTerms } from "../../src/time/tdbMinusTt.data.ts";
import { openData } from "../published/sharedFolder.ts";

/** TDB - TT: the table against the open data, the sum against an independent one. */

describe("the series of Fairhead & Bretagnon (1990)", () => {
  it("has 787 terms", () => {
    expect(tdbMinusTtTerms.map((rows) => rows.length)).toEqual([474, 205, 85, 20, 3]);
  });

  const file = openData("tdb-minus-tt/fairhead_bretagnon_1990_terms.csv");
  if (file.absent === null) {
    const rows = readFileSync(file.path, "utf8")
      .trim()
      .split(/\r?\n/)
      .slice(1)
      .map((line) => line.split(",").map(Number) as [number, number, number, number]);

    it("is the open table, figure for figure (data/tdb-minus-tt, PROVENANCE.md)", () => {
      const here = tdbMinusTtTerms.flatMap((list, power) => list.map((row) => [power, ...row]));
      expect(here).toHaveLength(rows.length);
      for (const [i, [power, amplitude, frequency, phase]] of rows.entries()) {
        const [p, a, f, phi] = here[i]!;
        expect([p, f, phi]).toEqual([power, frequency, phase]);
        expect(Math.abs(a! / 1e6 - amplitude)).toBeLessThanOrEqual(1e-15 * Math.abs(amplitude));
      }
    });

    it("is summed without loss over 1972-2100: a plain sum of the open table agrees but for the planets' masses", () => {
      for (let t = -0.028; t <= 0.101; t += 0.00137) {
        const plain = rows.reduce((sum, [power, a, f, phi]) => sum + t ** power * a * Math.sin(f * t + phi), 0);
        // 0.4 ns: the adjustment, 3.638e-8 t^2 s and four terms of 4.67e-9 s in all, at t = 0.1.
        expect(Math.abs(tdbMinusTt(t) - plain)).toBeLessThan(3.638e-8 * t * t + 4.67e-9);
      }
    });
  } else {
    it.skip(`the open table: skipped, ${file.absent}`, () => {});
  }

  it("takes TDB as its argument: two dates, the leading term's slope between them", () => {
    // d(TDB - TT)/dt is at most 3.4e-10: a second of the argument cannot matter by more (amplitude times frequency).
    const at = (text: string) => geocentricTdbMinusTt(parseInstant(text, "TT", defaultLeapSeconds));
    expect(Math.abs(at("2026-03-01T00:00:01") - at("2026-03-01T00:00:00"))).toBeLessThan(3.5e-10);
  });
});

describe("what a place on the Earth adds (Moyer 1981)", () => {
  const equator = { longitude: 0, axisDistance: 6_378_137, equatorDistance: 0 };

  it("is nothing at the centre and a wave of some 2 microseconds at the equator", () => {
    expect(topocentricTdbMinusTt(0.02, 0.3, { longitude: 1, axisDistance: 0, equatorDistance: 0 })).toBe(0);
    const day = Array.from({ length: 96 }, (_, i) => topocentricTdbMinusTt(0.02, i / 96, equator));
    expect(Math.max(...day)).toBeGreaterThan(1.9e-6);
    expect(Math.max(...day.map(Math.abs))).toBeLessThan(2.2e-6);
  });

  it("takes longitude and time of day for one another", () => {
    const west = topocentricTdbMinusTt(0.02, 0.75, { ...equator, longitude: -Math.PI / 2 });
    expect(west).toBeCloseTo(topocentricTdbMinusTt(0.02, 0.5, equator), 18);
  });
});
