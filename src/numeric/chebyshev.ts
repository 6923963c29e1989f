/**
 * Chebyshev series on [-1, 1] from values at the Chebyshev points of the first kind, and their antiderivatives in
 * closed form. Source: Mason & Handscomb, Chebyshev Polynomials (2003), sections 2.4.4 and 4.6.
 */
export class ChebyshevBasis {
  readonly count: number;
  /** Points in [-1, 1], falling. */
  readonly points: Float64Array;
  readonly #cosines: Float64Array;

  constructor(degree: number) {
    const n = degree + 1;
    this.count = n;
    this.points = Float64Array.from({ length: n }, (_, k) => Math.cos((Math.PI * (k + 0.5)) / n));
    this.#cosines = Float64Array.from({ length: n * n }, (_, i) => {
      const j = Math.floor(i / n);
      return ((j === 0 ? 1 : 2) / n) * Math.cos((Math.PI * j * ((i % n) + 0.5)) / n);
    });
  }

  /** Coefficients c_0 ... c_degree (c_0 not halved) of the interpolant through `values` at `points`. */
  coefficients(values: Float64Array): Float64Array {
    const out = new Float64Array(this.count);
    this.coefficientsInto(values, 0, out, 0);
    return out;
  }

  /** The same from values[from ..] to out[at ..]. */
  coefficientsInto(values: Float64Array, from: number, out: Float64Array, at: number): void {
    for (let j = 0; j < this.count; j++) out[at + j] = this.coefficient(j, values, from);
  }

  /** Coefficient j alone. */
  coefficient(j: number, values: Float64Array, from: number): number {
    const n = this.count;
    const cosines = this.#cosines;
    const row = j * n;
    let sum = 0;
    for (let k = 0; k < n; k++) sum += cosines[row + k]! * values[from + k]!;
    return sum;
  }
}

/** Coefficients of the antiderivative that is zero at x = -1; one more than given. */
export function antiderivative(c: Float64Array): Float64Array {
  const out = new Float64Array(c.length + 1);
  antiderivativeInto(c, 0, c.length, 1, out, 0);
  return out;
}

/** The same of `scale` times the n coefficients at c[from ..], n + 1 of them to out[at ..]. */
export function antiderivativeInto(
  c: Float64Array,
  from: number,
  n: number,
  scale: number,
  out: Float64Array,
  at: number,
): void {
  let atMinusOne = 0;
  // c_0 is not halved, so it counts twice.
  let before = 2 * scale * c[from]!;
  let here = n > 1 ? scale * c[from + 1]! : 0;
  for (let j = 1; j <= n; j++) {
    const after = j + 1 < n ? scale * c[from + j + 1]! : 0;
    const value = (before - after) / (2 * j);
    out[at + j] = value;
    atMinusOne += j % 2 === 0 ? value : -value;
    before = here;
    here = after;
  }
  out[at] = -atMinusOne;
}

/** Value of a series at x in [-1, 1] (Clenshaw). */
export function evaluateSeries(c: Float64Array, x: number, offset = 0, count = c.length): number {
  const twice = 2 * x;
  let b1 = 0;
  let b2 = 0;
  for (let j = offset + count - 1; j > offset; j--) {
    const b = twice * b1 - b2 + c[j]!;
    b2 = b1;
    b1 = b;
  }
  return x * b1 - b2 + c[offset]!;
}
