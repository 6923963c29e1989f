import { dot } from "../../src/numeric/index.ts";
import { eccentricAnomaly, type KeplerianElements, twoBodyState } from "../../src/orbit/index.ts";
import { broadcastEccentricityTerm, endTerm, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { GM_EARTH } from "../../src/units/index.ts";
import { countedFrequency, presetTerm } from "./bench.ts";
import { gpsGm } from "./broadcastMessage.ts";
import type { Row } from "./row.ts";

const preset = -4.4647e-10;

/** Greatest difference of the two forms of the periodic term over one revolution, s. */
function formsApart(semiMajorAxis: number, eccentricity: number): number {
  const elements: KeplerianElements = {
    semiMajorAxis,
    eccentricity,
    inclination: 0.96,
    node: 1,
    perigeeArgument: 2,
    meanAnomaly: 0,
  };
  const motion = Math.sqrt(GM_EARTH / semiMajorAxis ** 3);
  let most = 0;
  for (let degree = 0; degree < 360; degree++) {
    const meanAnomaly = (degree * Math.PI) / 180;
    const { position, velocity } = twoBodyState(elements, meanAnomaly / motion);
    const anomaly = eccentricAnomaly(meanAnomaly, eccentricity);
    const broadcast = broadcastEccentricityTerm(GM_EARTH, semiMajorAxis, eccentricity, anomaly);
    most = Math.max(most, Math.abs(endTerm(dot(position, velocity)) - broadcast));
  }
  return most;
}

/** The interface specification of GPS. */
export const gpsInterfaceSpecification: readonly Row[] = [
  {
    id: "G01",
    what: "F with the mu of GPS",
    inputs: { mu: gpsGm },
    published: -4.442807633e-10,
    got: () => broadcastEccentricityTerm(gpsGm, 1, 1, Math.PI / 2),
    tolerance: 5e-20,
    unit: "s/m^0.5",
    source: "IS-GPS-200 20.3.3.3.3.1",
    standing: "read",
    place: "relativity: broadcastEccentricityTerm at e = 1, sqrt(A) = 1, sin E = 1",
  },
  {
    id: "G03",
    what: "factory offset on 10.23 MHz",
    inputs: { dff: preset },
    published: -0.0045674,
    got: () => presetTerm(preset, 1).rate * 10.23e6,
    tolerance: 5e-8,
    unit: "Hz",
    source: "IS-GPS-200 3.3.1.1",
    standing: "read",
    place: "clock: oscillatorTerms, the term preset",
  },
  {
    id: "G04",
    what: "nominal frequency on board",
    inputs: { dff: preset, f0_Hz: 10_230_000 },
    published: 10_229_999.9954326,
    got: () => countedFrequency(preset, 10_230_000),
    tolerance: 5e-8,
    unit: "Hz",
    source: "IS-GPS-200E 3.3.1.1",
    standing: "read",
    place: "clock: oscillatorTerms and durationToTicks over 1e6 s",
    note: "A figure with one 9 too many is in circulation.",
  },
  {
    id: "G06",
    what: "mean rate on the nominal orbit",
    inputs: { a_m: 26_561_400, e: 0 },
    published: 4.4647e-10,
    got: () => twoBodyMeanRate(26_561_400),
    tolerance: 5e-15,
    unit: "1",
    source: "IS-GPS-200 3.3.1.1 / Ashby 2003, Living Rev. Relativity 6, 1 eq.(35)",
    standing: "read",
    place: "relativity: twoBodyMeanRate",
  },
  {
    id: "G14",
    what: "-2 r.v/c^2 less F e sqrt(a) sin E, most",
    inputs: { a_m: 26_561_400, e: 0.013 },
    published: 0,
    got: () => formsApart(26_561_400, 0.013),
    tolerance: 1e-17,
    unit: "s",
    source: "IS-GPS-200 20.3.3.3.3.1 alternative formula",
    standing: "derived",
    place: "orbit: twoBodyState, eccentricAnomaly; relativity: endTerm, broadcastEccentricityTerm",
    note: "Exact on an undisturbed orbit only; rows of the real orbits show what J2 makes of it.",
  },
];
