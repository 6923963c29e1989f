import { type EarthAxes, type FieldSample, moonTable, sampleField, sunTable } from "../bodies/index.ts";
import type { Mat3 } from "../numeric/index.ts";
import { type Instant, ttSecondsSinceJ2000 } from "../time/index.ts";
import { GM_EARTH, GM_MOON, GM_SUN } from "../units/index.ts";

/** What the acceleration needs to know of the moment: how the Earth is turned and where Sun and Moon are. */
export interface ForceMoment {
  rotation: Mat3;
  readonly sun: Float64Array;
  readonly moon: Float64Array;
}

/**
 * Acceleration of a satellite of the Earth in GCRF: monopole, geopotential to degree and order 4, Sun and Moon as
 * third bodies. Left out: drag, radiation pressure, tides of the solid Earth, relativity (their size stands in the
 * uncertainty of a propagated state).
 */
export class ForceModel {
  readonly #axes: EarthAxes;
  readonly #ttAtReference: number;
  readonly #field: FieldSample = { oblateness: 0, higher: 0, x: 0, y: 0, z: 0 };

  constructor(reference: Instant, axes: EarthAxes) {
    this.#axes = axes;
    this.#ttAtReference = ttSecondsSinceJ2000(reference);
  }

  moment(t: number, into?: ForceMoment): ForceMoment {
    const moment = into ?? { rotation: this.#axes.rotation(t), sun: new Float64Array(3), moon: new Float64Array(3) };
    if (into) into.rotation = this.#axes.rotation(t);
    sunTable.evaluate(this.#ttAtReference + t, moment.sun);
    moonTable.evaluate(this.#ttAtReference + t, moment.moon);
    return moment;
  }

  /** Writes the acceleration (m/s2) at a position (m) to out[at ..]. */
  acceleration(moment: ForceMoment, x: number, y: number, z: number, out: Float64Array, at: number): void {
    const m = moment.rotation;
    const field = this.#field;
    sampleField(m[0] * x + m[1] * y + m[2] * z, m[3] * x + m[4] * y + m[5] * z, m[6] * x + m[7] * y + m[8] * z, field);
    const r2 = x * x + y * y + z * z;
    const k = -GM_EARTH / (r2 * Math.sqrt(r2));
    let ax = k * x + (m[0] * field.x + m[3] * field.y + m[6] * field.z);
    let ay = k * y + (m[1] * field.x + m[4] * field.y + m[7] * field.z);
    let az = k * z + (m[2] * field.x + m[5] * field.y + m[8] * field.z);
    for (let body = 0; body < 2; body++) {
      const place = body === 0 ? moment.sun : moment.moon;
      const gm = body === 0 ? GM_SUN : GM_MOON;
      const bx = place[0]!;
      const by = place[1]!;
      const bz = place[2]!;
      const d2 = bx * bx + by * by + bz * bz;
      // (b - r)/|b - r|^3 - b/b^3 with |b - r|^2 = b^2 (1 + q), arranged so that nothing cancels (Battin 1999, 8.4).
      const q = (r2 - 2 * (x * bx + y * by + z * bz)) / d2;
      const cube = (1 + q) * Math.sqrt(1 + q);
      const growth = (q * (3 + q * (3 + q))) / (1 + cube); // (1 + q)^(3/2) - 1
      const s = -gm / (d2 * Math.sqrt(d2) * cube);
      ax += s * (x + growth * bx);
      ay += s * (y + growth * by);
      az += s * (z + growth * bz);
    }
    out[at] = ax;
    out[at + 1] = ay;
    out[at + 2] = az;
  }
}
