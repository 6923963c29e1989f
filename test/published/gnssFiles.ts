import { readFileSync } from "node:fs";
import type { Vec3 } from "../../src/numeric/index.ts";
import { defaultLeapSeconds, type Instant, parseInstant } from "../../src/time/index.ts";
import type { BroadcastMessage } from "./broadcastMessage.ts";

/** Just as much of two published formats as the folder gnss-2021-118 needs. */

export interface OrbitPoint {
  readonly epoch: Instant;
  /** Earth-fixed, m. */
  readonly position: Vec3;
}

/** Positions of an SP3-d file by satellite. Source: The Extended Standard Product 3 format (SP3-d), IGS (2016). */
export function readOrbits(path: string): Map<string, OrbitPoint[]> {
  const out = new Map<string, OrbitPoint[]>();
  let epoch: Instant | undefined;
  for (const line of readFileSync(path, "utf8").split("\n")) {
    if (line.startsWith("%c") && epoch === undefined) {
      const scale = line.slice(9, 12);
      if (scale !== "GPS" && scale !== "ccc") throw new Error(`the orbit file counts ${scale} instead of GPS time`);
    }
    if (line.startsWith("*")) {
      const [year, month, day, hour, minute] = line.slice(1).trim().split(/\s+/);
      const two = (text: string | undefined): string => String(text).padStart(2, "0");
      const second = line.slice(20).trim().padStart(11, "0");
      const text = `${year}-${two(month)}-${two(day)}T${two(hour)}:${two(minute)}:${second}`;
      epoch = parseInstant(text, "GPS", defaultLeapSeconds);
    } else if (line.startsWith("P") && epoch !== undefined) {
      const satellite = line.slice(1, 4);
      const kilometre = (at: number): number => Number(line.slice(at, at + 14)) * 1000;
      const position: Vec3 = [kilometre(4), kilometre(18), kilometre(32)];
      // Three zeros stand for a position that is not known.
      if (position.every((x) => x === 0)) continue;
      const points = out.get(satellite) ?? [];
      points.push({ epoch, position });
      out.set(satellite, points);
    }
  }
  return out;
}

/** Messages of healthy GPS satellites in a RINEX 2 navigation file. Source: RINEX 2.11, table A4. */
export function readMessages(path: string): Map<string, BroadcastMessage[]> {
  const out = new Map<string, BroadcastMessage[]>();
  const lines = readFileSync(path, "utf8").split("\n");
  const first = lines.findIndex((line) => line.includes("END OF HEADER")) + 1;
  for (let i = first; i + 7 < lines.length; i += 8) {
    const field = (row: number, column: number): number =>
      Number(lines[i + row]!.slice(3 + 19 * column, 22 + 19 * column).replace("D", "E"));
    // Field 2 of line 6 is the health: 0 is good.
    if (field(6, 1) !== 0) continue;
    const satellite = `G${lines[i]!.slice(0, 2).trim().padStart(2, "0")}`;
    const messages = out.get(satellite) ?? [];
    messages.push({
      week: field(5, 2),
      second: field(3, 0),
      eccentricity: field(2, 1),
      rootOfAxis: field(2, 3),
      meanAnomaly: field(1, 3),
      motionCorrection: field(1, 2),
      fitHours: field(7, 1) || 4,
    });
    out.set(satellite, messages);
  }
  return out;
}
