export { EarthAxes, type EarthOrientation, earthRotationAngle } from "./earthRotation.ts";
export {
  ellipsoidRadiusTowards,
  geodeticToFixed,
  geoidHeight,
  normalToFixed,
  normalToFixedRate,
} from "./ellipsoid.ts";
export { type FieldSample, oblateness, oblatenessRadius, sampleField } from "./geopotential.ts";
export { nutation2000B, siderealLessRotation } from "./precessionNutation.ts";
export { moonRotation, moonTable, sunMoonSource, sunTable } from "./sunMoon.ts";
