import type { Vec3 } from "../numeric/index.ts";
import { GM_EARTH } from "../units/index.ts";
import type { Kinematics } from "./frames.ts";

/** Keplerian elements about the Earth's centre; m and rad, angles at t = 0. */
export interface KeplerianElements {
  readonly semiMajorAxis: number;
  readonly eccentricity: number;
  readonly inclination: number;
  readonly node: number;
  readonly perigeeArgument: number;
  readonly meanAnomaly: number;
}

/** Eccentric anomaly, rad, in the same turn as the mean one, for an eccentricity below 1. Newton's iteration from Danby's start; to rounding. */
export function eccentricAnomaly(meanAnomaly: number, eccentricity: number): number {
  const turns = 2 * Math.PI * Math.round(meanAnomaly / (2 * Math.PI));
  const m = meanAnomaly - turns;
  let e = m + 0.85 * eccentricity * Math.sign(Math.sin(m));
  for (let i = 0; i < 50; i++) {
    const step = (e - eccentricity * Math.sin(e) - m) / (1 - eccentricity * Math.cos(e));
    e -= step;
    if (Math.abs(step) < 1e-15) break;
  }
  return e + turns;
}

/**
 * Position and velocity (m, m/s) on an undisturbed elliptical orbit, t seconds after the elements' time.
 * Source: Kepler's equation and the perifocal axes, Montenbruck & Gill (2000), section 2.2.
 */
export function twoBodyState(elements: KeplerianElements, t: number): Kinematics {
  const { semiMajorAxis: a, eccentricity: e } = elements;
  const n = Math.sqrt(GM_EARTH / a ** 3);
  const anomaly = eccentricAnomaly(elements.meanAnomaly + n * t, e);
  const c = Math.cos(anomaly);
  const s = Math.sin(anomaly);
  const ratio = Math.sqrt((1 - e) * (1 + e));
  const [p, q] = perifocalAxes(elements);
  const x = a * (c - e);
  const y = a * ratio * s;
  const speed = (n * a) / (1 - e * c);
  const vx = -speed * s;
  const vy = speed * ratio * c;
  return {
    position: [p[0] * x + q[0] * y, p[1] * x + q[1] * y, p[2] * x + q[2] * y],
    velocity: [p[0] * vx + q[0] * vy, p[1] * vx + q[1] * vy, p[2] * vx + q[2] * vy],
  };
}

function perifocalAxes({ inclination, node, perigeeArgument }: KeplerianElements): [Vec3, Vec3] {
  const [ci, si] = [Math.cos(inclination), Math.sin(inclination)];
  const [cn, sn] = [Math.cos(node), Math.sin(node)];
  const [cw, sw] = [Math.cos(perigeeArgument), Math.sin(perigeeArgument)];
  return [
    [cn * cw - sn * sw * ci, sn * cw + cn * sw * ci, sw * si],
    [-cn * sw - sn * cw * ci, -sn * sw + cn * cw * ci, cw * si],
  ];
}
