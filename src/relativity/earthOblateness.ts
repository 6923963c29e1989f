import { C2 } from "../units/index.ts";
import type { RateTerm } from "./rateTerm.ts";

/** The J2 part of -U/c^2, in the Earth's axes of date. Source: IERS Conventions (2010) eq. 10.6 with eq. 6.1. */
export const earthOblateness: RateTerm = {
  term: "earth-oblateness",
  label: "Earth's oblateness J2 (weak field)",
  needs: ["field"],
  rate: (environment) => -environment.field.oblateness / C2,
};
