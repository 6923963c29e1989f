import { ChebyshevBasis } from "./chebyshev.ts";

/**
 * A smooth vector function of time, kept as Chebyshev series on segments of fixed length that start at multiples of
 * that length. The segments are absolute, so a value never depends on who asked before.
 */
export class TabulatedFunction {
  readonly #dimension: number;
  readonly #length: number;
  readonly #basis: ChebyshevBasis;
  readonly #compute: (t: number) => readonly number[];
  readonly #segments = new Map<number, Float64Array>();
  #lastIndex = Number.NaN;
  #last: Float64Array = new Float64Array(0);

  constructor(dimension: number, segmentLength: number, degree: number, compute: (t: number) => readonly number[]) {
    this.#dimension = dimension;
    this.#length = segmentLength;
    this.#basis = new ChebyshevBasis(degree);
    this.#compute = compute;
  }

  /** Writes the values at t to `out`, and the derivatives to `rates` when it is given. */
  evaluate(t: number, out: Float64Array, rates?: Float64Array): void {
    const index = Math.floor(t / this.#length);
    const c = index === this.#lastIndex ? this.#last : this.#segment(index);
    const x = 2 * (t / this.#length - index) - 1;
    if (rates === undefined && this.#dimension === 3) evaluateThree(c, this.#basis.count, 2 * x, out);
    else this.#evaluateWithRates(c, x, out, rates);
  }

  #evaluateWithRates(c: Float64Array, x: number, out: Float64Array, rates?: Float64Array): void {
    const n = this.#basis.count;
    const size = this.#dimension;
    for (let d = 0; d < size; d++) {
      let b1 = 0;
      let b2 = 0;
      let d1 = 0;
      let d2 = 0;
      for (let j = n - 1; j > 0; j--) {
        const slope = 2 * b1 + 2 * x * d1 - d2;
        d2 = d1;
        d1 = slope;
        const b = 2 * x * b1 - b2 + c[size * j + d]!;
        b2 = b1;
        b1 = b;
      }
      out[d] = x * b1 - b2 + c[d]!;
      if (rates) rates[d] = ((b1 + x * d1 - d2) * 2) / this.#length;
    }
  }

  #segment(index: number): Float64Array {
    let c = this.#segments.get(index);
    if (c === undefined) {
      c = this.#build(index);
      if (this.#segments.size >= 4096) this.#segments.clear();
      this.#segments.set(index, c);
    }
    this.#lastIndex = index;
    this.#last = c;
    return c;
  }

  #build(index: number): Float64Array {
    const n = this.#basis.count;
    const samples = Array.from(this.#basis.points, (x) => this.#compute((index + (x + 1) / 2) * this.#length));
    const size = this.#dimension;
    const all = new Float64Array(size * n);
    for (let d = 0; d < size; d++) {
      const one = this.#basis.coefficients(Float64Array.from(samples, (sample) => sample[d]!));
      for (let j = 0; j < n; j++) all[size * j + d] = one[j]!;
    }
    return all;
  }
}

/** Three series side by side (Clenshaw): their sums do not wait for each other. */
function evaluateThree(c: Float64Array, count: number, twice: number, out: Float64Array): void {
  let x1 = 0;
  let x2 = 0;
  let y1 = 0;
  let y2 = 0;
  let z1 = 0;
  let z2 = 0;
  for (let j = 3 * (count - 1); j > 0; j -= 3) {
    const x = twice * x1 - x2 + c[j]!;
    const y = twice * y1 - y2 + c[j + 1]!;
    const z = twice * z1 - z2 + c[j + 2]!;
    x2 = x1;
    x1 = x;
    y2 = y1;
    y1 = y;
    z2 = z1;
    z1 = z;
  }
  const half = twice / 2;
  out[0] = half * x1 - x2 + c[0]!;
  out[1] = half * y1 - y2 + c[1]!;
  out[2] = half * z1 - z2 + c[2]!;
}
