import { GM_EARTH } from "../../src/units/index.ts";
import { twoBodyTable } from "./bench.ts";
import type { Row } from "./row.ts";

/** Greatest less smallest distance from the Earth's centre over one revolution, km. */
function heightSwing(semiMajorAxis: number, eccentricity: number): number {
  const elements = { semiMajorAxis, eccentricity, inclination: 0.87, node: 1, perigeeArgument: 0.5, meanAnomaly: 0 };
  const period = 2 * Math.PI * Math.sqrt(semiMajorAxis ** 3 / GM_EARTH);
  const step = 300;
  const path = twoBodyTable(elements, step, Math.ceil(period / step) + 1);
  const state = new Float64Array(6);
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (let t = 0; t <= period; t += 10) {
    path.state(t, state);
    const r = Math.hypot(state[0]!, state[1]!, state[2]!);
    least = Math.min(least, r);
    most = Math.max(most, r);
  }
  return (most - least) / 1000;
}

/** The two satellites that were left on eccentric orbits in 2014. */
export const eccentricGalileo: readonly Row[] = [
  {
    id: "E02",
    what: "height swing of the corrected orbit",
    inputs: { a_km: 27_977.6, e: 0.1561 },
    published: 8500,
    got: () => heightSwing(27_977_600, 0.1561),
    tolerance: 300,
    unit: "km",
    source: 'ESA 2015-11-09 news: "climbing and falling some 8500 km twice per day"',
    standing: "derived",
    place: "orbit: a table of states read between its knots",
    note: "A round figure.",
  },
];
