import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";
import type { Body } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");
const at = "2026-03-11T00:00:00Z";
const clock = { counter: { ticksPerSecond: 1_000_000 }, anchor: { reading: 0, at } };

/** Orbits with their epoch at the anchor or ten days before it. */
const orbits: Record<string, { positionKm: number[]; velocityKmPerS: number[]; epoch: string }> = {
  "low, epoch at the anchor": { positionKm: [6778, 0, 0], velocityKmPerS: [0, 4.7634, 6.0099], epoch: at },
  "12 h, epoch at the anchor": { positionKm: [26_561, 0, 0], velocityKmPerS: [0, 2.22, 3.17], epoch: at },
  "e = 0.74, epoch ten days before": {
    positionKm: [-30_000, 20_000, 10_000],
    velocityKmPerS: [-1.2, -1.1, 1.3],
    epoch: "2026-03-01T00:00:00Z",
  },
  "an escape": { positionKm: [7000, 0, 0], velocityKmPerS: [0, 11.5, 2], epoch: at },
};

const trajectory = (orbit: Body, more: Body = {}): Body => ({ kind: "state-vector", frame: "GCRF", ...orbit, ...more });

function unit(v: readonly number[]): number[] {
  const size = Math.hypot(...v);
  return v.map((x) => x / size);
}

/** The transverse direction of an orbit: across the radius in its plane. */
function transverse({ positionKm: r, velocityKmPerS: v }: Body): number[] {
  const radial = unit(r);
  const along = v.reduce((sum: number, x: number, k: number) => sum + x * radial[k]!, 0);
  return unit(v.map((x: number, k: number) => x - along * radial[k]!));
}

const uncertaintyOf = (result: Body, source: string): number =>
  result.uncertainty.find((item: Body) => item.source === source)?.ns ?? Number.NaN;

describe("the orbit's share", () => {
  const hours = [1, 6, 24, 47.3];

  it.each(Object.entries(orbits))("%s: is what an error of that size does, by propagating it", (name, orbit) => {
    const sigma = 1e-6; // km/s, across the radius
    const covarianceRtn = Array.from({ length: 6 }, (_, i) =>
      Array.from({ length: 6 }, (_, j) => (i === 4 && j === 4 ? sigma ** 2 : 0)),
    );
    const direction = transverse(orbit);
    const moved = { ...orbit, velocityKmPerS: orbit.velocityKmPerS.map((x, k) => x + sigma * direction[k]!) };
    const instants = hours.map((h) => new Date(Date.parse(at) + h * 3_600_000).toISOString());
    const predict = (path: Body) => predictedReadings({ clock, trajectory: path, instants }, bench).results;
    const stated = predict(trajectory(orbit, { covarianceRtn }));
    const other = predict(trajectory(moved));
    let truth = 0;
    let claim = 0;
    for (const [i, result] of stated.entries()) {
      const error = Math.abs(other[i]!.clockMinusTtNs - result.clockMinusTtNs);
      const orbitNs = uncertaintyOf(result, "orbit");
      // Never much too small at any one moment; the bounded part may make it larger.
      expect(orbitNs).toBeGreaterThan(0.75 * error);
      truth += error ** 2;
      claim += orbitNs ** 2;
    }
    // On an escape the growing and the bounded part work against each other; they are not credited for it.
    expect(Math.sqrt(claim / truth)).toBeLessThan(name === "an escape" ? 4 : 2.5);
  });

  it("of a semi-major axis is 3 GM/(2 a^2 c^2) sigma dt (two-body closed form)", () => {
    const path = trajectory(orbits["12 h, epoch at the anchor"], { semiMajorAxisSigmaKm: 0.001 });
    const [result] = corrections({ clock, trajectory: path, readings: [{ reading: 864_000_000_000 }] }, bench).results;
    const a = 1 / (2 / 26_561e3 - (2220 ** 2 + 3170 ** 2) / 3.986004418e14);
    const perMetre = (3 * 3.986004418e14) / (2 * a * a * 299_792_458 ** 2);
    expect(uncertaintyOf(result, "orbit") / (perMetre * 864_000 * 1e9)).toBeCloseTo(1, 1);
  });
});

describe("the oscillator's share", () => {
  const sea = { kind: "surface", body: "Earth", latitudeDeg: 10, longitudeDeg: 20, heightM: 0, heightOf: "geoid" };
  const after = (oscillator: Body, reading = 864_000_000_000): Body =>
    corrections(
      {
        clock: { ...clock, anchor: { ...clock.anchor, sigmaNs: 7 }, oscillator },
        trajectory: sea,
        readings: [{ reading }],
      },
      bench,
    ).results[0];

  it("grows with the frequency's sigma times the time, and half the square of it for ageing", () => {
    const result = after({ frequencySigma: 1e-12, agingSigmaPerDay: 1e-13 });
    expect(uncertaintyOf(result, "anchor")).toBe(7);
    expect(uncertaintyOf(result, "frequency")).toBeCloseTo(864, 3);
    expect(uncertaintyOf(result, "aging")).toBeCloseTo((1e-13 / 86_400) * (864_000 ** 2 / 2) * 1e9, 3);
    const squares = result.uncertainty.reduce((sum: number, { ns }: Body) => sum + ns * ns, 0);
    expect(result.uncertaintyNs).toBeCloseTo(Math.sqrt(squares), 6);
  });

  it.each([10, -10])("of a covariance (ns, 1, 1/day) is the whole quadratic form, %d days from the anchor", (days) => {
    const covariance = [
      [25, 2e-12, 0],
      [2e-12, 1e-24, 3e-26],
      [0, 3e-26, 4e-27],
    ];
    const result = after({ covariance }, days * 86_400_000_000);
    const tau = days * 86_400;
    const lever = [1, tau * 1e9, ((tau * tau) / 2 / 86_400) * 1e9];
    let variance = 0;
    for (let i = 0; i < 3; i++) for (let j = 0; j < 3; j++) variance += lever[i]! * lever[j]! * covariance[i]![j]!;
    expect(uncertaintyOf(result, "model")).toBeCloseTo(Math.sqrt(variance), 6);
  });
});

describe("the model's share", () => {
  it("of a propagated low orbit is some tenths of a ns a day, and drag takes over with the square of time", () => {
    const path = trajectory(orbits["low, epoch at the anchor"]);
    const [day, ten] = corrections(
      { clock, trajectory: path, readings: [{ reading: 86_400_000_000 }, { reading: 864_000_000_000 }] },
      bench,
    ).results;
    // Leaving out degree 4 alone moves a 400 km orbit by 0.18 ns a day (measured, orbit/modelError).
    expect(uncertaintyOf(day, "force-model")).toBeGreaterThan(0.18);
    expect(uncertaintyOf(day, "force-model")).toBeLessThan(1);
    expect(uncertaintyOf(ten, "force-model") / uncertaintyOf(day, "force-model")).toBeGreaterThan(30);
  });
});
