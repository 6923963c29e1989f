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

const v = new Float64Array(size * size);
const w = new Float64Array(size * size);

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
  v[0] = reference / Math.sqrt(r2);
  w[0] = 0;
  for (let m = 0; m < size; m++) {
    const diagonal = m * size + m;
    if (m > 0) {
      const before = diagonal - size - 1;
      v[diagonal] = (2 * m - 1) * (x0 * v[before]! - y0 * w[before]!); // eq. 3.29
      w[diagonal] = (2 * m - 1) * (x0 * w[before]! + y0 * v[before]!);
    }
    for (let n = m + 1; n < size; n++) {
      const i = n * size + m;
      const a = ((2 * n - 1) * z0) / (n - m); // eq. 3.30
      const b = n > m + 1 ? ((n + m - 1) * rho) / (n - m) : 0;
      v[i] = a * v[i - size]! - (b === 0 ? 0 : b * v[i - 2 * size]!);
      w[i] = a * w[i - size]! - (b === 0 ? 0 : b * w[i - 2 * size]!);
    }
  }
  let potential = 0;
  let gx = 0;
  let gy = 0;
  let gz = 0;
  for (let n = 2; n <= geopotentialDegree; n++) {
    for (let m = 0; m <= n; m++) {
      const i = n * size + m;
      const c = cosine[i]!;
      const s = sine[i]!;
      potential += c * v[i]! + s * w[i]!; // eq. 3.28
      const up = i + size;
      gz -= (n - m + 1) * (c * v[up]! + s * w[up]!); // eq. 3.33
      if (m === 0) {
        gx -= c * v[up + 1]!;
        gy -= c * w[up + 1]!;
      } else {
        const f = (n - m + 2) * (n - m + 1);
        gx += 0.5 * (-c * v[up + 1]! - s * w[up + 1]! + f * (c * v[up - 1]! + s * w[up - 1]!));
        gy += 0.5 * (-c * w[up + 1]! + s * v[up + 1]! + f * (-c * w[up - 1]! + s * v[up - 1]!));
      }
    }
  }
  const perRadius = GM_EARTH / reference;
  const perSquare = perRadius / reference;
  out.oblateness = perRadius * cosine[2 * size]! * v[2 * size]!;
  out.higher = perRadius * potential - out.oblateness;
  out.x = perSquare * gx;
  out.y = perSquare * gy;
  out.z = perSquare * gz;
}
