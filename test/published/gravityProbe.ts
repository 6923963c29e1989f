import { buildTrajectory } from "../../src/orbit/index.ts";
import { ProperTime } from "../../src/relativity/index.ts";
import { defaultLeapSeconds, parseInstant } from "../../src/time/index.ts";
import { termsNamed } from "./bench.ts";
import type { Row } from "./row.ts";

const moment = parseInstant("2026-03-01T00:00:00Z", "UTC", defaultLeapSeconds);

/** What gravitation alone gives a clock at a height (m) over the equator against one on the geoid. */
function redshift(height: number): number {
  const place = { latitude: 0, longitude: 0, height, heightOf: "ellipsoid" } as const;
  const clock = buildTrajectory({ kind: "surface", ...place }, { ut1MinusTai: -37, xPole: 0, yPole: 0 }, moment);
  const terms = termsNamed("earth-monopole", "earth-oblateness", "earth-higher", "reference-surface");
  return new ProperTime(clock, terms, 0).rates(0).reduce((sum, rate) => sum + rate);
}

/** The maser that was thrown up in 1976. */
export const gravityProbe: readonly Row[] = [
  {
    id: "H07",
    what: "redshift at the top, 10 000 km, against the geoid",
    inputs: { h_m: 10_000_000 },
    published: 4.5e-10,
    got: () => redshift(10_000_000),
    tolerance: 5e-12,
    unit: "1",
    source: 'Vessot & Levine, NASA CR-161409 (1979) summary: "some 4.5 parts in 10^10"',
    standing: "read",
    place: "orbit: a surface at 10 000 km; relativity: ProperTime.rates without velocity",
    explained:
      "A loose round figure of a summary. The same experiment's 4.36e-10 would need a height near 10 620 km, not 10 000 km.",
  },
];
