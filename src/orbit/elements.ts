import { cross, dot, norm, type Vec3 } from "../numeric/index.ts";
import { GM_EARTH } from "../units/index.ts";

/** Osculating two-body elements about the Earth's centre. */
export interface OsculatingElements {
  /** m; negative for a hyperbola, infinite for a parabola. */
  readonly semiMajorAxis: number;
  readonly eccentricity: number;
  /** rad, against the z axis of the frame. */
  readonly inclination: number;
  /** Distance of the nearest point from the centre, m. */
  readonly perigee: number;
}

/** From a state in an inertial frame (m, m/s). Source: the two-body integrals of energy, angular momentum and eccentricity. */
export function osculatingElements(position: Vec3, velocity: Vec3): OsculatingElements {
  const r = norm(position);
  const v2 = dot(velocity, velocity);
  const h = cross(position, velocity);
  const h2 = dot(h, h);
  const rv = dot(position, velocity);
  const semiMajorAxis = 1 / (2 / r - v2 / GM_EARTH);
  // e from its two components along and across the radius: no loss of digits for small e.
  const radial = h2 / (GM_EARTH * r) - 1;
  const transverse = (Math.sqrt(h2) * rv) / (GM_EARTH * r);
  const eccentricity = Math.hypot(radial, transverse);
  const inclination = Math.atan2(Math.hypot(h[0], h[1]), h[2]);
  const perigee = h2 / GM_EARTH / (1 + eccentricity);
  return { semiMajorAxis, eccentricity, inclination, perigee };
}
