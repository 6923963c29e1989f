import { lorentzFactor, lorentzRate } from "../../src/relativity/index.ts";
import { C2 } from "../../src/units/index.ts";
import type { Row } from "./row.ts";

/** gamma - 1 over beta^2/2, less one: from the rate 1/gamma - 1, which keeps its digits at small speeds. */
function beyondFirstOrder(beta: number): number {
  const rate = lorentzRate(beta * beta * C2);
  return -rate / (1 + rate) / ((beta * beta) / 2) - 1;
}

/** Identities of special relativity. */
export const specialRelativity: readonly Row[] = [
  {
    id: "R01",
    what: "gamma at beta 0.6 and 0.8",
    inputs: { beta: [0.6, 0.8] },
    published: [1.25, 1.6666666666666667],
    got: () => [lorentzFactor(0.6), lorentzFactor(0.8)],
    tolerance: 1e-15,
    unit: "1",
    source: "textbook closed forms (Einstein 1905; Rindler; Taylor & Wheeler)",
    standing: "identity",
    place: "relativity: lorentzFactor",
  },
  {
    id: "R11",
    what: "(gamma - 1)/(beta^2/2) - 1 at a GPS speed",
    inputs: { beta: 1.292e-5 },
    published: 1.25e-10,
    got: () => beyondFirstOrder(1.292e-5),
    tolerance: 2e-12,
    unit: "1",
    source: "expansion of gamma",
    standing: "identity",
    place: "relativity: lorentzRate at small speeds",
    note: "gamma - 1 evaluated directly in doubles would keep no digit of it.",
  },
];
