import {
  axisRotation,
  type Mat3,
  multiply,
  multiplyTransposed,
  product,
  transpose,
  type Vec3,
} from "../numeric/index.ts";
import { type Instant, ttSecondsSinceJ2000 } from "../time/index.ts";
import { ARCSECOND, constants, DAY, EARTH_ROTATION } from "../units/index.ts";
import { intermediatePole, nutation2000B, trueOfDate } from "./precessionNutation.ts";
import { greenwichMeanSiderealTime1982, siderealRate1982 } from "./siderealTime1982.ts";

/** How the Earth is turned, as far as a user knows it. */
export interface EarthOrientation {
  /** UT1 - TAI, s, taken as constant over the work. */
  readonly ut1MinusTai: number;
  /** Pole coordinates, rad. */
  readonly xPole: number;
  readonly yPole: number;
}

const pole = new Float64Array(3);
const poleRate = new Float64Array(3);

/** Earth rotation angle at an instant, rad in [0, 2 pi). Source: IAU 2000 Resolution B1.8, IERS Conventions (2010) eq. 5.15. */
export function earthRotationAngle(instant: Instant, ut1MinusTai: number): number {
  // Seconds of UT1 since 2000-01-01T12:00:00 UT1, split so that the turns lose no digits.
  const seconds = instant.seconds - 946_728_000;
  const days = Math.floor(seconds / DAY);
  const dayFraction = (seconds - days * DAY + instant.picoseconds / 1e12 + ut1MinusTai) / DAY;
  const perDay = constants.earthRotationExcess.value;
  const turns = 0.779057273264 + dayFraction + perDay * (days + dayFraction);
  return 2 * Math.PI * (turns - Math.floor(turns));
}

/**
 * The Earth-fixed axes (ITRF) against GCRF, by TT seconds since a reference instant.
 * Models: IAU 2006 precession, IAU 2000B nutation, frame bias, Earth rotation angle, polar motion when given.
 * Accuracy: 1 milliarcsecond (3 cm on the ground) beside what UT1 - UTC and the pole cost when they are not given.
 * Source: IERS Conventions (2010), chapter 5.
 */
export class EarthAxes {
  readonly #ttAtReference: number;
  readonly #angleAtReference: number;
  readonly #siderealAtReference: number;
  readonly #polarMotion: Mat3 | null;

  constructor(reference: Instant, orientation: EarthOrientation) {
    this.#ttAtReference = ttSecondsSinceJ2000(reference);
    this.#angleAtReference = earthRotationAngle(reference, orientation.ut1MinusTai);
    this.#siderealAtReference = greenwichMeanSiderealTime1982(reference, orientation.ut1MinusTai);
    const { xPole, yPole } = orientation;
    // Eq. 5.3: ITRF = R1(-yp) R2(-xp) R3(s') of the rotated intermediate axes; s' = -47 microarcseconds a century.
    const sPrime = -47e-6 * ARCSECOND * (this.#ttAtReference / (36_525 * DAY));
    this.#polarMotion =
      xPole === 0 && yPole === 0
        ? null
        : product(axisRotation(1, -yPole), product(axisRotation(2, -xPole), axisRotation(3, sPrime)));
  }

  /** Rotation from GCRF to ITRF. */
  rotation(t: number): Mat3 {
    const rotated = this.#rotationWithoutPole(t);
    return this.#polarMotion === null ? rotated : product(this.#polarMotion, rotated);
  }

  /** Rotation from GCRF to the true equator and equinox of date. */
  trueOfDate(t: number): Mat3 {
    const centuries = (this.#ttAtReference + t) / (36_525 * DAY);
    return trueOfDate(centuries, nutation2000B(centuries));
  }

  /**
   * Rotation from TEME (true equator, mean equinox: the axes of the mean-element theory) to GCRF: by the sidereal time of
   * 1982 to the Earth-fixed equator and from there back by the Earth's turn, so that UT1 falls out.
   * Source: AIAA 2006-6753, appendix C.
   */
  fromTeme(t: number): Mat3 {
    const sidereal = axisRotation(3, this.#siderealAtReference + siderealRate1982 * t);
    return product(transpose(this.#rotationWithoutPole(t)), sidereal);
  }

  /** The same as rotation() with the pole at zero. */
  #rotationWithoutPole(t: number): Mat3 {
    intermediatePole.evaluate(this.#ttAtReference + t, pole);
    const x = pole[0]!;
    const y = pole[1]!;
    const angle = this.#angleAtReference + EARTH_ROTATION * t + pole[2]!;
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    const z = Math.sqrt(1 - x * x - y * y);
    const a = 1 / (1 + z);
    const q00 = 1 - a * x * x;
    const q01 = -a * x * y;
    const q11 = 1 - a * y * y;
    return [
      c * q00 + s * q01,
      c * q01 + s * q11,
      -c * x - s * y,
      -s * q00 + c * q01,
      -s * q01 + c * q11,
      s * x - c * y,
      x,
      y,
      z,
    ];
  }

  /**
   * Angular velocity of the Earth-fixed axes in GCRF, rad/s: the rotation angle's rate about the pole, and the pole's own
   * motion (the intermediate origin does not rotate about the pole, by its definition).
   */
  angularVelocity(t: number): Vec3 {
    intermediatePole.evaluate(this.#ttAtReference + t, pole, poleRate);
    const x = pole[0]!;
    const y = pole[1]!;
    const z = Math.sqrt(1 - x * x - y * y);
    const xr = poleRate[0]!;
    const yr = poleRate[1]!;
    const zr = -(x * xr + y * yr) / z;
    return [
      EARTH_ROTATION * x + y * zr - z * yr,
      EARTH_ROTATION * y + z * xr - x * zr,
      EARTH_ROTATION * z + x * yr - y * xr,
    ];
  }

  /** An Earth-fixed position and velocity (m, m/s) in GCRF. */
  toInertial(t: number, position: Vec3, velocity: Vec3): { position: Vec3; velocity: Vec3 } {
    const rotation = this.rotation(t);
    const inertial = multiplyTransposed(rotation, position);
    const carried = multiplyTransposed(rotation, velocity);
    const w = this.angularVelocity(t);
    return {
      position: inertial,
      velocity: [
        carried[0] + w[1] * inertial[2] - w[2] * inertial[1],
        carried[1] + w[2] * inertial[0] - w[0] * inertial[2],
        carried[2] + w[0] * inertial[1] - w[1] * inertial[0],
      ],
    };
  }

  /** The inverse of toInertial. */
  toEarthFixed(t: number, position: Vec3, velocity: Vec3): { position: Vec3; velocity: Vec3 } {
    const rotation = this.rotation(t);
    const w = this.angularVelocity(t);
    const relative: Vec3 = [
      velocity[0] - (w[1] * position[2] - w[2] * position[1]),
      velocity[1] - (w[2] * position[0] - w[0] * position[2]),
      velocity[2] - (w[0] * position[1] - w[1] * position[0]),
    ];
    return { position: multiply(rotation, position), velocity: multiply(rotation, relative) };
  }
}
