import type { EarthAxes } from "../bodies/index.ts";
import {
  axisRotation,
  type Mat3,
  multiply,
  multiplyTransposed,
  product,
  transpose,
  type Vec3,
} from "../numeric/index.ts";
import { ARCSECOND } from "../units/index.ts";

/** Frames in which a state near the Earth can be given. ICRF with the Earth as centre has the axes of GCRF. */
export const frames = ["GCRF", "EME2000", "ICRF", "TEME", "TOD", "ITRF"] as const;
export type Frame = (typeof frames)[number];

/** Whether a frame's axes can stand about another body than the Earth. */
export const isFreeOfEarth = (frame: Frame): boolean => frame === "GCRF" || frame === "ICRF" || frame === "EME2000";

/**
 * From GCRF to the mean equator and equinox of J2000.0: R1(-d_eps) R2(d_psi sin eps0) R3(d_alpha0), 23 milliarcseconds.
 * Source: IERS Conventions (2010) eqs. 5.21, 5.22; obliquity 84381.406 arcseconds.
 */
const frameBias = product(
  axisRotation(1, 0.0068192 * ARCSECOND),
  product(
    axisRotation(2, -0.041775 * ARCSECOND * Math.sin(84381.406 * ARCSECOND)),
    axisRotation(3, -0.0146 * ARCSECOND),
  ),
);

export interface Kinematics {
  readonly position: Vec3;
  readonly velocity: Vec3;
}

/** Axes of date turn by 8e-12 rad/s against GCRF, 6e-5 m/s in a low orbit, which is left out: 1 ps a day. */
const rotated = (m: Mat3, { position, velocity }: Kinematics): Kinematics => ({
  position: multiply(m, position),
  velocity: multiply(m, velocity),
});

/** A state (m, m/s) of any of the frames in GCRF; t is the time on the axes. */
export function toGcrf(frame: Frame, axes: EarthAxes, t: number, state: Kinematics): Kinematics {
  switch (frame) {
    case "GCRF":
    case "ICRF":
      return state;
    case "EME2000":
      return {
        position: multiplyTransposed(frameBias, state.position),
        velocity: multiplyTransposed(frameBias, state.velocity),
      };
    case "TEME":
      return rotated(axes.fromTeme(t), state);
    case "TOD":
      return rotated(transpose(axes.trueOfDate(t)), state);
    case "ITRF":
      return axes.toInertial(t, state.position, state.velocity);
  }
}
