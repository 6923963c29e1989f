export {
  C,
  C2,
  type Constant,
  constants,
  EARTH_ROTATION,
  GM_EARTH,
  GM_MOON,
  GM_SUN,
  LB,
  LG,
  TDB0,
} from "./constants.ts";
export { ARCSECOND, DAY, DEGREE, KM, NS } from "./si.ts";
