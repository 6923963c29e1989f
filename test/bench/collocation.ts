import { twoSum } from "../../src/numeric/index.ts";
import type { ForceModel } from "../../src/orbit/forces.ts";

/**
 * Gauss collocation of order 20 (ten stages) for r'' = a(t, r), as a reference: implicit, one step at a time, solved by
 * repetition until nothing changes. Position, velocity and what is carried along are kept as two-part numbers, so the
 * rounding of the sums is that of about 32 digits; each force is a double. Steps are powers of two, so that step times
 * velocity is exact. Source: Hairer, Norsett & Wanner, Solving Ordinary Differential Equations I (1993), II.7.
 */
const stages = 10;

/** Legendre's polynomial of degree n and its derivative at x. Source: Abramowitz & Stegun (1964), 22.7.10 and 22.8.5. */
function legendre(n: number, x: number): { value: number; slope: number } {
  let before = 1;
  let value = x;
  for (let k = 2; k <= n; k++) [before, value] = [value, ((2 * k - 1) * x * value - (k - 1) * before) / k];
  return { value, slope: (n * (before - x * value)) / (1 - x * x) };
}

/** Nodes on [0, 1], rising. */
const nodes = Float64Array.from({ length: stages }, (_, i) => {
  let x = -Math.cos((Math.PI * (i + 0.75)) / (stages + 0.5));
  for (let k = 0; k < 8; k++) {
    const { value, slope } = legendre(stages, x);
    x -= value / slope;
  }
  return (1 + x) / 2;
});
const nodeWeights = Float64Array.from(nodes, (c) => {
  const x = 2 * c - 1;
  return 1 / ((1 - x * x) * legendre(stages, x).slope ** 2);
});

/** Lagrange's polynomial of node j at c. */
function lagrange(j: number, c: number): number {
  let product = 1;
  for (let k = 0; k < stages; k++) if (k !== j) product *= (c - nodes[k]!) / (nodes[j]! - nodes[k]!);
  return product;
}

/** Integrals of Lagrange's polynomials from 0 to each node, by the rule itself, which is exact for them. */
const once = new Float64Array(stages * stages);
/** The same twice. */
const twice = new Float64Array(stages * stages);
for (let i = 0; i < stages; i++) {
  for (let j = 0; j < stages; j++) {
    const c = nodes[i]!;
    for (let k = 0; k < stages; k++) {
      const share = c * nodeWeights[k]! * lagrange(j, c * nodes[k]!);
      once[stages * i + j]! += share;
      twice[stages * i + j]! += share * (c - c * nodes[k]!);
    }
  }
}

/** Where and how fast the satellite is at a stage, and what time it is there. */
export type Stage = (t: number, state: Float64Array) => readonly number[];

class TwoPartSum {
  readonly high: Float64Array;
  readonly low: Float64Array;

  constructor(values: ArrayLike<number>) {
    this.high = Float64Array.from(values);
    this.low = new Float64Array(values.length);
  }

  add(k: number, value: number): void {
    const s = twoSum(this.high[k]!, value);
    const t = twoSum(s.high, s.low + this.low[k]!);
    this.high[k] = t.high;
    this.low[k] = t.low;
  }
}

/** Integrals of `carried` (so many numbers) along the path from 0 to count * step. */
export function integrateAlong(
  force: ForceModel,
  position: ArrayLike<number>,
  velocity: ArrayLike<number>,
  step: number,
  count: number,
  size: number,
  carried: Stage,
): Float64Array {
  const r = new TwoPartSum(position);
  const v = new TwoPartSum(velocity);
  const sums = new TwoPartSum(new Float64Array(size));
  const a = new Float64Array(3 * stages);
  const moments = Array.from(nodes, () => force.moment(0));
  const state = new Float64Array(6);
  const tried = new Float64Array(3);
  const offset = (weights: Float64Array, i: number, d: number): number => {
    let sum = 0;
    for (let j = 0; j < stages; j++) sum += weights[stages * i + j]! * a[3 * j + d]!;
    return sum;
  };
  const place = (i: number, d: number): number =>
    r.high[d]! + (step * nodes[i]! * v.high[d]! + step * step * offset(twice, i, d) + r.low[d]!);
  for (let n = 0; n < count; n++) {
    for (let i = 0; i < stages; i++) force.moment((n + nodes[i]!) * step, moments[i]!);
    let before = Number.POSITIVE_INFINITY;
    for (let round = 0; round < 60; round++) {
      let change = 0;
      for (let i = 0; i < stages; i++) {
        const old = a[3 * i]! + a[3 * i + 1]! + a[3 * i + 2]!;
        for (let d = 0; d < 3; d++) tried[d] = place(i, d);
        force.acceleration(moments[i]!, tried[0]!, tried[1]!, tried[2]!, a, 3 * i);
        change = Math.max(change, Math.abs(a[3 * i]! + a[3 * i + 1]! + a[3 * i + 2]! - old));
      }
      if (change === 0 || (change < 1e-12 && change >= before)) break;
      before = change;
    }
    for (let i = 0; i < stages; i++) {
      for (let d = 0; d < 3; d++) {
        state[d] = place(i, d);
        state[d + 3] = v.high[d]! + (step * offset(once, i, d) + v.low[d]!);
      }
      const rates = carried((n + nodes[i]!) * step, state);
      for (let k = 0; k < size; k++) sums.add(k, step * nodeWeights[i]! * rates[k]!);
    }
    for (let d = 0; d < 3; d++) {
      let first = 0;
      let second = 0;
      for (let j = 0; j < stages; j++) {
        first += nodeWeights[j]! * a[3 * j + d]!;
        second += nodeWeights[j]! * (1 - nodes[j]!) * a[3 * j + d]!;
      }
      r.add(d, step * v.high[d]!);
      r.add(d, step * v.low[d]! + step * step * second);
      v.add(d, step * first);
    }
  }
  return sums.high;
}
