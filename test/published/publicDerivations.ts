import { lorentzRate, ProperTime, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { DAY } from "../../src/units/index.ts";
import { termsNamed, twoBodyTable } from "./bench.ts";
import type { Row } from "./row.ts";

/** Gravitation alone, against the geoid, on a circular orbit. */
function gravityAgainstGeoid(semiMajorAxis: number): number {
  const shape = { eccentricity: 0, inclination: 0.96, node: 0, perigeeArgument: 0, meanAnomaly: 0 };
  const table = twoBodyTable({ semiMajorAxis, ...shape }, 300, 13);
  const time = new ProperTime(table, termsNamed("earth-monopole", "reference-surface"), 0);
  return time.rates(1800).reduce((sum, rate) => sum + rate);
}

/** How much lower an orbit must be for a change of its rate: by halving on the mean rate, m. */
function lowering(semiMajorAxis: number, change: number): number {
  const wanted = twoBodyMeanRate(semiMajorAxis) + change;
  let low = 0;
  let high = 1e6;
  while (high - low > 1e-3) {
    const middle = (low + high) / 2;
    if (twoBodyMeanRate(semiMajorAxis - middle) > wanted) low = middle;
    else high = middle;
  }
  return low;
}

/** Figures for GPS that are derived in public and in the literature. */
export const publicDerivations: readonly Row[] = [
  {
    id: "G07",
    what: "velocity part at 3874 m/s",
    inputs: { v: 3874 },
    published: -7214,
    got: () => lorentzRate(3874 * 3874) * DAY * 1e9,
    tolerance: 1,
    unit: "ns/day",
    source: 'public derivation (encyclopaedia "Error analysis for GPS")',
    standing: "read",
    place: "relativity: lorentzRate",
  },
  {
    id: "G08",
    what: "gravity part, L_G - GM/(a c^2)",
    inputs: { a_m: 26_561_400 },
    published: 45.8,
    got: () => gravityAgainstGeoid(26_561_400) * DAY * 1e6,
    tolerance: 0.1,
    unit: "us/day",
    source: "common figure 45.7-45.9 (Nelson 1999 45.9; encyclopaedia 45.85 with polar radius)",
    standing: "read",
    place: "relativity: ProperTime.rates, terms earth-monopole and reference-surface",
    note: "The published figures differ by what they take as the ground.",
  },
  {
    id: "G16",
    what: "SV43 in July 2000, lowering for -1.77e-13",
    inputs: { dff: -1.77e-13, a_m: 26_561_400 },
    published: 18.77,
    got: () => lowering(26_561_400, -1.77e-13) / 1000,
    tolerance: 0.1,
    unit: "km",
    source: "derived from the two printed numbers of the same abstract",
    standing: "derived",
    place: "relativity: twoBodyMeanRate, solved for the axis",
    note: "The abstract as stored prints 10^-3 for 10^-13; the magnitude is from memory.",
  },
];
