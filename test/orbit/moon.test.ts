import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, driftBudgets, plainBench } from "../../src/wire/index.ts";
import type { Body } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");
const month = 27.321661 * 86_400;

describe("a clock on the Moon", () => {
  it.each([
    [0, 0],
    [45, 90],
    [-60, 200],
    [90, 0],
  ])(
    "gains 56.02 microseconds a day on the geoid, at %d, %d (Ashby & Patla 2024, arXiv:2402.11150, abstract)",
    (latitudeDeg, longitudeDeg) => {
      const trajectory = { kind: "surface", body: "Moon", latitudeDeg, longitudeDeg, heightM: 0 };
      const { total } = driftBudgets(
        { trajectory, from: "2008-01-01T00:00:00Z", horizonS: month, seriesPoints: 2 },
        bench,
      );
      expect(Math.abs(total.perDayUs - 56.02)).toBeLessThan(0.02);
    },
  );

  it("loses g h/c^2 less with height: 1.62 m/s2 over 1000 m", () => {
    const at = (heightM: number) =>
      driftBudgets(
        {
          trajectory: { kind: "surface", body: "Moon", latitudeDeg: 10, longitudeDeg: 20, heightM },
          from: "2008-01-01T00:00:00Z",
          horizonS: month,
          seriesPoints: 2,
        },
        bench,
      ).total.meanRate;
    // Surface gravity 4902.800066 km3/s2 / (1737.4 km)^2.
    const gravity = 4902.800066e9 / 1_737_400 ** 2;
    expect((at(1000) - at(0)) / ((gravity * 1000) / 299_792_458 ** 2)).toBeCloseTo(1, 2);
  });
});

describe("states about the Moon", () => {
  it("go round it: a table about the Moon is the same path as one about the Earth", () => {
    const epoch = "2026-03-01T00:00:00Z";
    const radius = 1900;
    const rate = Math.sqrt(4902.8 / radius ** 3);
    const states = Array.from({ length: 60 }, (_, i) => {
      const [c, s] = [Math.cos(rate * 60 * i), Math.sin(rate * 60 * i)];
      return {
        epoch: new Date(Date.parse(epoch) + 60_000 * i).toISOString(),
        positionKm: [radius * c, radius * s, 0],
        velocityKmPerS: [-radius * rate * s, radius * rate * c, 0],
      };
    });
    const table: Body = { kind: "state-table", frame: "ICRF", center: "Moon", states };
    const clock = { counter: { ticksPerSecond: 1000 }, anchor: { reading: 0, at: epoch } };
    const answer = corrections({ clock, trajectory: table, readings: [{ reading: 3_000_000 }] }, bench);
    const [result] = answer.results;
    expect(result!.flags).toEqual([]);
    // The Moon's own pull at 1900 km (GM/(r c^2) = 2.87e-11) stands in the moon-tide term.
    const tide = result!.terms.find(({ term }) => term === "moon-tide")!;
    expect(tide.rate / -2.87e-11).toBeCloseTo(1, 1);
  });
});
