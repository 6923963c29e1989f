import { describe, expect, it } from "vitest";
import { oblateness, oblatenessRadius } from "../../src/bodies/index.ts";
import { cross, dot, norm, type Vec3 } from "../../src/numeric/index.ts";
import { type KeplerianElements, osculatingElements, twoBodyState } from "../../src/orbit/index.ts";
import { TableTrajectory } from "../../src/orbit/table.ts";
import { endTerm, ProperTime, rateTerms, secularMeanRate, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { addSeconds } from "../../src/time/index.ts";
import { C2, DAY, DEGREE, GM_EARTH, LG } from "../../src/units/index.ts";
import { type Derivative, integrate } from "../support/extrapolation.ts";
import { axes, epoch, orbitClasses, tabulate, twoBodyTrajectory } from "../support/orbits.ts";

/** Numerical error of an accumulated term over ten days, s: the issue asks 0.1 ps; the target is 1e-5 ps. */
const tenDayError = 1e-17;

/** The velocity term to c^-2 only, which is what the closed forms are exact for. */
const velocityToSecondOrder = {
  ...rateTerms.find(({ term }) => term === "velocity")!,
  rate: ({ speedSquared }: { speedSquared: number }) => -speedSquared / (2 * C2),
};
const monopole = rateTerms.find(({ term }) => term === "earth-monopole")!;
const surface = rateTerms.find(({ term }) => term === "reference-surface")!;
const oblatenessTerm = rateTerms.find(({ term }) => term === "earth-oblateness")!;
const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);

function productAt(elements: KeplerianElements, t: number): number {
  const { position, velocity } = twoBodyState(elements, t);
  return dot(position, velocity);
}

const closed = (elements: KeplerianElements, from: number, to: number): number =>
  twoBodyMeanRate(elements.semiMajorAxis) * (to - from) + endTerm(productAt(elements, to) - productAt(elements, from));

describe("two-body closed form: virial theorem and energy, exact to c^-2", () => {
  it.each(Object.entries(orbitClasses))("%s: the integral over ten days", (_, elements) => {
    const properTime = new ProperTime(twoBodyTrajectory(elements), [velocityToSecondOrder, monopole, surface], 0);
    for (const [from, to] of [
      [0, 10 * DAY],
      [12_345.678, 777_777.7],
      [-3 * DAY, 2.5 * DAY],
    ] as const) {
      expect(Math.abs(sum(properTime.between(from, to)) - closed(elements, from, to))).toBeLessThan(tenDayError);
    }
  });

  const steps = {
    "low 400 km, 51.6 deg": 60,
    "12 h, 55 deg": 300,
    geostationary: 900,
    "e = 0.74, 63.4 deg": 60,
    "lunar transfer": 60,
  };
  it.each(Object.entries(orbitClasses))("%s: the same along a table of states", (name, elements) => {
    const { times, states } = tabulate((t) => twoBodyState(elements, t), steps[name as keyof typeof steps], 10 * DAY);
    const table = new TableTrajectory(epoch, addSeconds(epoch, times.at(-1)!), times, states, axes, {
      notices: [],
      implausible: false,
    });
    const properTime = new ProperTime(table, [velocityToSecondOrder, monopole, surface], 0);
    const error = Math.abs(sum(properTime.between(0, 10 * DAY)) - closed(elements, 0, 10 * DAY));
    expect(error).toBeLessThan(1e-15);
    // The table's own estimate of its error covers the true one.
    expect(error).toBeLessThan(table.interpolationError(0, 10 * DAY) + 1e-16);
  });

  it.each(Object.entries(orbitClasses))("%s: the exact velocity term adds its c^-4 mean", (_, elements) => {
    const exact = rateTerms.find(({ term }) => term === "velocity")!;
    const properTime = new ProperTime(twoBodyTrajectory(elements), [exact, velocityToSecondOrder], 0);
    const period = 2 * Math.PI * Math.sqrt(elements.semiMajorAxis ** 3 / GM_EARTH);
    const [whole, second] = properTime.between(0, period);
    const speed2 = GM_EARTH / elements.semiMajorAxis;
    // -(GM/a)^2 (4/sqrt(1 - e^2) - 3)/(8 c^4), physics of the two-body mean of v^4.
    const mean = (-(speed2 * speed2) * (4 / Math.sqrt(1 - elements.eccentricity ** 2) - 3)) / (8 * C2 * C2);
    expect(whole! - second!).toBeCloseTo(mean * period, 20);
    expect(Math.abs((whole! - second!) / (mean * period) - 1)).toBeLessThan(1e-3);
  });
});

