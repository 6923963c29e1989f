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
    const c = this.#segment(index);
    const n = this.#basis.count;
    const x = 2 * (t / this.#length - index) - 1;
    for (let d = 0; d < this.#dimension; d++) {
      const first = d * n;
      let b1 = 0;
      let b2 = 0;
      let d1 = 0;
      let d2 = 0;
      for (let j = first + n - 1; j > first; j--) {
        if (rates) {
          const slope = 2 * b1 + 2 * x * d1 - d2;
          d2 = d1;
          d1 = slope;
        }
        const b = 2 * x * b1 - b2 + c[j]!;
        b2 = b1;
        b1 = b;
      }
      out[d] = x * b1 - b2 + c[first]!;
      if (rates) rates[d] = ((b1 + x * d1 - d2) * 2) / this.#length;
    }
  }

  #segment(index: number): Float64Array {
    if (index === this.#lastIndex) return this.#last;
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
    const all = new Float64Array(this.#dimension * n);
    for (let d = 0; d < this.#dimension; d++) {
      all.set(this.#basis.coefficients(samples.map((sample) => sample[d]!)), d * n);
    }
    return all;
  }
}
