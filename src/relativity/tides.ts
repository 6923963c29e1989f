import { C2, GM_MOON, GM_SUN } from "../units/index.ts";
import type { Environment } from "./environment.ts";
import type { RateTerm } from "./rateTerm.ts";

/**
 * Tidal potential of a body over c^2, with the sign of a clock's rate:
 * -[GM/|b - r| - GM/|b| - GM b.r/|b|^3]/c^2. The whole bracket, not an expansion, so it holds near the body too; the
 * first two orders are taken out before anything is subtracted, so nothing cancels.
 * Source: IERS Conventions (2010) eq. 10.6; IAU 2000 Resolution B1.3.
 */
function tidalRate(gm: number, body: Float64Array, environment: Environment): number {
  const { state } = environment;
  const bx = body[0]!;
  const by = body[1]!;
  const bz = body[2]!;
  const d2 = bx * bx + by * by + bz * bz;
  const along = (state[0]! * bx + state[1]! * by + state[2]! * bz) / d2;
  const ratio2 = (environment.distance * environment.distance) / d2;
  const q = ratio2 - 2 * along;
  const root = Math.sqrt(1 + q);
  // 1/root - 1 - along = [1/root - 1 + q/2] - ratio2/2; the bracket is of second order and closed.
  const excess = (q * q * (2 + root)) / (2 * root * (1 + root) * (1 + root)) - ratio2 / 2;
  return (-gm * excess) / (Math.sqrt(d2) * C2);
}

export const sunTide: RateTerm = {
  term: "sun-tide",
  label: "Tide of the Sun (weak field)",
  needs: ["sun"],
  rate: (environment) => tidalRate(GM_SUN, environment.sun, environment),
};

export const moonTide: RateTerm = {
  term: "moon-tide",
  label: "Tide of the Moon (weak field)",
  needs: ["moon"],
  rate: (environment) => tidalRate(GM_MOON, environment.moon, environment),
};
