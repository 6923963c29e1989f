import { antiderivative, ChebyshevBasis, evaluateSeries } from "../numeric/index.ts";
import type { ForceModel, ForceMoment } from "./forces.ts";

/**
 * Fixed-step multistep integration of r'' = a(t, r) in summed form (Gauss-Jackson): the sums of accelerations are
 * carried with compensation, so rounding does not build up. The start comes from Picard iteration on a Chebyshev series.
 * Source: Berry & Healy (2004), J. Astronaut. Sci. 52, 331 (the summed form); coefficients from the power series of
 * 1/ln(1 - x), computed below.
 */
const order = 12;
const half = order / 2;
const window = order + 1;

/** Power series of x / -ln(1 - x): coefficients of the first sum. */
function firstSumSeries(): number[] {
  const out: number[] = [1];
  for (let n = 1; n <= order + 2; n++) {
    let sum = 0;
    for (let k = 1; k <= n; k++) sum += out[n - k]! / (k + 1);
    out.push(-sum);
  }
  return out;
}

function square(series: readonly number[]): number[] {
  return series.map((_, n) => {
    let sum = 0;
    for (let k = 0; k <= n; k++) sum += series[k]! * series[n - k]!;
    return sum;
  });
}

/** Backward differences 0 to `order` with these weights, rewritten for the accelerations themselves, newest first. */
function ordinates(differenceWeights: readonly number[]): Float64Array {
  const out = new Float64Array(window);
  for (let j = 0; j <= order; j++) {
    let binomial = 1;
    for (let i = 0; i <= j; i++) {
      out[i]! += (i % 2 === 0 ? 1 : -1) * binomial * differenceWeights[j]!;
      binomial = (binomial * (j - i)) / (i + 1);
    }
  }
  return out;
}

const first = firstSumSeries();
const second = square(first);
const running = second.map((_, n) => second.slice(0, n + 1).reduce((a, b) => a + b, 0));
const velocityWeights = ordinates(first.slice(1));
const positionWeights = ordinates(second.slice(2));
const predictorWeights = ordinates(running.slice(2));

/** Grows in one direction of time from the epoch; step `h` is signed. States of step i are at 6 i in `states`. */
class Branch {
  readonly #h: number;
  readonly #force: ForceModel;
  readonly #moment: ForceMoment;
  /** The last accelerations, oldest first, from #oldest on; moved to the front when the end is reached. */
  readonly #accelerations = new Float64Array(3 * window * 16);
  #oldest = 0;
  /** First and second sums with their compensations: x, y, z each. */
  readonly #sum1 = new Float64Array(6);
  readonly #sum2 = new Float64Array(6);
  readonly #trial = new Float64Array(3);
  readonly #weighted = new Float64Array(3);
  states: Float64Array;
  count: number;
  ended = false;

  constructor(h: number, force: ForceModel, start: Float64Array) {
    this.#h = h;
    this.#force = force;
    this.#moment = force.moment(0);
    this.states = new Float64Array(6 * 256);
    this.count = half + 1;
    this.states.set(start.subarray(6 * half, 6 * window));
    for (let i = 0; i < window; i++) {
      force.moment((i - half) * h, this.#moment);
      const s = 6 * i;
      force.acceleration(this.#moment, start[s]!, start[s + 1]!, start[s + 2]!, this.#accelerations, 3 * i);
    }
    const last = 6 * order;
    this.#weigh(velocityWeights);
    for (let d = 0; d < 3; d++) this.#sum1[d] = start[last + 3 + d]! / h - this.#weighted[d]!;
    this.#weigh(positionWeights);
    for (let d = 0; d < 3; d++) {
      this.#sum2[d] = start[last + d]! / (h * h) - this.#weighted[d]! + this.#sum1[d]!;
    }
  }

  /** Writes the sum of the last accelerations with these weights (newest first), x, y and z, to #weighted. */
  #weigh(weights: Float64Array): void {
    const accelerations = this.#accelerations;
    let x = 0;
    let y = 0;
    let z = 0;
    let at = this.#oldest;
    for (let i = order; i >= 0; i--) {
      const weight = weights[i]!;
      x += weight * accelerations[at]!;
      y += weight * accelerations[at + 1]!;
      z += weight * accelerations[at + 2]!;
      at += 3;
    }
    this.#weighted[0] = x;
    this.#weighted[1] = y;
    this.#weighted[2] = z;
  }

  /** Writes the position that the second sums and the weighted accelerations give to #trial. */
  #place(weights: Float64Array): void {
    this.#weigh(weights);
    const h2 = this.#h * this.#h;
    for (let d = 0; d < 3; d++) {
      this.#trial[d] = h2 * (this.#sum2[d]! + (this.#sum2[d + 3]! + this.#weighted[d]!));
    }
  }

