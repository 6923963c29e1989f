/**
 * Osculating (Hermite) interpolation: the polynomial of degree 2n - 1 through n values and n slopes.
 * Source: Hildebrand, Introduction to Numerical Analysis (1974), section 8.2.
 */

/**
 * Position and velocity at t from `points` knots of a table. `times` and `values` hold the knots; a knot's six numbers
 * (position, velocity) stand at 6 * knot. Writes position and the polynomial's own derivative to `out`.
 */
export function interpolateStates(
  times: ArrayLike<number>,
  values: ArrayLike<number>,
  firstKnot: number,
  points: number,
  t: number,
  out: Float64Array,
): void {
  out.fill(0, 0, 6);
  for (let i = 0; i < points; i++) {
    const ti = times[firstKnot + i]!;
    // l = Lagrange's polynomial of knot i at t, dl its derivative there, slope its derivative at its own knot.
    let l = 1;
    let dl = 0;
    let slope = 0;
    for (let j = 0; j < points; j++) {
      if (j === i) continue;
      const tj = times[firstKnot + j]!;
      const inverse = 1 / (ti - tj);
      const factor = (t - tj) * inverse;
      dl = dl * factor + l * inverse;
      l *= factor;
      slope += inverse;
    }
    accumulateKnot(values, 6 * (firstKnot + i), t - ti, l, dl, slope, out);
  }
}

/** Position and velocity at t, each by Lagrange's polynomial of its own through `points` knots. */
export function lagrangeStates(
  times: ArrayLike<number>,
  values: ArrayLike<number>,
  firstKnot: number,
  points: number,
  t: number,
  out: Float64Array,
): void {
  out.fill(0, 0, 6);
  for (let i = firstKnot; i < firstKnot + points; i++) {
    let l = 1;
    for (let j = firstKnot; j < firstKnot + points; j++) if (j !== i) l *= (t - times[j]!) / (times[i]! - times[j]!);
    for (let k = 0; k < 6; k++) out[k]! += l * values[6 * i + k]!;
  }
}

/** Adds one knot's share, (1 - 2 slope d) l^2 of its position and d l^2 of its velocity, and their derivatives. */
export function accumulateKnot(
  values: ArrayLike<number>,
  at: number,
  d: number,
  l: number,
  dl: number,
  slope: number,
  out: Float64Array,
): void {
  const l2 = l * l;
  const twice = 2 * l * dl;
  const a = 1 - 2 * slope * d;
  const position = a * l2;
  const positionRate = a * twice - 2 * slope * l2;
  const velocity = d * l2;
  const velocityRate = l2 + d * twice;
  const x = values[at]!;
  const y = values[at + 1]!;
  const z = values[at + 2]!;
  const vx = values[at + 3]!;
  const vy = values[at + 4]!;
  const vz = values[at + 5]!;
  out[0]! += position * x + velocity * vx;
  out[1]! += position * y + velocity * vy;
  out[2]! += position * z + velocity * vz;
  out[3]! += positionRate * x + velocityRate * vx;
  out[4]! += positionRate * y + velocityRate * vy;
  out[5]! += positionRate * z + velocityRate * vz;
}

/** Derivative at knot `at` of the polynomial through knots first ... first + points - 1 (values at stride * knot + k). */
export function slopeAtKnot(
  times: ArrayLike<number>,
  values: ArrayLike<number>,
  stride: number,
  k: number,
  first: number,
  points: number,
  at: number,
): number {
  // Barycentric weights, scaled by the span so that they stay near one.
  const span = times[first + points - 1]! - times[first]!;
  const weight = (i: number): number => {
    let w = 1;
    for (let j = first; j < first + points; j++) if (j !== i) w *= (4 * (times[i]! - times[j]!)) / span;
    return 1 / w;
  };
  const own = weight(at);
  let sum = 0;
  for (let i = first; i < first + points; i++) {
    if (i === at) continue;
    const difference = values[stride * i + k]! - values[stride * at + k]!;
    sum += ((weight(i) / own) * difference) / (times[at]! - times[i]!);
  }
  return sum;
}
