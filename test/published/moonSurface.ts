import { moonTable } from "../../src/bodies/index.ts";
import { dot, norm, scale, subtract, type Vec3 } from "../../src/numeric/index.ts";
import { buildTrajectory } from "../../src/orbit/index.ts";
import { ProperTime, rateTerms } from "../../src/relativity/index.ts";
import {
  addSeconds,
  defaultLeapSeconds,
  type Instant,
  parseInstant,
  ttSecondsSinceJ2000,
} from "../../src/time/index.ts";
import { DAY } from "../../src/units/index.ts";
import type { Row } from "./row.ts";

const start = parseInstant("2026-03-01T00:00:00Z", "UTC", defaultLeapSeconds);
const place = new Float64Array(3);
const motion = new Float64Array(3);

/** The point of a sphere about the Moon's centre that faces the Earth: position and velocity about the Moon, m and m/s. */
function facingEarth(epoch: Instant, radius: number): { epoch: Instant; position: Vec3; velocity: Vec3 } {
  moonTable.evaluate(ttSecondsSinceJ2000(epoch), place, motion);
  const moon: Vec3 = [place[0]!, place[1]!, place[2]!];
  const velocity: Vec3 = [motion[0]!, motion[1]!, motion[2]!];
  const distance = norm(moon);
  const along = scale(moon, dot(moon, velocity) / (distance * distance));
  const factor = -radius / distance;
  return { epoch, position: scale(moon, factor), velocity: scale(subtract(velocity, along), factor) };
}

/** Mean rate in microseconds a day of such a clock against TT over whole returns of the Moon to its perigee. */
function moonClock(radius: number): number {
  const anomalisticMonth = 27.554_55 * DAY;
  const step = 21_600;
  const span = 82 * anomalisticMonth;
  const states = Array.from({ length: Math.ceil(span / step) + 1 }, (_, i) =>
    facingEarth(addSeconds(start, i * step), radius),
  );
  const table = buildTrajectory(
    { kind: "state-table", center: "Moon", frame: "ICRF", states },
    { ut1MinusTai: -37, xPole: 0, yPole: 0 },
    start,
  );
  const total = new ProperTime(table, rateTerms, 0).between(0, span).reduce((sum, part) => sum + part);
  return (total / span) * DAY * 1e6;
}

/** The Moon's own potential on its surface over c^2, by the tidal term of a Moon that is far away. */
function surfaceOffset(radius: number): number {
  const far = 1e13;
  const term = rateTerms.find((one) => one.term === "moon-tide")!;
  const moon = Float64Array.of(far, 0, 0);
  const distance = far - radius;
  const state = Float64Array.of(distance, 0, 0, 0, 0, 0);
  const field = { oblateness: 0, higher: 0, x: 0, y: 0, z: 0 };
  return Math.abs(term.rate({ state, distance, speedSquared: 0, field, sun: moon, moon }));
}

/** Clocks on the Moon. */
export const moonSurface: readonly Row[] = [
  {
    id: "L01",
    what: "clock on the Moon's equator against the geoid",
    inputs: { a_m: 384_399_000, R_moon_m: 1_738_100, GM_M: 4_902_800_100_000 },
    published: 56.02,
    got: () => moonClock(1_738_100),
    tolerance: 0.02,
    unit: "us/day",
    source: "Ashby & Patla 2024, arXiv:2402.11150 abstract",
    standing: "read",
    place: "orbit: a table about the Moon in ICRF; relativity: ProperTime, the term moon-tide on the Moon itself",
    note: "All terms over 82 anomalistic months of the real Moon, 6.2 years; the paper has an orbit of two bodies.",
  },
  {
    id: "L06",
    what: "potential on the Moon's surface, GM/(R c^2)",
    inputs: { R_m: 1_737_400 },
    published: 3.14e-11,
    got: () => surfaceOffset(1_737_400),
    tolerance: 5e-14,
    unit: "1",
    source: "IAU 2024 / L_L literature (3.1391e-11)",
    standing: "from memory",
    place: "relativity: the term moon-tide; units: GM_MOON",
  },
];
