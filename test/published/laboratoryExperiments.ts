import { lorentzFactor, lorentzRate } from "../../src/relativity/index.ts";
import { C2, DEGREE } from "../../src/units/index.ts";
import { lift, restingRate } from "./bench.ts";
import type { Row } from "./row.ts";

/** The speed, as a fraction of c, whose Lorentz factor is `gamma`: by halving on the project's own function. */
function speedOf(gamma: number): number {
  let slow = 0;
  let fast = 1;
  for (let i = 0; i < 60; i++) {
    const middle = (slow + fast) / 2;
    if (lorentzFactor(middle) < gamma) slow = middle;
    else fast = middle;
  }
  return slow;
}

/** How a lifetime stretches at that speed, by the rate that the velocity term uses. */
const stretch = (beta: number): number => 1 / (1 + lorentzRate(beta * beta * C2));

/** Clocks and decays in laboratories on the ground. */
export const laboratoryExperiments: readonly Row[] = [
  {
    id: "K13",
    what: "growth of rate with height, g/c^2",
    inputs: { g: 9.80665 },
    published: 1.09e-16,
    got: () => lift(9.80665, -5, 5) / 10,
    tolerance: 5e-19,
    unit: "1/m",
    source: "common practice, no source (IERS Conventions ch. 10 uses the same figure)",
    standing: "from memory",
    place: "orbit: surfaces at two heights; relativity: ProperTime.rates",
  },
  {
    id: "H09",
    what: "Pound and Rebka's tower, g h/c^2",
    inputs: { g: 9.81, h_m: 22.5 },
    published: 2.46e-15,
    got: () => lift(9.81, 0, 22.5),
    tolerance: 5e-18,
    unit: "1",
    source: "Pound & Rebka 1960",
    standing: "read",
    place: "orbit: surfaces at two heights where g = 9.81; relativity: ProperTime.rates",
    note: "The figure rests on g = 9.81.",
  },
  {
    id: "H10",
    what: "lifetime of stored muons, gamma tau0",
    inputs: { gamma: 29.33, tau0_us: 2.1948 },
    published: 64.368,
    got: () => stretch(Math.sqrt(1 - 1 / 29.33 ** 2)) * 2.1948,
    tolerance: 0.029,
    unit: "us",
    source: "Bailey et al. 1977, Nature 268, 301",
    standing: "read",
    place: "relativity: lorentzRate near the speed of light",
  },
  {
    id: "H11",
    what: "speed of the CERN muons over c",
    inputs: { gamma: 29.33 },
    published: 0.99942,
    got: () => speedOf(29.33),
    tolerance: 5e-6,
    unit: "1",
    source: "derived from the printed gamma",
    standing: "derived",
    place: "relativity: lorentzFactor, solved for the speed",
  },
  {
    id: "H12",
    what: "optical clock lifted by 33 cm",
    inputs: { h_m: 0.33, g: 9.796 },
    published: 4.1e-17,
    got: () => lift(9.796, 0, 0.33),
    tolerance: 1.6e-17,
    unit: "1",
    source: "Chou et al. 2010, Science 329, 1630",
    standing: "from memory",
    place: "orbit: surfaces at two heights where g = 9.796; relativity: ProperTime.rates",
  },
  {
    id: "H13",
    what: "rate at NIST Boulder, 1650 m above the geoid",
    inputs: { H_m: 1650, g: 9.797, latitudeDeg: 40, longitudeDeg: -105.26 },
    published: 1.8e-13,
    got: () => restingRate(40 * DEGREE, -105.26 * DEGREE, 1650, "geoid"),
    tolerance: 1e-15,
    unit: "1",
    source: "Pavlis & Weiss 2003, Metrologia 40, 66 (-1798.93e-16)",
    standing: "from memory",
    place: "orbit: a surface above the geoid; bodies: geoidHeight; relativity: ProperTime.rates",
    note: "Latitude and longitude from memory; gravity is the field's own.",
  },
];