  /** One step further: predict, evaluate, correct, evaluate. */
  advance(): void {
    const h = this.#h;
    const trial = this.#trial;
    const accelerations = this.#accelerations;
    this.#place(predictorWeights);
    const n = this.count;
    this.#force.moment(n * h, this.#moment);
    this.#oldest += 3;
    if (this.#oldest + 3 * window > accelerations.length) {
      accelerations.copyWithin(0, this.#oldest);
      this.#oldest = 0;
    }
    const newest = this.#oldest + 3 * order;
    this.#force.acceleration(this.#moment, trial[0]!, trial[1]!, trial[2]!, accelerations, newest);
    this.#place(positionWeights);
    this.#force.acceleration(this.#moment, trial[0]!, trial[1]!, trial[2]!, accelerations, newest);
    if (6 * (n + 1) > this.states.length) {
      const grown = new Float64Array(2 * this.states.length);
      grown.set(this.states);
      this.states = grown;
    }
    this.#weigh(velocityWeights);
    const at = 6 * n;
    for (let d = 0; d < 3; d++) {
      accumulate(this.#sum1, d, accelerations[newest + d]!);
      this.states[at + d] = trial[d]!;
      this.states[at + 3 + d] = h * (this.#sum1[d]! + (this.#sum1[d + 3]! + this.#weighted[d]!));
      accumulate(this.#sum2, d, this.#sum1[d]!);
      this.#sum2[d + 3]! += this.#sum1[d + 3]!;
    }
    this.count = n + 1;
  }
}

/** Adds to a sum whose rounding error is kept three places further on. */
function accumulate(sums: Float64Array, d: number, value: number): void {
  const before = sums[d]!;
  const after = before + value;
  const part = after - before;
  sums[d] = after;
  sums[d + 3]! += before - (after - part) + (value - part);
}

/** States at -half ... +half steps about the epoch. */
function start(h: number, force: ForceModel, position: ArrayLike<number>, velocity: ArrayLike<number>): Float64Array {
  const reach = half * h;
  const basis = new ChebyshevBasis(40);
  const n = basis.count;
  const times = Array.from(basis.points, (x) => x * reach);
  const moments = times.map((t) => force.moment(t));
  const guess = [0, 1, 2].map((d) => Float64Array.from(times, (t) => position[d]! + velocity[d]! * t));
  let velocities: Float64Array[] = [];
  let positions: Float64Array[] = [];
  const acceleration = new Float64Array(3);
  const samples = [0, 1, 2].map(() => new Float64Array(n));
  let before = Number.POSITIVE_INFINITY;
  for (let iteration = 0; iteration < 60; iteration++) {
    for (let k = 0; k < n; k++) {
      force.acceleration(moments[k]!, guess[0]![k]!, guess[1]![k]!, guess[2]![k]!, acceleration, 0);
      for (let d = 0; d < 3; d++) samples[d]![k] = acceleration[d]!;
    }
    // dv and dr: the integral of a, and of that, both zero at the epoch (x = 0).
    velocities = samples.map((values) => fromMiddle(basis.coefficients(values)));
    positions = velocities.map(fromMiddle);
    let change = 0;
    for (let d = 0; d < 3; d++) {
      for (let k = 0; k < n; k++) {
        const x = basis.points[k]!;
        const next = position[d]! + velocity[d]! * times[k]! + evaluateSeries(positions[d]!, x) * reach * reach;
        change = Math.max(change, Math.abs(next - guess[d]![k]!));
        guess[d]![k] = next;
      }
    }
    if (change === 0 || (change < 1e-6 && change >= before)) break;
    before = change;
  }
  const out = new Float64Array(6 * window);
  for (let i = 0; i < window; i++) {
    const x = (i - half) / half;
    for (let d = 0; d < 3; d++) {
      out[6 * i + d] = position[d]! + velocity[d]! * x * reach + evaluateSeries(positions[d]!, x) * reach * reach;
      out[6 * i + 3 + d] = velocity[d]! + evaluateSeries(velocities[d]!, x) * reach;
    }
  }
  return out;
}

/** The antiderivative that is zero at x = 0. */
function fromMiddle(c: Float64Array): Float64Array {
  const integral = antiderivative(c);
  integral[0]! -= evaluateSeries(integral, 0);
  return integral;
}

/** A path on a lattice of times i * step about the epoch, grown on demand in both directions. */
export class SteppedPath {
  readonly step: number;
  readonly #forward: Branch;
  readonly #backward: Branch;

  /** position and velocity at the epoch in m and m/s; step in seconds, positive. */
  constructor(step: number, force: ForceModel, position: ArrayLike<number>, velocity: ArrayLike<number>) {
    this.step = step;
    const states = start(step, force, position, velocity);
    this.#forward = new Branch(step, force, states);
    const reversed = new Float64Array(states.length);
    for (let i = 0; i < window; i++) reversed.set(states.subarray(6 * i, 6 * i + 6), 6 * (order - i));
    this.#backward = new Branch(-step, force, reversed);
  }

  /**
   * Grows the path towards step `index`, as long as `belongs` accepts each new state (its array and place). A state that
   * is not accepted is not kept, and the path ends before it for good. Gives the last step that there is on that side.
   */
  growTo(index: number, belongs: (states: Float64Array, at: number) => boolean): number {
    const branch = index >= 0 ? this.#forward : this.#backward;
    while (!branch.ended && branch.count <= Math.abs(index)) {
      branch.advance();
      if (belongs(branch.states, 6 * (branch.count - 1))) continue;
      branch.count--;
      branch.ended = true;
    }
    const last = branch.ended ? Math.min(branch.count - 1, Math.abs(index)) : Math.abs(index);
    return index >= 0 ? last : -last;
  }

  /** The array that holds a step and the place of its first element. */
  statesOf(index: number): Float64Array {
    return index >= 0 ? this.#forward.states : this.#backward.states;
  }
}
