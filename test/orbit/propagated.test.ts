import { describe, expect, it } from "vitest";
import { dot, norm, type Vec3 } from "../../src/numeric/index.ts";
import { ForceModel } from "../../src/orbit/forces.ts";
import { osculatingElements, twoBodyState } from "../../src/orbit/index.ts";
import { PropagatedTrajectory } from "../../src/orbit/propagated.ts";
import { SteppedPath } from "../../src/orbit/summedMultistep.ts";
import { TableTrajectory } from "../../src/orbit/table.ts";
import { endTerm, ProperTime, rateTerms } from "../../src/relativity/index.ts";
import { addSeconds } from "../../src/time/index.ts";
import { C2, DAY, GM_EARTH, LG } from "../../src/units/index.ts";
import { integrate } from "../support/extrapolation.ts";
import { axes, epoch, orbitClasses } from "../support/orbits.ts";

const given = { orbitError: null, notices: [], implausible: false };
const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);

const propagated = (elements: (typeof orbitClasses)[keyof typeof orbitClasses]) => {
  const { position, velocity } = twoBodyState(elements, 0);
  return new PropagatedTrajectory(epoch, position, velocity, axes, given);
};

/** The project's forces as a system of first order for the oracle. */
function system(carried: (r: Vec3, v: Vec3, a: Vec3) => number = () => 0) {
  const force = new ForceModel(epoch, axes);
  const moment = force.moment(0);
  const acceleration = new Float64Array(3);
  return (t: number, y: Float64Array, out: Float64Array) => {
    force.moment(t, moment);
    force.acceleration(moment, y[0]!, y[1]!, y[2]!, acceleration, 0);
    for (let k = 0; k < 3; k++) {
      out[k] = y[k + 3]!;
      out[k + 3] = acceleration[k]!;
    }
    const a = acceleration as unknown as Vec3;
    out[6] = carried([y[0]!, y[1]!, y[2]!], [y[3]!, y[4]!, y[5]!], a);
  };
}

/** Of the oracle, s: short enough for its order of 14, long enough to spare it rounding. */
const oracleSteps = [120, 900, 3600, 120, 120];

describe("a propagated state", () => {
  it.each(Object.entries(orbitClasses).map(([name, elements], i) => [name, elements, oracleSteps[i]!] as const))(
    "%s: agrees with an independent integrator of order 14 after a day, to 0.1 mm",
    (_, elements, step) => {
      const trajectory = propagated(elements);
      const { position, velocity } = twoBodyState(elements, 0);
      const end = DAY;
      const oracle = integrate(system(), Float64Array.from([...position, ...velocity, 0]), 0, end, step);
      const backwards = integrate(system(), Float64Array.from([...position, ...velocity, 0]), 0, -end, step);
      trajectory.extend(-end, end);
      const state = new Float64Array(6);
      for (const [t, expected] of [
        [end, oracle],
        [-end, backwards],
      ] as const) {
        trajectory.state(t, state);
        expect(Math.hypot(state[0]! - expected[0]!, state[1]! - expected[1]!, state[2]! - expected[2]!)).toBeLessThan(
          1e-4,
        );
        // 1 mm/s is 22 ps a day: a micrometre a second is far below what matters.
        expect(Math.hypot(state[3]! - expected[3]!, state[4]! - expected[4]!, state[5]! - expected[5]!)).toBeLessThan(
          1e-6,
        );
      }
    },
  );

  it.each(Object.entries(orbitClasses))("%s: half the step changes no term by 0.001 ps in ten days", (_, elements) => {
    const { position, velocity } = twoBodyState(elements, 0);
    const trajectory = propagated(elements);
    const span = 10 * DAY;
    const coarse = new ProperTime(trajectory, rateTerms, 0).between(0, span);
    // The step in use, found as the length of a piece of 64 steps.
    const half = trajectory.pieceStart(1) / 64 / 2;
    const path = new SteppedPath(half, new ForceModel(epoch, axes), position, velocity);
    const count = Math.ceil(span / half) + 2;
    path.growTo(count, () => true);
    const times = Float64Array.from({ length: count }, (_, i) => i * half);
    const table = new TableTrajectory(
      epoch,
      addSeconds(epoch, times.at(-1)!),
      times,
      path.statesOf(1).slice(0, 6 * count),
      axes,
      given,
    );
    const fine = new ProperTime(table, rateTerms, 0).between(0, span);
    for (const [k, value] of coarse.entries()) expect(Math.abs(value - fine[k]!)).toBeLessThan(1e-15);
  });

  it("gives the same numbers whether it grows at once or bit by bit", () => {
    const elements = orbitClasses["low 400 km, 51.6 deg"];
    const atOnce = new ProperTime(propagated(elements), rateTerms, 0);
    const byBits = new ProperTime(propagated(elements), rateTerms, 0);
    for (const t of [10, 5000, -7000, 20_000, -40_000]) byBits.between(0, t);
    expect(byBits.between(-40_000, 86_400)).toEqual(atOnce.between(-40_000, 86_400));
  });

  it("obeys the virial theorem under all its forces: 3 GM/(2 a) - 2 r.a' and the end term give the same time", () => {
    // Speed and monopole along any path: -(v^2/2 + GM/r) = -(3 GM/(2 a) - 2 r.a') - 2 d(r.v)/dt, a' the disturbing part.
    const elements = orbitClasses["low 400 km, 51.6 deg"];
    const { position, velocity } = twoBodyState(elements, 0);
    const start = Float64Array.from([...position, ...velocity, 0]);
    const end = 40_000;
    const y = integrate(
      system((r, v, a) => {
        const central = -GM_EARTH / norm(r) ** 3;
        const disturbing: Vec3 = [a[0] - central * r[0], a[1] - central * r[1], a[2] - central * r[2]];
        return (3 * GM_EARTH) / (2 * osculatingElements(r, v).semiMajorAxis) - 2 * dot(r, disturbing);
      }),
      start,
      0,
      end,
      100,
    );
    const product = (s: Float64Array): number => s[0]! * s[3]! + s[1]! * s[4]! + s[2]! * s[5]!;
    const closed = LG * end - y[6]! / C2 + endTerm(product(y) - product(start));
    const wanted = rateTerms.filter(({ term }) => ["earth-monopole", "reference-surface"].includes(term));
    const secondOrder = {
      ...rateTerms[0]!,
      rate: ({ speedSquared }: { speedSquared: number }) => -speedSquared / (2 * C2),
    };
    const integral = sum(new ProperTime(propagated(elements), [secondOrder, ...wanted], 0).between(0, end));
    expect(Math.abs(integral - closed)).toBeLessThan(1e-15);
  });
});
