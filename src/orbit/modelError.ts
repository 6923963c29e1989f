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

/**
 * What an incomplete model of forces does to the accumulated time of a propagated state, one sigma in seconds, t seconds
 * from the epoch. Two parts: drag, which lowers the orbit by an amount a day that depends on the perigee's height (50 m
 * a day at 400 km, a factor e per 60 km: hand estimate, common practice, no source), and the field beyond degree 4 with
 * radiation pressure, taken as an error of the semi-major axis of 2 m near the Earth growing outwards by the pressure's
 * share (hand estimate). The time error is the integral of 3 GM/(2 a^2 c^2) da.
 */
export function propagationError(elements: OsculatingElements, t: number): number {
  const days = Math.abs(t) / DAY;
  const a = elements.semiMajorAxis > 0 ? elements.semiMajorAxis : elements.perigee;
  const perMetre = (3 * GM_EARTH) / (2 * a * a * C2);
  const height = Math.max(120e3, elements.perigee - earthRadius);
  const share = Math.sqrt(Math.max(0, 1 - Math.min(elements.eccentricity, 1))); // little time is spent near perigee
  const decayPerDay = 50 * Math.exp(-(height - 400e3) / 60e3) * share;
  const drag = perMetre * (decayPerDay / 2) * days * days * DAY;
  const field = 2 * Math.min(1, earthRadius / elements.perigee) ** 3 + 0.5 * Math.sqrt(days);
  return Math.hypot(drag, perMetre * field * days * DAY);
}
