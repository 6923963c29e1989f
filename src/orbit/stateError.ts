import { cross, dot, norm } from "../numeric/index.ts";
import type { Notice } from "../problem/index.ts";
import { GM_EARTH } from "../units/index.ts";
import type { StateError } from "./description.ts";
import { osculatingElements } from "./elements.ts";
import type { Kinematics } from "./frames.ts";
import type { OrbitError } from "./trajectory.ts";

export const orbitErrorNotGiven: Notice = {
  code: "orbit-uncertainty-not-given",
  text: "No uncertainty of the orbit was given, so none is in the result; positionSigmaKm, velocitySigmaKmPerS, semiMajorAxisSigmaKm or covarianceRtn would bring it in.",
};
export const isotropicError: Notice = {
  code: "isotropic-orbit-uncertainty",
  text: "One sigma for all directions is an upper bound: radial position and along-track speed are taken as independent.",
};

/**
 * Sigmas of semi-major axis and of r.v from what is known of a state.
 * Source: vis-viva differentiated, da = (2a^2/r^2) dr + (2a^2/GM) v.dv; linear propagation, JCGM 100:2008 eq. 13.
 */
export function stateError(error: StateError, { position, velocity }: Kinematics): OrbitError | null {
  const { positionSigma, velocitySigma, semiMajorAxisSigma, covarianceRtn } = error;
  if (positionSigma === null && velocitySigma === null && semiMajorAxisSigma === null && covarianceRtn === null)
    return null;
  const r = norm(position);
  const v = norm(velocity);
  const { semiMajorAxis: a } = osculatingElements(position, velocity);
  const axis = Number.isFinite(a) ? Math.abs(a) : null;
  const byRadius = (2 * a * a) / (r * r);
  const bySpeed = (2 * a * a) / GM_EARTH;
  let fromState: { axis: number; product: number } | null = null;
  if (covarianceRtn !== null) {
    const radialSpeed = dot(position, velocity) / r;
    const transverseSpeed = norm(cross(position, velocity)) / r;
    const axisLever = [byRadius, 0, 0, bySpeed * radialSpeed, bySpeed * transverseSpeed, 0];
    const productLever = [radialSpeed, transverseSpeed, 0, r, 0, 0];
    fromState = { axis: sandwich(covarianceRtn, axisLever), product: sandwich(covarianceRtn, productLever) };
  } else if (positionSigma !== null || velocitySigma !== null) {
    const p = positionSigma ?? 0;
    const s = velocitySigma ?? 0;
    fromState = { axis: Math.hypot(byRadius * p, bySpeed * v * s), product: Math.hypot(v * p, r * s) };
  }
  return {
    semiMajorAxis: semiMajorAxisSigma ?? fromState?.axis ?? null,
    positionDotVelocity: fromState?.product ?? null,
    axis,
    isotropic: covarianceRtn === null && semiMajorAxisSigma === null,
  };
}

/** sqrt(g C g) of a covariance of six. */
function sandwich(covariance: readonly number[], lever: readonly number[]): number {
  let variance = 0;
  for (let i = 0; i < 6; i++) {
    for (let j = 0; j < 6; j++) variance += lever[i]! * lever[j]! * covariance[6 * i + j]!;
  }
  return Math.sqrt(Math.max(0, variance));
}
