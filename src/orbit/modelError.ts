import { C2, DAY, GM_EARTH } from "../units/index.ts";
import type { OsculatingElements } from "./elements.ts";
import type { ModelError, Trajectory } from "./trajectory.ts";

const earthRadius = 6_378_137;

/**
 * What the field beyond degree and order 4 adds to the accumulated time along a known path, one sigma in seconds after
 * dt seconds: 4 ps a day near the ground, falling with the fifth power of the distance, and 1 ps that does not grow.
 * Source: the degree-4 zonal is 11 ps a day in a low orbit (measured); even zonals of degree 6 and 8 together are a
 * third of it (ratio of the published coefficients). Common practice, no source, for the power.
 */
export function fieldTruncation(nearestDistance: number, dt: number): number {
  const closeness = Math.min(1, earthRadius / Math.max(nearestDistance, 1)) ** 5;
  return closeness * (4e-12 * (Math.abs(dt) / DAY) + 1e-12);
}

/** Of the rate of a clock on a propagated path near the ground, from the field beyond degree 4; see propagationError. */
const fieldRate = 3.5e-15;
/** Acceleration by radiation pressure on a satellite of 0.02 m2/kg, m/s2. */
const radiationPressure = 1e-7;

/**
 * What an incomplete model of forces does to a propagated state, one sigma. Three parts; the first two are errors of
 * orbital energy, which move a clock's rate by 3/c^2 of it:
 * - the field beyond degree 4: leaving out degree 4 moves a 400 km orbit by 180 ps a day, leaving out 3 and 4 by 590
 *   (measured with this propagator, rms over six places of the epoch, on 51.6 and 97.4 degrees); the degrees beyond are
 *   taken as 1.4 times degree 4, with the fifth power of the distance of the perigee (Kaula's rule; hand estimate);
 * - radiation pressure, 1e-7 m/s2 across the orbit (common practice, no source);
 * - drag, which lowers the orbit by 50 m a day at 400 km and a factor e less every 60 km (hand estimate), so that its
 *   effect grows with the square of time.
 */
export function propagationError(elements: OsculatingElements): Pick<ModelError, "energyRate" | "drag"> {
  const a = Math.abs(elements.semiMajorAxis);
  const field = fieldRate * Math.min(1, earthRadius / elements.perigee) ** 5;
  const pressure = (3 * radiationPressure * Math.min(a, 4e8)) / C2;
  const height = Math.max(120e3, elements.perigee - earthRadius);
  const nearPerigee = Math.sqrt(Math.max(0, 1 - Math.min(elements.eccentricity, 1)));
  const decayPerDay = 50 * Math.exp(-(height - 400e3) / 60e3) * nearPerigee;
  const dragRate = ((3 * GM_EARTH) / (2 * a * a * C2)) * (decayPerDay / 2 / DAY);
  return { energyRate: Math.hypot(field, pressure), drag: (t) => dragRate * t * t };
}

const scratch = new Float64Array(6);

/**
 * The lever of an error of energy between two times of a path about its epoch (t = 0), s: |v_b^2 b - v_a^2 a| axis/GM. It
 * holds the growth along track and the phase of the periodic term in one, for GM/(2a) + (v^2 - GM/r) = v^2/2.
 */
export function leverAlong(path: Pick<Trajectory, "state">, axis: number, a: number, b: number): number {
  const weighted = (t: number): number => {
    path.state(t, scratch);
    return t * (scratch[3]! ** 2 + scratch[4]! ** 2 + scratch[5]! ** 2);
  };
  return (Math.abs(weighted(b) - weighted(a)) * Math.abs(axis)) / GM_EARTH;
}
