import { axisRotation, type Mat3, product, TabulatedFunction } from "../numeric/index.ts";
import { ARCSECOND, DAY } from "../units/index.ts";
import { nutationTerms } from "./nutation.data.ts";

const century = 36_525 * DAY;

function polynomial(t: number, ...coefficients: number[]): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 0; i--) sum = sum * t + coefficients[i]!;
  return sum;
}

export interface Nutation {
  /** In longitude and obliquity, rad. */
  readonly longitude: number;
  readonly obliquity: number;
  /** Mean longitude of the Moon's node and the other fundamental arguments, rad. */
  readonly node: number;
  readonly latitudeArgument: number;
  readonly elongation: number;
  readonly sunAnomaly: number;
  readonly moonAnomaly: number;
}

/**
 * Nutation by TT Julian centuries since J2000.0, rad.
 * Accuracy: 1 milliarcsecond over 1995 to 2050. Source: IAU 2000B, McCarthy & Luzum (2003); arguments Simon et al. (1994),
 * linear parts.
 */
export function nutation2000B(t: number): Nutation {
  const arcseconds = (first: number, rate: number) => ((first + rate * t) % 1_296_000) * ARCSECOND;
  const moonAnomaly = arcseconds(485_868.249036, 1_717_915_923.2178);
  const sunAnomaly = arcseconds(1_287_104.79305, 129_596_581.0481);
  const latitudeArgument = arcseconds(335_779.526232, 1_739_527_262.8478);
  const elongation = arcseconds(1_072_260.70369, 1_602_961_601.209);
  const node = arcseconds(450_160.398036, -6_962_890.5431);
  let longitude = 0;
  let obliquity = 0;
  for (let i = nutationTerms.length - 1; i >= 0; i--) {
    const [ofMoon, ofSun, ofLatitude, ofElongation, ofNode, ...amplitudes] = nutationTerms[i]!;
    const argument =
      ofMoon! * moonAnomaly +
      ofSun! * sunAnomaly +
      ofLatitude! * latitudeArgument +
      ofElongation! * elongation +
      ofNode! * node;
    const sine = Math.sin(argument);
    const cosine = Math.cos(argument);
    longitude += (amplitudes[0]! + amplitudes[1]! * t) * sine + amplitudes[2]! * cosine;
    obliquity += (amplitudes[3]! + amplitudes[4]! * t) * cosine + amplitudes[5]! * sine;
  }
  const unit = ARCSECOND * 1e-7;
  // Fixed offsets in place of the planetary terms.
  return {
    longitude: longitude * unit - 0.135e-3 * ARCSECOND,
    obliquity: obliquity * unit + 0.388e-3 * ARCSECOND,
    node,
    latitudeArgument,
    elongation,
    sunAnomaly,
    moonAnomaly,
  };
}

/**
 * Rotation from GCRF to the true equator and equinox of date: frame bias, precession and nutation in one.
 * Source: IAU 2006 precession in Fukushima-Williams angles, Capitaine et al. (2003), A&A 412, 567, and IERS Conventions
 * (2010) 5.6.4; the figures of the polynomials from IAU 2006 (Hilton et al. 2006).
 */
export function trueOfDate(t: number, nutation: Nutation): Mat3 {
  const gamma = polynomial(t, -0.052928, 10.556378, 0.4932044, -0.00031238, -0.000002788, 0.000000026) * ARCSECOND;
  const phi = polynomial(t, 84381.412819, -46.811016, 0.0511268, 0.00053289, -0.00000044, -0.0000000176) * ARCSECOND;
  const psi = polynomial(t, -0.041775, 5038.481484, 1.5584175, -0.00018522, -0.000026452, -0.0000000148) * ARCSECOND;
  const inclination = axisRotation(1, -(meanObliquity(t) + nutation.obliquity));
  return product(
    product(inclination, axisRotation(3, -(psi + nutation.longitude))),
    product(axisRotation(1, phi), axisRotation(3, gamma)),
  );
}

/** Mean obliquity of the ecliptic, rad. Source: IAU 2006, IERS Conventions (2010) eq. 5.40. */
const meanObliquity = (t: number): number =>
  polynomial(t, 84381.406, -46.836769, -0.0001831, 0.0020034, -0.000000576, -0.0000000434) * ARCSECOND;

/**
 * Greenwich apparent sidereal time less the Earth rotation angle, rad.
 * Accuracy: 2 microarcseconds beside the nutation's own error. Source: IAU 2006, IERS Conventions (2010) eqs. 5.31, 5.32
 * and table 5.2e (the terms above 0.5 microarcsecond).
 */
export function siderealLessRotation(t: number, n: Nutation): number {
  const precession = polynomial(t, 0.014506, 4612.156534, 1.3915817, -0.00000044, -0.000029956, -0.0000000368);
  const { node, latitudeArgument, elongation } = n;
  const fromSun = 2 * latitudeArgument - 2 * elongation;
  const complementary =
    2640.96e-6 * Math.sin(node) +
    63.52e-6 * Math.sin(2 * node) +
    11.75e-6 * Math.sin(fromSun + 3 * node) +
    11.21e-6 * Math.sin(fromSun + node) -
    4.55e-6 * Math.sin(fromSun + 2 * node) +
    2.02e-6 * Math.sin(2 * latitudeArgument + 3 * node) +
    1.98e-6 * Math.sin(2 * latitudeArgument + node) -
    1.72e-6 * Math.sin(3 * node) -
    1.41e-6 * Math.sin(n.sunAnomaly + node) -
    1.26e-6 * Math.sin(n.sunAnomaly - node) -
    0.63e-6 * Math.sin(n.moonAnomaly + node) -
    0.63e-6 * Math.sin(n.moonAnomaly - node) -
    0.87e-6 * t * Math.sin(node);
  return (precession + complementary) * ARCSECOND + n.longitude * Math.cos(meanObliquity(t));
}

/**
 * The celestial intermediate pole and origin by TT seconds since J2000.0: X, Y (dimensionless) and kappa, the angle that
 * added to the Earth rotation angle turns the intermediate axes onto the terrestrial ones. All three are slow.
 */
export const intermediatePole = new TabulatedFunction(3, 2 * DAY, 12, (ttSeconds) => {
  const t = ttSeconds / century;
  const nutation = nutation2000B(t);
  const ofDate = trueOfDate(t, nutation);
  const x = ofDate[6];
  const y = ofDate[7];
  const q = poleMatrix(x, y);
  // The true axes of date seen from the unrotated ones differ by a rotation about the pole; its angle ties the intermediate origin to the equinox.
  const c = ofDate[0] * q[0] + ofDate[1] * q[1] + ofDate[2] * q[2];
  const s = ofDate[0] * q[3] + ofDate[1] * q[4] + ofDate[2] * q[5];
  return [x, y, siderealLessRotation(t, nutation) + Math.atan2(s, c)];
});

/** Rotation from GCRF to axes with the pole at (X, Y) and no rotation about it. Source: IERS Conventions (2010) eq. 5.10. */
function poleMatrix(x: number, y: number): Mat3 {
  const z = Math.sqrt(1 - x * x - y * y);
  const a = 1 / (1 + z);
  return [1 - a * x * x, -a * x * y, -x, -a * x * y, 1 - a * y * y, -y, x, y, z];
}
