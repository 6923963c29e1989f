import { constants, GM_EARTH } from "../units/index.ts";
import { geopotentialCoefficients } from "./geopotential.data.ts";

/** Highest degree and order of the field. */
const geopotentialDegree = 4;

const reference = constants.geopotentialRadius.value;
const size = geopotentialDegree + 2;

function factorial(n: number): number {
  return n <= 1 ? 1 : n * factorial(n - 1);
}

/** Fully normalised to un-normalised, and from the model's own GM to ours (7.5e-10 relative). */
function unnormalise(n: number, m: number): number {
  const norm = Math.sqrt(((m === 0 ? 1 : 2) * (2 * n + 1) * factorial(n - m)) / factorial(n + m));
  return (norm * constants.geopotentialGm.value) / GM_EARTH;
}

const cosine = new Float64Array(size * size);
const sine = new Float64Array(size * size);
for (const [n, m, c, s] of geopotentialCoefficients) {
  const full = n === 2 && m === 0 ? c + constants.permanentTideC20.value : c;
  cosine[n * size + m] = full * unnormalise(n, m);
  sine[n * size + m] = s * unnormalise(n, m);
}

/** J2 of the field in use: zero tide, un-normalised, for GM_EARTH and oblatenessRadius. */
export const oblateness = -cosine[2 * size]!;
/** The radius that J2 and all other coefficients belong to, m. */
export const oblatenessRadius = reference;

/** What the field beyond the monopole gives at a point, m2/s2 and m/s2, Earth-fixed axes. */
export interface FieldSample {
  /** The J2 part of the potential (positive potential: more of it slows a clock). */
  oblateness: number;
  /** All other parts to degree and order 4. */
  higher: number;
  /** Gradient of both together. */
  x: number;
  y: number;
  z: number;
}

/** V and W of eqs. 3.29 and 3.30 stand in a triangle, degree by degree. */
const count = (size * (size + 1)) / 2;
const placeOf = (n: number, m: number): number => (n * (n + 1)) / 2 + m;

/** Factors of eq. 3.30 by place (n above m): of z V(n - 1, m) and of rho V(n - 2, m). */
const upper = new Float64Array(count);
const lower = new Float64Array(count);
for (let n = 1; n < size; n++) {
  for (let m = 0; m < n; m++) {
    upper[placeOf(n, m)] = (2 * n - 1) / (n - m);
    lower[placeOf(n, m)] = n > m + 1 ? (n + m - 1) / (n - m) : 0;
  }
}

/** Potential (eq. 3.28) and gradient (eq. 3.33) are sums over all V and W; their weights, eight a place. */
const weights = new Float64Array(8 * count);
for (let n = 2; n <= geopotentialDegree; n++) {
  for (let m = 0; m <= n; m++) {
    const c = cosine[n * size + m]!;
    const s = sine[n * size + m]!;
    weights[8 * placeOf(n, m)] = c;
    weights[8 * placeOf(n, m) + 1] = s;
    const add = (to: number, component: number, ofV: number, ofW: number): void => {
      weights[8 * to + component]! += ofV;
      weights[8 * to + component + 1]! += ofW;
    };
    const ahead = placeOf(n + 1, m + 1);
    if (m === 0) {
      add(ahead, 2, -c, 0);
      add(ahead, 4, 0, -c);
    } else {
      const f = (n - m + 2) * (n - m + 1);
      const behind = placeOf(n + 1, m - 1);
      add(ahead, 2, -c / 2, -s / 2);
      add(ahead, 4, s / 2, -c / 2);
      add(behind, 2, (f * c) / 2, (f * s) / 2);
      add(behind, 4, (f * s) / 2, (-f * c) / 2);
    }
    add(placeOf(n + 1, m), 6, -(n - m + 1) * c, -(n - m + 1) * s);
  }
}

const v = new Float64Array(count);
const w = new Float64Array(count);
const perRadius = GM_EARTH / reference;
const perSquare = perRadius / reference;
const zonal = placeOf(2, 0);

/**
 * Potential and gradient of the Earth's field without its monopole, at an Earth-fixed position in metres.
 * Validity: outside the Earth; truncated at degree and order 4; zero tide.
 * Source: Montenbruck & Gill, Satellite Orbits (2000), eqs. 3.27 to 3.33 (Cunningham's recursion).
 */
export function sampleField(x: number, y: number, z: number, out: FieldSample): void {
  const r2 = x * x + y * y + z * z;
  const k = reference / r2;
  const x0 = x * k;
  const y0 = y * k;
  const z0 = z * k;
  const rho = reference * k;
  // V and W of the diagonal, carried from one order to the next.
  let vm = reference / Math.sqrt(r2);
  let wm = 0;
  let diagonal = 0;
  for (let m = 0; m < size; m++) {
    v[diagonal] = vm;
    w[diagonal] = wm;
    let v1 = vm;
    let w1 = wm;
    let v2 = 0;
    let w2 = 0;
    let i = diagonal;
    for (let n = m + 1; n < size; n++) {
      i += n;
      const a = upper[i]! * z0;
      const b = lower[i]! * rho;
      const vn = a * v1 - b * v2;
      const wn = a * w1 - b * w2;
      v2 = v1;
      w2 = w1;
      v1 = vn;
      w1 = wn;
      v[i] = vn;
      w[i] = wn;
    }
    const odd = 2 * m + 1;
    const next = odd * (x0 * vm - y0 * wm); // eq. 3.29
    wm = odd * (x0 * wm + y0 * vm);
    vm = next;
    diagonal += m + 2;
  }
  let potential = 0;
  let gx = 0;
  let gy = 0;
  let gz = 0;
  for (let i = zonal, at = 8 * zonal; i < count; i++, at += 8) {
    const vi = v[i]!;
    const wi = w[i]!;
    potential += weights[at]! * vi + weights[at + 1]! * wi;
    gx += weights[at + 2]! * vi + weights[at + 3]! * wi;
    gy += weights[at + 4]! * vi + weights[at + 5]! * wi;
    gz += weights[at + 6]! * vi + weights[at + 7]! * wi;
  }
  out.oblateness = perRadius * cosine[2 * size]! * v[zonal]!;
  out.higher = perRadius * potential - out.oblateness;
  out.x = perSquare * gx;
  out.y = perSquare * gy;
  out.z = perSquare * gz;
}