/** Monopole and J2 about the pole of date, with the exact form's integrand and the direct one carried along. */
function j2System(): Derivative {
  return (t, y, out) => {
    const r: Vec3 = [y[0]!, y[1]!, y[2]!];
    const v: Vec3 = [y[3]!, y[4]!, y[5]!];
    const rotation = axes.rotation(t);
    const pole: Vec3 = [rotation[6], rotation[7], rotation[8]];
    const distance = norm(r);
    const s = dot(r, pole) / distance;
    const k = (GM_EARTH * oblateness * oblatenessRadius ** 2) / distance ** 3;
    const potential = -k * (1.5 * s * s - 0.5); // U_2, IERS Conventions (2010) eq. 6.1 for n = 2, m = 0
    for (let i = 0; i < 3; i++) {
      out[i] = v[i]!;
      const radial = (-GM_EARTH / distance ** 2 + (k / distance) * (7.5 * s * s - 1.5)) * (r[i]! / distance);
      out[i + 3] = radial - ((3 * k * s) / distance) * pole[i]!;
    }
    const { semiMajorAxis } = osculatingElements(r, v);
    out[6] = (3 * GM_EARTH) / (2 * semiMajorAxis) + 7 * potential;
    out[7] = semiMajorAxis - y[8]!;
    out[8] = 0;
  };
}

describe("monopole and J2", () => {
  const inclinations = [51.6, 97.4, 0.01];

  it.each(inclinations)("the exact form between arbitrary ends to 0.01 ps a day, %d degrees", (inclination) => {
    const elements = {
      ...orbitClasses["low 400 km, 51.6 deg"],
      inclination: inclination * DEGREE,
      eccentricity: 0.003,
    };
    const first = twoBodyState(elements, 0);
    const f = j2System();
    let y: Float64Array = Float64Array.from([...first.position, ...first.velocity, 0, 0, 0]);
    const knots = [y];
    const step = 60;
    for (let t = 0; t < DAY; t += step) {
      y = integrate(f, y, t, t + step, step);
      knots.push(y);
    }
    const times = Float64Array.from(knots, (_, i) => i * step);
    const states = Float64Array.from(knots.flatMap((knot) => [...knot.subarray(0, 6)]));
    const table = new TableTrajectory(epoch, addSeconds(epoch, times.at(-1)!), times, states, axes, {
      notices: [],
      implausible: false,
    });
    const terms = [velocityToSecondOrder, monopole, oblatenessTerm, surface];
    const properTime = new ProperTime(table, terms, 0);
    const product = (knot: Float64Array): number => knot[0]! * knot[3]! + knot[1]! * knot[4]! + knot[2]! * knot[5]!;
    for (const [i, j] of [
      [0, 1440],
      [17, 1203],
      [700, 723],
    ] as const) {
      const [a, b] = [knots[i]!, knots[j]!];
      const dt = (j - i) * step;
      const exact = LG * dt - (b[6]! - a[6]!) / C2 + endTerm(product(b) - product(a));
      expect(Math.abs(sum(properTime.between(i * step, j * step)) - exact)).toBeLessThan(1e-14);
    }
  });

  it.each([
    [51.6, 0.5],
    [97.4, 0.5],
    [0.01, 1],
  ])("the mean rate to first order in J2, %d degrees, to %d ns a day", (inclination, tolerance) => {
    const elements = { ...orbitClasses["low 400 km, 51.6 deg"], inclination: inclination * DEGREE, eccentricity: 1e-4 };
    const first = twoBodyState(elements, 0);
    const f = j2System();
    const a0 = elements.semiMajorAxis;
    const turn = 2 * Math.PI * Math.sqrt(a0 ** 3 / GM_EARTH);
    let end = 45 * turn;
    let y = integrate(f, Float64Array.from([...first.position, ...first.velocity, 0, 0, a0]), 0, end, 300);
    // On to a whole number of revolutions, counted by the argument of latitude.
    for (let i = 0; i < 4; i++) {
      const behind = latitudeArgument(y) - latitudeArgument(Float64Array.from([...first.position, ...first.velocity]));
      const wait = (-Math.atan2(Math.sin(behind), Math.cos(behind)) / (2 * Math.PI)) * turn;
      y = integrate(f, y, end, end + wait, 300);
      end += wait;
    }
    const meanAxis = a0 + y[7]! / end;
    // The mean with the end term taken out, by the exact form whose test stands above.
    const meanRate = LG - y[6]! / C2 / end;
    // Inclination against the pole of date: the precession since 2000 would be 0.7 ns a day.
    const pole = axes.rotation(0).slice(6) as unknown as Vec3;
    const h = cross(first.position, first.velocity);
    const predicted = secularMeanRate(meanAxis, elements.eccentricity, Math.acos(dot(h, pole) / norm(h)));
    expect(Math.abs(meanRate - predicted) * DAY * 1e9).toBeLessThan(tolerance);
  });
});

/** Angle from the ascending node, rad (near the equator: from the x axis, which turns as little). */
function latitudeArgument(y: Float64Array): number {
  const h: Vec3 = [y[1]! * y[5]! - y[2]! * y[4]!, y[2]! * y[3]! - y[0]! * y[5]!, y[0]! * y[4]! - y[1]! * y[3]!];
  if (Math.hypot(h[0], h[1]) < 1e-3 * norm(h)) return Math.atan2(y[1]!, y[0]!);
  const node: Vec3 = [-h[1], h[0], 0];
  const r: Vec3 = [y[0]!, y[1]!, y[2]!];
  const across: Vec3 = [
    h[1] * node[2] - h[2] * node[1],
    h[2] * node[0] - h[0] * node[2],
    h[0] * node[1] - h[1] * node[0],
  ];
  return Math.atan2(dot(r, across) / norm(h), dot(r, node));
}
