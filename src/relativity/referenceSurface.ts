import { LG } from "../units/index.ts";
import type { RateTerm } from "./rateTerm.ts";

/** +L_G: TT ticks on the rotating geoid, slower than a clock far away. Source: IAU 2000 Resolution B1.9. */
export const referenceSurface: RateTerm = {
  term: "reference-surface",
  label: "Reference surface of TT (rotating geoid)",
  needs: [],
  rate: () => LG,
  constant: true,
};
