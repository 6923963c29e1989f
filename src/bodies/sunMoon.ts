import { AstroTime, Body, GeoMoon, HelioVector, RotationAxis } from "astronomy-engine";
import { TabulatedFunction } from "../numeric/index.ts";
import { DAY, DEGREE } from "../units/index.ts";

/** The au of the library's vectors, m (IAU 2012 Resolution B2, exact). */
const au = 149_597_870_700;

/** Named in the evidence of every answer that used a position of the Sun or the Moon. */
export const sunMoonSource =
  "astronomy-engine 2.1.19 (truncated VSOP87 and ELP), tabulated; Sun to 1000 km, Moon to 20 km";

function terrestrialTime(ttSeconds: number): AstroTime {
  return AstroTime.FromTerrestrialTime(ttSeconds / DAY);
}

/**
 * Geocentric positions in metres, axes of J2000.0 (20 milliarcseconds from GCRF, far below the series' own error), by
 * TT seconds since J2000.0. Geometric: no light time, no aberration.
 * Accuracy: Sun 1000 km, Moon 20 km, which is 1e-5 of their tides on a clock.
 */
export const sunTable = new TabulatedFunction(3, 16 * DAY, 13, (t) => {
  const earth = HelioVector(Body.Earth, terrestrialTime(t));
  return [-earth.x * au, -earth.y * au, -earth.z * au];
});

export const moonTable = new TabulatedFunction(3, 4 * DAY, 15, (t) => {
  const moon = GeoMoon(terrestrialTime(t));
  return [moon.x * au, moon.y * au, moon.z * au];
});

/**
 * Rotation of the Moon by TT seconds since J2000.0: right ascension and declination of its pole and the angle of its prime
 * meridian, rad, growing without jumps. Mean Earth / polar axes.
 * Source: IAU working group on cartographic coordinates and rotational elements (2015), as in the library.
 */
export const moonRotation = new TabulatedFunction(3, 4 * DAY, 15, (t) => {
  const { ra, dec, spin } = RotationAxis(Body.Moon, terrestrialTime(t));
  return [ra * 15 * DEGREE, dec * DEGREE, spin * DEGREE];
});
