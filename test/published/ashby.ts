import { type FieldSample, sampleField } from "../../src/bodies/index.ts";
import { twoBodyState } from "../../src/orbit/index.ts";
import { broadcastEccentricityTerm, ProperTime, rateTerms, twoBodyMeanRate } from "../../src/relativity/index.ts";
import { C2, constants, EARTH_ROTATION, GM_EARTH } from "../../src/units/index.ts";
import { termsNamed, twoBodyTable } from "./bench.ts";
import type { Row } from "./row.ts";

const paper = "Ashby 2003, Living Rev. Relativity 6, 1";
const equator = constants.ellipsoidRadius.value;

function fieldAtEquator(): FieldSample {
  const out: FieldSample = { oblateness: 0, higher: 0, x: 0, y: 0, z: 0 };
  sampleField(equator, 0, 0, out);
  return out;
}

const monopole = (): number => GM_EARTH / (equator * C2);
const quadrupole = (): number => fieldAtEquator().oblateness / C2;
const rotation = (): number => (EARTH_ROTATION * equator) ** 2 / (2 * C2);

/** Half the swing, ns, of the time integrated along an elliptical orbit beside the line of its mean rate. */
function integratedAmplitude(semiMajorAxis: number, eccentricity: number): number {
  const elements = { semiMajorAxis, eccentricity, inclination: 0.96, node: 1, perigeeArgument: 2, meanAnomaly: 0 };
  const period = 2 * Math.PI * Math.sqrt(semiMajorAxis ** 3 / GM_EARTH);
  const table = twoBodyTable(elements, 300, Math.ceil(period / 300) + 1);
  const time = new ProperTime(table, termsNamed("velocity", "earth-monopole", "reference-surface"), 0);
  let least = 0;
  let most = 0;
  for (let t = 0; t <= period; t += 60) {
    const integrated = time.between(0, t).reduce((sum, part) => sum + part);
    const beside = integrated - twoBodyMeanRate(semiMajorAxis) * t;
    least = Math.min(least, beside);
    most = Math.max(most, beside);
  }
  return ((most - least) / 2) * 1e9;
}

/** Size of the Moon's tidal term for a clock on the line to the Moon. */
function lunarTide(radius: number, distance: number): number {
  const { position, velocity } = twoBodyState(
    { semiMajorAxis: radius, eccentricity: 0, inclination: 0, node: 0, perigeeArgument: 0, meanAnomaly: 0 },
    0,
  );
  const state = Float64Array.of(...position, ...velocity);
  const moon = Float64Array.of(distance, 0, 0);
  const speedSquared = GM_EARTH / radius;
  const field = fieldAtEquator();
  const term = rateTerms.find((one) => one.term === "moon-tide")!;
  return Math.abs(term.rate({ state, distance: radius, speedSquared, field, sun: moon, moon }));
}

/** The potential of the geoid and the clocks of navigation satellites. */
export const ashby: readonly Row[] = [
  {
    id: "K08",
    what: "geoid potential, part GM/(a1 c^2)",
    inputs: { GM: 3.986004418e14, a1: equator },
    published: 6.95348e-10,
    got: monopole,
    tolerance: 1e-15,
    unit: "1",
    source: `${paper} eq.(18)`,
    standing: "from memory",
    place: "units: GM_EARTH, ellipsoid radius",
    note: "6.953485e-10: the printed figure is cut off, not rounded.",
  },
  {
    id: "K09",
    what: "geoid potential, part GM J2/(2 a1 c^2)",
    inputs: { J2: 0.00108263 },
    published: 3.76e-13,
    got: quadrupole,
    tolerance: 5e-16,
    unit: "1",
    source: `${paper} sec.5 text`,
    standing: "read",
    place: "bodies: sampleField at the equator, its J2 part",
    note: "The paper has the potential's sign, negative.",
  },
  {
    id: "K10",
    what: "geoid potential, part omega^2 a1^2/(2 c^2)",
    inputs: { omega: 7.2921151467e-5 },
    published: 1.203e-12,
    got: rotation,
    tolerance: 5e-16,
    unit: "1",
    source: `${paper} eq.(18)`,
    standing: "from memory",
    place: "units: EARTH_ROTATION",
  },
  {
    id: "K11",
    what: "geoid potential, sum of the three parts",
    inputs: {},
    published: 6.96927e-10,
    got: () => monopole() + quadrupole() + rotation(),
    tolerance: 2e-15,
    unit: "1",
    source: `${paper} eq.(18)`,
    standing: "from memory",
    place: "bodies: sampleField; units",
    note: "A geoid of J2 alone lies 0.7e-15 below L_G; TT uses L_G.",
  },
  {
    id: "G12",
    what: "eccentricity amplitude, e = 0.01",
    inputs: { a_m: 26_561_400, e: 0.01 },
    published: 22.9,
    got: () => Math.abs(broadcastEccentricityTerm(GM_EARTH, 26_561_400, 0.01, Math.PI / 2)) * 1e9,
    tolerance: 0.05,
    unit: "ns",
    source: `${paper} sec.5 (e=0.01)`,
    standing: "from memory",
    place: "relativity: broadcastEccentricityTerm",
  },
  {
    id: "G13",
    what: "eccentricity amplitude, e = 0.02, integrated",
    inputs: { a_m: 26_561_400, e: 0.02 },
    published: 45.8,
    got: () => integratedAmplitude(26_561_400, 0.02),
    tolerance: 0.05,
    unit: "ns",
    source: "ICD maximum e (0.03 in field, 0.02 spec); Ashby",
    standing: "from memory",
    place: "relativity: ProperTime along a state-table of orbit: buildTrajectory",
  },
  {
    id: "G25",
    what: "rate of NTS-2 as measured in 1977",
    inputs: { a_m: 26_561_750 },
    published: 442.5,
    got: () => twoBodyMeanRate(26_561_750) * 1e12,
    tolerance: 5,
    unit: "1e-12",
    source: "Ashby; NRL NTS-2 experiment",
    standing: "read",
    place: "relativity: twoBodyMeanRate",
    note: "A measurement against the computed rate; the difference of 0.9 % is the clock's, not the theory's.",
  },
  {
    id: "G32",
    what: "rate on a circular orbit of 300 km",
    inputs: { a_m: 6_678_137 },
    published: -3e-10,
    got: () => twoBodyMeanRate(6_678_137),
    tolerance: 5e-12,
    unit: "1",
    source: `${paper} Fig.2 text`,
    standing: "from memory",
    place: "relativity: twoBodyMeanRate",
  },
  {
    id: "G33",
    what: "Moon's tidal term at the GPS radius, size",
    inputs: { r: 26_561_400, D: 384_400_000 },
    published: 7e-16,
    got: () => lunarTide(26_561_400, 384_400_000),
    tolerance: 3.5e-16,
    unit: "1",
    source: 'Ashby: "few parts in 10^16"; Ashby & Weiss: "no more than a few parts in 10^15"',
    standing: "derived",
    place: "relativity: the term moon-tide, whole bracket, on the line to the Moon",
    note: "Order of magnitude: the direct potential (1e-12) has to cancel.",
  },
];
