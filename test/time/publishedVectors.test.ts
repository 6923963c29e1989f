import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import {
  defaultLeapSeconds,
  formatInstant,
  parseInstant,
  type Scale,
  tdbMinusTt,
  topocentricTdbMinusTt,
} from "../../src/time/index.ts";
import { openData } from "../published/sharedFolder.ts";

/**
 * The published test numbers of the IAU-derived routines for time scales, read where they are.
 * Source: data/erfa-vectors, PROVENANCE.md (liberfa/erfa, t_erfa_c.c).
 */

const table = defaultLeapSeconds;
const routines: Readonly<Record<string, readonly [Scale, Scale]>> = {
  taitt: ["TAI", "TT"],
  tttai: ["TT", "TAI"],
  taiutc: ["TAI", "UTC"],
  utctai: ["UTC", "TAI"],
  tttcg: ["TT", "TCG"],
  tcgtt: ["TCG", "TT"],
  tcbtdb: ["TCB", "TDB"],
  tdbtcb: ["TDB", "TCB"],
};
const day = 86_400_000_000_000_000n;

/** A Julian date at midnight and a decimal part of the day as text. */
function textOf(whole: string, part: string, scale: Scale): string {
  const date = new Date((Number(whole) - 2_440_587.5) * 86_400_000).toISOString().slice(0, 10);
  const digits = part.replace(/^0\./, "");
  const ps = (BigInt(digits) * day) / 10n ** BigInt(digits.length);
  const seconds = Number(ps / 1_000_000_000_000n);
  const time = new Date(seconds * 1000).toISOString().slice(11, 19);
  return `${date}T${time}.${String(ps % 1_000_000_000_000n).padStart(12, "0")}${scale === "UTC" ? "Z" : ""}`;
}

function partOf(text: string): number {
  const [hour, minute, second] = text.slice(11).replace("Z", "").split(":").map(Number);
  return (hour! * 3600 + minute! * 60 + second!) / 86_400;
}

const file = openData("erfa-vectors/erfa_vectors.csv");
if (file.absent === null) {
  const lines = readFileSync(file.path, "utf8").split(/\r?\n/);
  const rowOf = (routine: string, variable: string) => {
    const line = lines.find((text) => text.startsWith(`${routine},`) && text.includes(`,${variable},`))!;
    const [, call] = /"([^"]*(?:""[^"]*)*)"/.exec(line)!;
    const [expected, tolerance] = line.split(",").slice(-2).map(Number);
    return { call: call!, expected: expected!, tolerance: tolerance! };
  };

  describe("published test numbers", () => {
    it.each(Object.entries(routines))("%s", (routine, [from, to]) => {
      const line = lines.filter((text) => text.startsWith(`${routine},`))[1]!; // the second part of the result
      const [, whole, part] = /\((\d+\.\d), (0\.\d+),/.exec(line)!;
      const [expected, tolerance] = line.split(",").slice(-2).map(Number);
      const text = formatInstant(parseInstant(textOf(whole!, part!, from), from, table), to, table);
      expect(Math.abs(partOf(text) - expected!)).toBeLessThanOrEqual(tolerance!);
    });

    it("dtdb", () => {
      const { call, expected, tolerance } = rowOf("dtdb", "dtdb");
      const [date, part, ut1, longitude, u, v] = call.match(/-?\d+(\.\d+)?/g)!.map(Number);
      const t = (date! - 2_451_545 + part!) / 365_250;
      const place = { longitude: longitude!, axisDistance: u! * 1e3, equatorDistance: v! * 1e3 };
      expect(Math.abs(tdbMinusTt(t) + topocentricTdbMinusTt(t, ut1!, place) - expected)).toBeLessThanOrEqual(tolerance);
    });

    it("dtf2d: a leap second is the last part of a day of 86 401 s", () => {
      const { expected, tolerance } = rowOf("dtf2d", "u1+u2");
      const at = parseInstant("1994-06-30T23:59:60.13599Z", "UTC", table);
      const midnight = parseInstant("1994-06-30T00:00:00Z", "UTC", table);
      const part = (at.seconds - midnight.seconds + at.picoseconds / 1e12) / 86_401;
      expect(Math.abs(2_449_533.5 + part - expected)).toBeLessThanOrEqual(tolerance);
    });
  });
} else {
  it.skip(`published test numbers: skipped, ${file.absent}`, () => {});
}
