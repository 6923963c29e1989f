import { C2 } from "../units/index.ts";
import type { RateTerm } from "./rateTerm.ts";

/**
 * sqrt(1 - v^2/c^2) - 1 for a squared speed in m2/s2 below c^2, written so that no digits are lost at small speeds and
 * none near c. Exact for any speed. Source: Einstein (1905), section 4.
 */
export function lorentzRate(speedSquared: number): number {
  const beta2 = speedSquared / C2;
  return -beta2 / (1 + Math.sqrt(1 - beta2));
}

/** The Lorentz factor of a speed given as a fraction of c. Source: Einstein (1905), section 3. */
export const lorentzFactor = (beta: number): number => 1 / Math.sqrt((1 - beta) * (1 + beta));

export const velocity: RateTerm = {
  term: "velocity",
  label: "Velocity (special relativity)",
  needs: [],
  rate: (environment) => lorentzRate(environment.speedSquared),
};
