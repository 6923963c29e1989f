import { dot } from "../../src/numeric/index.ts";
import { type KeplerianElements, twoBodyState } from "../../src/orbit/index.ts";
import { endTerm, ProperTime, rateTerms, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { C2, DAY } from "../../src/units/index.ts";
import { orbitClasses, twoBodyTrajectory } from "../support/orbits.ts";
import { plain, type Row } from "./measure.ts";

const span = 10 * DAY;
const [velocity, monopole, surface] = ["velocity", "earth-monopole", "reference-surface"].map(
  (name) => rateTerms.find(({ term }) => term === name)!,
);
/** What the closed form is exact for. */
const velocityToSecondOrder = {
  ...velocity!,
  rate: ({ speedSquared }: { speedSquared: number }) => -speedSquared / (2 * C2),
};

function error(elements: KeplerianElements): number {
  const terms = [velocityToSecondOrder, monopole!, surface!];
  const integral = new ProperTime(twoBodyTrajectory(elements), terms, 0).between(0, span);
  const product = (t: number): number => {
    const { position, velocity } = twoBodyState(elements, t);
    return dot(position, velocity);
  };
  const closed = twoBodyMeanRate(elements.semiMajorAxis) * span + endTerm(product(span) - product(0));
  return Math.abs(integral.reduce((a, b) => a + b, 0) - closed) * 1e12;
}

/** ACC-K: the integral along undisturbed orbits against what the virial theorem gives in closed form. */
export function keplerClosedForm(): Row[] {
  const errors = Object.values(orbitClasses).map(error);
  const worst = Math.max(...errors);
  return [
    {
      id: "ACC-K",
      definition: "integral / Kepler closed form, five orbits, 10 days",
      reached: `${plain(worst)} ps`,
      target: "1e-5 ps",
      met: worst <= 1e-5,
      spread: `best orbit ${plain(Math.min(...errors))}`,
    },
  ];
}
