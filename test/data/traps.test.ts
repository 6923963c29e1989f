import { existsSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { addSeconds, defaultLeapSeconds, formatInstant, LeapSecondTable, parseInstant } from "../../src/time/index.ts";
import { corrections, driftBudgets, plainBench } from "../../src/wire/index.ts";

/** Traps of the open data, read at ../shared/data (or TAULINE_DATA); skipped where it is absent. */
const data = process.env.TAULINE_DATA ?? fileURLToPath(new URL("../../../shared/data", import.meta.url));
const file = (path: string): string => readFileSync(`${data}/${path}`, "utf8");
const there = existsSync(data);
if (!there) console.log("The open data are absent: their traps are not tested here.");

describe.skipIf(!there)("the leap-second lists (IERS, Debian tzdata 2026f and 2025b)", () => {
  const sea = { kind: "surface", body: "Earth", latitudeDeg: 0, longitudeDeg: 0, heightM: 0, heightOf: "geoid" };
  const flagsAt = (at: string, table: LeapSecondTable): string[] =>
    corrections(
      {
        clock: { counter: { ticksPerSecond: 1 }, anchor: { reading: 0, at } },
        trajectory: sea,
        readings: [{ reading: 1 }],
      },
      plainBench(table, "test"),
    ).results[0]!.flags;

  it("the current one is the shipped one", () => {
    const current = LeapSecondTable.parse(file("leap-seconds/leap-seconds.list"), "current");
    expect(current.steps).toEqual(defaultLeapSeconds.steps);
    expect(current.expires).toEqual(defaultLeapSeconds.expires);
  });

  it("after the expiry of the old one results are flagged, by the instant and not by today", () => {
    const old = LeapSecondTable.parse(file("leap-seconds/leap-seconds-expired-2026.list"), "old");
    expect(flagsAt("2026-06-27T00:00:00Z", old)).not.toContain("leap-table-expired");
    expect(flagsAt("2026-07-01T00:00:00Z", old)).toContain("leap-table-expired");
  });
});

describe.skipIf(!there)("a small satellite's onboard positions (lucky7-gps: steps of 59 and 61 s, empty rows)", () => {
  it("are a usable table as they are: Earth-fixed, by their own times", () => {
    const start = parseInstant("1980-01-06T00:00:00", "GPS", defaultLeapSeconds);
    const rows = file("lucky7-gps/lucky7_posW15.csv")
      .split(/\r?\n/)
      .map((line) => line.split(",").map(Number))
      .filter(([x, y, z]) => x !== undefined && Math.hypot(x, y!, z!) > 6e6);
    const steps = new Set(rows.slice(1).map((row, i) => Math.round(row[3]! - rows[i]![3]!)));
    expect(steps.has(59) || steps.has(61)).toBe(true);
    // The longest stretch without a hole of more than two minutes.
    let best: number[][] = [];
    let run: number[][] = [];
    for (const row of rows) {
      const last = run.at(-1);
      if (last !== undefined && (row[3]! - last[3]! > 120 || row[3]! <= last[3]!)) run = [];
      run.push(row);
      if (run.length > best.length) best = [...run];
    }
    const states = best.map(([x, y, z, second]) => ({
      epoch: {
        at: formatInstant(addSeconds(start, 2063 * 604_800 + second!), "GPS", defaultLeapSeconds),
        scale: "GPS",
      },
      positionKm: [x! / 1000, y! / 1000, z! / 1000],
    }));
    const horizonS = best.at(-1)![3]! - best[0]![3]! - 1;
    const budget = (frame: string) =>
      driftBudgets(
        { trajectory: { kind: "state-table", frame, states }, horizonS },
        plainBench(defaultLeapSeconds, "test"),
      );
    const right = budget("ITRF");
    expect(right.notices.map(({ code }) => code)).not.toContain("implausible-orbit");
    // A circular low orbit at about 520 km: -23 to -25 microseconds a day.
    expect(right.total.perDayUs).toBeGreaterThan(-26);
    expect(right.total.perDayUs).toBeLessThan(-22);
    expect(budget("GCRF").notices.map(({ code }) => code)).toContain("implausible-orbit");
  });
});
