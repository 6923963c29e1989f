import { describe, expect, it } from "vitest";
import { buildTrajectory, type TrajectoryDescription } from "../../src/orbit/index.ts";
import { ProperTime, rateTerms } from "../../src/relativity/index.ts";
import { addSeconds } from "../../src/time/index.ts";
import { C2, DEGREE, EARTH_ROTATION } from "../../src/units/index.ts";
import { epoch } from "../support/orbits.ts";

const orientation = { ut1MinusTai: -37, xPole: 0, yPole: 0 };
const withoutTides = rateTerms.filter(({ term }) => !term.endsWith("-tide"));
const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);

const path = (description: TrajectoryDescription) => buildTrajectory(description, orientation, epoch);
const rateAt = (description: TrajectoryDescription): number =>
  sum(new ProperTime(path(description), withoutTides, 0).rates(1000));

const places = [
  [0, 0],
  [90, 0],
  [-45, 170],
  [51.5, -0.1],
  [-7.9, 345.6],
] as const;

describe("a clock on the ground", () => {
  it.each(places)("on the geoid keeps TT, at %d, %d (IAU 2000 Resolution B1.9)", (latitude, longitude) => {
    const rate = rateAt({
      kind: "surface",
      heightOf: "geoid",
      latitude: latitude * DEGREE,
      longitude: longitude * DEGREE,
      height: 0,
    });
    expect(Math.abs(rate)).toBeLessThan(2e-19);
  });

  it.each(places)("gains g h/c^2 above it, at %d, %d (normal gravity, WGS 84)", (latitude, longitude) => {
    const s2 = Math.sin(latitude * DEGREE) ** 2;
    // Somigliana's formula and its first height term, NIMA TR8350.2 eqs. 4-1 and 4-3, integrated over 1000 m.
    const onEllipsoid = (9.7803253359 * (1 + 0.00193185265241 * s2)) / Math.sqrt(1 - 0.00669437999014 * s2);
    const expected = (onEllipsoid * 1000 * (1 - 1000 / 6.371e6)) / C2;
    const rate = rateAt({
      kind: "surface",
      heightOf: "geoid",
      latitude: latitude * DEGREE,
      longitude: longitude * DEGREE,
      height: 1000,
    });
    // Gravity itself differs from the normal one by a few parts in 1e5.
    expect(Math.abs(rate / expected - 1)).toBeLessThan(1e-4);
  });
});

describe("a clock that is carried", () => {
  const point = (seconds: number, latitude: number, longitude: number, height: number) => ({
    at: addSeconds(epoch, seconds),
    latitude: latitude * DEGREE,
    longitude: longitude * DEGREE,
    height,
  });

  it("to nowhere is a clock at rest", () => {
    const resting = path({ kind: "surface", heightOf: "ellipsoid", latitude: 0.8, longitude: 0.3, height: 250 });
    const still = path({
      kind: "track",
      heightOf: "ellipsoid",
      points: [0, 1800, 7200].map((t) => ({ at: addSeconds(epoch, t), latitude: 0.8, longitude: 0.3, height: 250 })),
    });
    const start = (epoch.seconds - resting.reference.seconds) as number;
    const atRest = new ProperTime(resting, rateTerms, start).between(start, start + 7200);
    const carried = new ProperTime(still, rateTerms, 0).between(0, 7200);
    for (const [k, value] of carried.entries()) expect(Math.abs(value - atRest[k]!)).toBeLessThan(1e-19);
  });

  it.each([
    ["east", 1],
    ["west", -1],
  ])("along the equator %swards has the speed of the ground added to the Earth's", (_, sign) => {
    const height = 9000;
    const degreesAnHour = 8 * sign;
    const track = path({
      kind: "track",
      heightOf: "ellipsoid",
      points: [0, 1, 2, 3].map((h) => point(3600 * h, 0, degreesAnHour * h, height)),
    });
    const velocity = rateTerms.filter(({ term }) => term === "velocity");
    const [accumulated] = new ProperTime(track, velocity, 0).between(0, 3 * 3600);
    const turn = EARTH_ROTATION + (degreesAnHour * DEGREE) / 3600;
    const expected = (-(((6_378_137 + height) * turn) ** 2) / (2 * C2)) * 3 * 3600;
    expect(Math.abs(accumulated! / expected - 1)).toBeLessThan(1e-6);
  });

  it("over the pole and over the date line goes the short way", () => {
    const track = path({
      kind: "track",
      heightOf: "ellipsoid",
      points: [point(0, 89, 20, 0), point(3600, 89, -160, 0), point(7200, 88, 179, 0), point(10_800, 88, -179, 0)],
    });
    const state = new Float64Array(6);
    track.state(1800, state);
    // Half way over the pole: on the axis, to some metres of precession and nutation.
    expect(Math.hypot(state[0]!, state[1]!)).toBeLessThan(25_000);
    track.state(9000, state);
    expect(Number.isFinite(state[3]!)).toBe(true);
    expect(Math.hypot(state[3]!, state[4]!, state[5]!)).toBeLessThan(40);
  });

  it("has no gap of place at its points and turns its velocity there only", () => {
    const track = path({
      kind: "track",
      heightOf: "ellipsoid",
      points: [point(0, 10, 10, 0), point(600, 11, 11, 5000), point(1200, 10, 12, 0)],
    });
    const before = new Float64Array(6);
    const after = new Float64Array(6);
    track.state(600 - 1e-6, before);
    track.state(600 + 1e-6, after);
    expect(Math.hypot(...[0, 1, 2].map((k) => before[k]! - after[k]!))).toBeLessThan(0.01);
  });
});
