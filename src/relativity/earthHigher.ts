import { C2 } from "../units/index.ts";
import type { RateTerm } from "./rateTerm.ts";

/** The rest of -U/c^2 to degree and order 4. Source: IERS Conventions (2010) eq. 10.6 with eq. 6.1. */
export const earthHigher: RateTerm = {
  term: "earth-higher",
  label: "Earth's field beyond J2, to degree 4 (weak field)",
  needs: ["field"],
  rate: (environment) => -environment.field.higher / C2,
};
