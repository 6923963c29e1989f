import type { Vec3 } from "../numeric/index.ts";
import { C2, constants, EARTH_ROTATION, GM_EARTH, LG } from "../units/index.ts";
import { type FieldSample, sampleField } from "./geopotential.ts";

const a = constants.ellipsoidRadius.value;
const flattening = 1 / constants.ellipsoidInverseFlattening.value;
const e2 = flattening * (2 - flattening);
const b = a * (1 - flattening);

/**
 * Earth-fixed position (m) of a geodetic latitude, longitude (rad) and height above the WGS 84 ellipsoid (m).
 * Source: closed form of the ellipsoid, NIMA TR8350.2 (WGS 84); held against the published vectors of
 * the IAU-derived routines in the tests.
 */
export function geodeticToFixed(latitude: number, longitude: number, height: number): Vec3 {
  const s = Math.sin(latitude);
  const c = Math.cos(latitude);
  const n = a / Math.sqrt(1 - e2 * s * s);
  return [(n + height) * c * Math.cos(longitude), (n + height) * c * Math.sin(longitude), (n * (1 - e2) + height) * s];
}

/** The same from the unit vector of the ellipsoid's outward normal. */
export function normalToFixed(normal: Vec3, height: number): Vec3 {
  const [x, y, z] = normal;
  const root = Math.sqrt(a * a * (x * x + y * y) + b * b * z * z);
  return [((a * a) / root + height) * x, ((a * a) / root + height) * y, ((b * b) / root + height) * z];
}

/** Its derivative when the normal turns at `normalRate` (1/s) and the height changes at `heightRate` (m/s). */
export function normalToFixedRate(normal: Vec3, normalRate: Vec3, height: number, heightRate: number): Vec3 {
  const [x, y, z] = normal;
  const [xr, yr, zr] = normalRate;
  const root = Math.sqrt(a * a * (x * x + y * y) + b * b * z * z);
  const rootRate = (a * a * (x * xr + y * yr) + b * b * z * zr) / root;
  const across = (a * a) / root + height;
  const along = (b * b) / root + height;
  const acrossRate = (-a * a * rootRate) / (root * root) + heightRate;
  const alongRate = (-b * b * rootRate) / (root * root) + heightRate;
  return [across * xr + acrossRate * x, across * yr + acrossRate * y, along * zr + alongRate * z];
}

/** Distance of the ellipsoid from the centre in the direction of a position, m. */
export function ellipsoidRadiusTowards(position: Vec3): number {
  const [x, y, z] = position;
  const r2 = x * x + y * y + z * z;
  const along = (z * z) / r2;
  return b / Math.sqrt(1 - e2 * (1 - along));
}

const field: FieldSample = { oblateness: 0, higher: 0, x: 0, y: 0, z: 0 };

/** Potential of gravity (attraction and rotation) at an Earth-fixed position, m2/s2, of the field in use. */
function gravityPotential(position: Vec3): number {
  const [x, y, z] = position;
  sampleField(x, y, z, field);
  const rotation = 0.5 * EARTH_ROTATION * EARTH_ROTATION * (x * x + y * y);
  return GM_EARTH / Math.hypot(x, y, z) + field.oblateness + field.higher + rotation;
}

/**
 * Height of the geoid above the ellipsoid (m), of the field in use: where gravity's potential is L_G c^2, so that a
 * clock at rest there keeps TT by construction. Accuracy: as a height 15 m one sigma (the field ends at degree 4); as a
 * clock rate above the geoid far better, for the same field is used for both.
 */
export function geoidHeight(latitude: number, longitude: number): number {
  let height = 0;
  for (let i = 0; i < 6; i++) {
    const excess = gravityPotential(geodeticToFixed(latitude, longitude, height)) - LG * C2;
    height += excess / 9.8; // Newton with mean gravity; converges by 1e-3 a step
  }
  return height;
}
