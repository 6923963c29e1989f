import { broadcastEccentricityTerm, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { DAY, GM_EARTH } from "../../src/units/index.ts";
import { countedFrequency } from "./bench.ts";
import type { Row } from "./row.ts";

/** The interface documents of the other constellations. */
export const galileoAndGlonass: readonly Row[] = [
  {
    id: "G02",
    what: "F with the mu of Galileo",
    inputs: { mu: 3.986004418e14 },
    published: -4.442807309e-10,
    got: () => broadcastEccentricityTerm(GM_EARTH, 1, 1, Math.PI / 2),
    tolerance: 5e-20,
    unit: "s/m^0.5",
    source: "Galileo OS SIS ICD 5.1.4",
    standing: "read",
    place: "relativity: broadcastEccentricityTerm with GM_EARTH",
  },
  {
    id: "G26",
    what: "GLONASS frequency on board for 5 MHz",
    inputs: { dff: -4.36e-10 },
    published: 4.99999999782,
    got: () => countedFrequency(-4.36e-10, 5_000_000) / 1e6,
    tolerance: 5e-12,
    unit: "MHz",
    source: "GLONASS ICD 5.1 sec. 3.3.1.3",
    standing: "from memory",
    place: "clock: oscillatorTerms and durationToTicks over 1e6 s",
  },
  {
    id: "G28",
    what: "drift on Galileo's nominal orbit",
    inputs: { a_m: 29_600_318, e: 0 },
    published: 40.8,
    got: () => twoBodyMeanRate(29_600_318) * DAY * 1e6,
    tolerance: 0.05,
    unit: "us/day",
    source: "Galileo literature (4.72e-10)",
    standing: "from memory",
    place: "relativity: twoBodyMeanRate",
  },
];
