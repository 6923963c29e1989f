import { ForceModel } from "../../src/orbit/forces.ts";
import { type KeplerianElements, twoBodyState } from "../../src/orbit/index.ts";
import { PropagatedTrajectory } from "../../src/orbit/propagated.ts";
import { EnvironmentReader } from "../../src/relativity/environment.ts";
import { ProperTime, rateTerms } from "../../src/relativity/index.ts";
import { DAY } from "../../src/units/index.ts";
import { axes, epoch, orbitClasses, twoBodyTrajectory } from "../support/orbits.ts";
import { integrateAlong } from "./collocation.ts";
import { plain, type Row } from "./measure.ts";

const span = 10 * DAY;
/** Of the reference, s, in the order of the orbits: powers of two that divide ten days. */
const steps = [64, 256, 256, 64, 32];

const given = { orbitError: null, notices: [], implausible: false };

/** Every term after ten days by the reference: its own path and its own quadrature, the project's forces and rates. */
function reference(elements: KeplerianElements, step: number): Float64Array {
  const { position, velocity } = twoBodyState(elements, 0);
  let here: Float64Array = new Float64Array(6);
  const path = { ...twoBodyTrajectory(elements), state: (_: number, out: Float64Array) => out.set(here) };
  const reader = new EnvironmentReader(path, new Set(["field", "sun", "moon"]));
  const rates = new Array<number>(rateTerms.length).fill(0);
  return integrateAlong(
    new ForceModel(epoch, axes),
    position,
    velocity,
    step,
    span / step,
    rates.length,
    (t, state) => {
      here = state;
      const environment = reader.read(t);
      for (const [k, term] of rateTerms.entries()) rates[k] = term.rate(environment);
      return rates;
    },
  );
}

function ours(elements: KeplerianElements): number[] {
  const { position, velocity } = twoBodyState(elements, 0);
  return new ProperTime(new PropagatedTrajectory(epoch, position, velocity, axes, given), rateTerms, 0).between(
    0,
    span,
  );
}

/** The largest difference of any term and of the total, ps. */
function apart(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const differences = rateTerms.map((_, k) => a[k]! - b[k]!);
  const total = differences.reduce((x, y) => x + y, 0);
  return Math.max(Math.abs(total), ...differences.map(Math.abs)) * 1e12;
}

/** ACC-P: a propagated state's time against a reference of order 20, one row an orbit. */
export function propagatedState(): Row[] {
  return Object.entries(orbitClasses).map(([name, elements], i) => {
    const start = performance.now();
    const best = reference(elements, steps[i]!);
    const seconds = (performance.now() - start) / 1000;
    const half = reference(elements, steps[i]! / 2);
    const error = apart(ours(elements), best);
    return {
      id: "ACC-P",
      definition: `${name}: propagated / order 20, 10 days, worst term`,
      reached: `${plain(error)} ps`,
      target: "1e-3 ps",
      met: error <= 1e-3,
      spread: `reference, half its step: ${plain(apart(best, half))} ps; ran ${plain(seconds)} s`,
    };
  });
}
