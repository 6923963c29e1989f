import { oblateness, oblatenessRadius } from "../bodies/index.ts";
import { C2, GM_EARTH, LG } from "../units/index.ts";

/**
 * Independent forms of what the integral computes, for checks. Nothing of the corrections uses them.
 */

/** Rate of an ideal clock on a two-body orbit, mean over whole revolutions: L_G - 3 GM/(2 a c^2), exact to c^-2. */
export const twoBodyMeanRate = (semiMajorAxis: number): number => LG - (3 * GM_EARTH) / (2 * semiMajorAxis * C2);

/** -(2/c^2) r.v: the periodic part of accumulated time on a two-body orbit, s; exact to c^-2. Source: IS-GPS-200 20.3.3.3.3.1. */
export const endTerm = (positionDotVelocity: number): number => (-2 * positionDotVelocity) / C2;

/**
 * Mean rate with J2 to first order: semiMajorAxis is the mean of the osculating one (m), inclination in rad.
 * Accuracy: 0.2 to 1 ns a day in low orbits, second order in J2.
 * Source: virial theorem and energy with the secular mean of the J2 potential; Kouba (2004), GPS Solutions 8, 170.
 */
export function secularMeanRate(semiMajorAxis: number, eccentricity: number, inclination: number): number {
  const s = Math.sin(inclination);
  const shape = (1 - 1.5 * s * s) * (1 - eccentricity * eccentricity) ** -1.5;
  const ratio = oblatenessRadius / semiMajorAxis;
  return (
    twoBodyMeanRate(semiMajorAxis) - ((3.5 * GM_EARTH) / (semiMajorAxis * C2)) * oblateness * ratio * ratio * shape
  );
}

/** F e sqrt(a) sin E with F = -2 sqrt(GM)/c^2, s. Source: IS-GPS-200 20.3.3.3.3.1. */
export function broadcastEccentricityTerm(
  gm: number,
  semiMajorAxis: number,
  e: number,
  eccentricAnomaly: number,
): number {
  return ((-2 * Math.sqrt(gm)) / C2) * e * Math.sqrt(semiMajorAxis) * Math.sin(eccentricAnomaly);
}
