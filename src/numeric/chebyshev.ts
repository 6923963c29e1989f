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
  coefficients(values: ArrayLike<number>): Float64Array {
    const n = this.count;
    const out = new Float64Array(n);
    for (let j = 0; j < n; j++) {
      let sum = 0;
      for (let k = 0; k < n; k++) sum += this.#cosines[j * n + k]! * values[k]!;
      out[j] = sum;
    }
    return out;
  }
}

/** Coefficients of the antiderivative that is zero at x = -1; one more than given. */
export function antiderivative(c: Float64Array): Float64Array {
  const n = c.length;
  const out = new Float64Array(n + 1);
  for (let j = 1; j <= n; j++) {
    const before = j === 1 ? 2 * c[0]! : c[j - 1]!;
    out[j] = (before - (c[j + 1] ?? 0)) / (2 * j);
  }
  let atMinusOne = 0;
  for (let j = 1; j <= n; j++) atMinusOne += j % 2 === 0 ? out[j]! : -out[j]!;
  out[0] = -atMinusOne;
  return out;
}

/** Value of a series at x in [-1, 1] (Clenshaw). */
export function evaluateSeries(c: ArrayLike<number>, x: number, offset = 0, count = c.length): number {
  let b1 = 0;
  let b2 = 0;
  for (let j = offset + count - 1; j > offset; j--) {
    const b = 2 * x * b1 - b2 + c[j]!;
    b2 = b1;
    b1 = b;
  }
  return x * b1 - b2 + c[offset]!;
}
