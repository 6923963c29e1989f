import { C2, DAY, GM_EARTH } from "../units/index.ts";
import type { OsculatingElements } from "./elements.ts";

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
 * What an incomplete model of forces does to the accumulated time of a propagated state, one sigma in seconds, t seconds
 * from the epoch. Three parts, each as an error of orbital energy, which moves the clock's rate by 3/c^2 of it:
 * - the field beyond degree 4: leaving out degree 4 moves a 400 km orbit by 180 ps a day, leaving out 3 and 4 by 590
 *   (measured with this propagator, rms over six places of the epoch, on 51.6 and 97.4 degrees); the degrees beyond are
 *   taken as 1.4 times degree 4, with the fifth power of the distance of the perigee (Kaula's rule; hand estimate);
 * - radiation pressure, 1e-7 m/s2 across the orbit (common practice, no source);
 * - drag, which lowers the orbit by 50 m a day at 400 km and a factor e less every 60 km (hand estimate), so that its
 *   effect grows with the square of time.
 */
export function propagationError(elements: OsculatingElements, t: number): number {
  const seconds = Math.abs(t);
  const a = elements.semiMajorAxis > 0 ? elements.semiMajorAxis : elements.perigee;
  const field = fieldRate * Math.min(1, earthRadius / elements.perigee) ** 5;
  const pressure = (3 * radiationPressure * a) / C2;
  const height = Math.max(120e3, elements.perigee - earthRadius);
  const nearPerigee = Math.sqrt(Math.max(0, 1 - Math.min(elements.eccentricity, 1)));
  const decayPerDay = 50 * Math.exp(-(height - 400e3) / 60e3) * nearPerigee;
  const drag = ((3 * GM_EARTH) / (2 * a * a * C2)) * (decayPerDay / 2) * (seconds / DAY) * seconds;
  return Math.hypot(field * seconds, pressure * seconds, drag);
}
