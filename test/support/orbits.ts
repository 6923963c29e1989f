import { EarthAxes } from "../../src/bodies/index.ts";
import type { Vec3 } from "../../src/numeric/index.ts";
import { type KeplerianElements, type Trajectory, twoBodyState } from "../../src/orbit/index.ts";
import { defaultLeapSeconds, type Instant, parseInstant } from "../../src/time/index.ts";
import { DEGREE } from "../../src/units/index.ts";

/** Orbits of every class the tool is used for; invented, round figures. */
export const orbitClasses = {
  "low 400 km, 51.6 deg": elements(6_778e3, 0.001, 51.6),
  "12 h, 55 deg": elements(26_560e3, 0.01, 55),
  geostationary: elements(42_164e3, 0.0005, 0.05),
  "e = 0.74, 63.4 deg": elements(26_560e3, 0.74, 63.4),
  "lunar transfer": elements(197_000e3, 0.9665, 28.5),
} as const satisfies Record<string, KeplerianElements>;

function elements(semiMajorAxis: number, eccentricity: number, inclinationDeg: number): KeplerianElements {
  const angles = { node: 0.7, perigeeArgument: 1.9, meanAnomaly: 0.3 };
  return { semiMajorAxis, eccentricity, inclination: inclinationDeg * DEGREE, ...angles };
}

const utc = (text: string): Instant => parseInstant(text, "UTC", defaultLeapSeconds);

export const epoch = utc("2026-03-01T00:00:00Z");

/** Axes without UT1 - UTC and pole, as when nothing is given. */
export const axes = new EarthAxes(epoch, { ut1MinusTai: -37, xPole: 0, yPole: 0 });

/** An exact two-body orbit as a trajectory: what closed forms are compared along. */
export function twoBodyTrajectory(elements: KeplerianElements, pieceLength = 3600): Trajectory {
  return {
    kind: "state-table",
    reference: epoch,
    from: Number.NEGATIVE_INFINITY,
    to: Number.POSITIVE_INFINITY,
    first: null,
    last: null,
    axes,
    notices: [],
    implausible: false,
    coarse: false,
    orbitError: null,
    usesSunMoon: false,
    modelError: { fieldTruncation: () => 0, energyRate: 0, drag: () => 0 },
    energyLever: (a, b) => Math.abs(b - a),
    extend() {},
    state(t, out) {
      const { position, velocity } = twoBodyState(elements, t);
      out.set([...position, ...velocity]);
    },
    pieceOf: (t) => Math.floor(t / pieceLength),
    pieceStart: (index) => index * pieceLength,
    split: (a, b) => (b - a < 2 ? null : (a + b) / 2),
    interpolationError: () => 0,
  };
}

/** Six numbers a knot, at equal steps from 0 to `end` inclusive. */
export function tabulate(state: (t: number) => { position: Vec3; velocity: Vec3 }, step: number, end: number) {
  const count = Math.round(end / step) + 1;
  const times = Float64Array.from({ length: count }, (_, i) => i * step);
  const states = new Float64Array(6 * count);
  for (let i = 0; i < count; i++) {
    const { position, velocity } = state(i * step);
    states.set([...position, ...velocity], 6 * i);
  }
  return { times, states };
}
