import { C2, GM_EARTH } from "../units/index.ts";
import type { RateTerm } from "./rateTerm.ts";

/** -GM/(r c^2). Source: IERS Conventions (2010) eq. 10.6, the potential's monopole. */
export const earthMonopole: RateTerm = {
  term: "earth-monopole",
  label: "Earth's gravity, monopole (weak field)",
  needs: [],
  rate: (environment) => -GM_EARTH / (environment.distance * C2),
};
