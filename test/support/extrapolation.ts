/**
 * Gragg-Bulirsch-Stoer extrapolation of a system of first order, as an oracle that shares nothing with the project's own
 * integrator. Fixed macro steps, seven columns (order 14). Source: Hairer, Norsett & Wanner, Solving Ordinary Differential
 * Equations I (1993), II.9.
 */
export type Derivative = (t: number, y: Float64Array, out: Float64Array) => void;

/** More columns cost more rounding than they gain: 7 was the best of 6 to 12. */
const columns = 7;

export function integrate(f: Derivative, start: Float64Array, from: number, to: number, step: number): Float64Array {
  let y = Float64Array.from(start);
  const compensation = new Float64Array(y.length);
  const count = Math.max(1, Math.round(Math.abs(to - from) / step));
  const h = (to - from) / count;
  for (let i = 0; i < count; i++) {
    const change = increment(f, from + i * h, y, h);
    const next = new Float64Array(y.length);
    for (let k = 0; k < y.length; k++) {
      const small = change[k]! + compensation[k]!;
      next[k] = y[k]! + small;
      compensation[k] = small - (next[k]! - y[k]!);
    }
    y = next;
  }
  return y;
}

/** Change of y over one macro step: Neville's scheme in h^2 on the changes, not on the values, to spare rounding. */
function increment(f: Derivative, t: number, y: Float64Array, h: number): Float64Array {
  const rows: Float64Array[] = [];
  for (let j = 0; j < columns; j++) {
    const n = 2 * (j + 1);
    let current = midpoint(f, t, y, h, n);
    const made = [current];
    for (let k = 1; k <= j; k++) {
      const before = rows[k - 1]!;
      const ratio = (n / (2 * (j - k + 1))) ** 2 - 1;
      current = current.map((value, i) => value + (value - before[i]!) / ratio);
      made.push(current);
    }
    for (const [k, row] of made.entries()) rows[k] = row;
  }
  return rows[columns - 1]!;
}

function midpoint(f: Derivative, t: number, y: Float64Array, big: number, n: number): Float64Array {
  const h = big / n;
  const size = y.length;
  const slope = new Float64Array(size);
  const place = new Float64Array(size);
  // Changes from y at the last two points.
  let older = new Float64Array(size);
  let newer = new Float64Array(size);
  f(t, y, slope);
  for (let k = 0; k < size; k++) newer[k] = h * slope[k]!;
  for (let m = 1; m < n; m++) {
    for (let k = 0; k < size; k++) place[k] = y[k]! + newer[k]!;
    f(t + m * h, place, slope);
    const next = new Float64Array(size);
    for (let k = 0; k < size; k++) next[k] = older[k]! + 2 * h * slope[k]!;
    older = newer;
    newer = next;
  }
  return newer;
}
