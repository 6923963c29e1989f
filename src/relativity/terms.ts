import { earthHigher } from "./earthHigher.ts";
import { earthMonopole } from "./earthMonopole.ts";
import { earthOblateness } from "./earthOblateness.ts";
import type { RateTerm } from "./rateTerm.ts";
import { referenceSurface } from "./referenceSurface.ts";
import { moonTide, sunTide } from "./tides.ts";
import { velocity } from "./velocity.ts";

/** The physical terms near the Earth, in the order of every answer. */
export const rateTerms: readonly RateTerm[] = [
  velocity,
  earthMonopole,
  earthOblateness,
  earthHigher,
  sunTide,
  moonTide,
  referenceSurface,
];

export const physicalTermNames = [
  "velocity",
  "earth-monopole",
  "earth-oblateness",
  "earth-higher",
  "sun-tide",
  "moon-tide",
  "reference-surface",
] as const;

export type PhysicalTermName = (typeof physicalTermNames)[number];
