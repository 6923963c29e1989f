import { geodeticToFixed } from "../../src/bodies/index.ts";
import { durationToTicks, oscillatorTerms, rational, unbroken } from "../../src/clock/index.ts";
import { buildTrajectory, type KeplerianElements, type Trajectory, twoBodyState } from "../../src/orbit/index.ts";
import { type PhysicalTermName, ProperTime, type RateTerm, rateTerms } from "../../src/relativity/index.ts";
import { addDurations, addSeconds, type Duration, defaultLeapSeconds, parseInstant } from "../../src/time/index.ts";
import { C2 } from "../../src/units/index.ts";

/** What several of the rows need to put the project's code to work. */

const moment = parseInstant("2026-03-01T00:00:00Z", "UTC", defaultLeapSeconds);
const noOrientation = { ut1MinusTai: -37, xPole: 0, yPole: 0 };

export const termsNamed = (...names: PhysicalTermName[]): readonly RateTerm[] =>
  rateTerms.filter(({ term }) => (names as string[]).includes(term));

/** An undisturbed elliptical orbit as a table of exact states, as a user would hand one in. */
export function twoBodyTable(elements: KeplerianElements, step: number, count: number): Trajectory {
  const states = Array.from({ length: count }, (_, i) => ({
    epoch: addSeconds(moment, step * i),
    ...twoBodyState(elements, step * i),
  }));
  return buildTrajectory({ kind: "state-table", center: "Earth", frame: "GCRF", states }, noOrientation, moment);
}

const restingTerms = termsNamed("velocity", "earth-monopole", "earth-oblateness", "earth-higher", "reference-surface");

/** Rate against TT of a clock at rest on the Earth, without the tides of Sun and Moon. Angles in rad, height in m. */
export function restingRate(
  latitude: number,
  longitude: number,
  height: number,
  heightOf: "ellipsoid" | "geoid",
): number {
  const clock = buildTrajectory({ kind: "surface", latitude, longitude, height, heightOf }, noOrientation, moment);
  return new ProperTime(clock, restingTerms, 0).rates(0).reduce((sum, rate) => sum + rate);
}

/** Mean rate by speed alone of a clock that is carried along a parallel (rad) at a speed due east (m/s), over an hour. */
export function carriedRate(latitude: number, eastward: number): number {
  const step = 60;
  const [x, y] = geodeticToFixed(latitude, 0, 0);
  const turn = (eastward * step) / Math.hypot(x, y);
  const points = Array.from({ length: 61 }, (_, i) => ({
    at: addSeconds(moment, step * i),
    latitude,
    longitude: turn * i,
    height: 0,
  }));
  const track = buildTrajectory({ kind: "track", heightOf: "ellipsoid", points }, noOrientation, moment);
  const [speedPart] = new ProperTime(track, termsNamed("velocity"), 0).between(0, step * 60);
  return speedPart! / (step * 60);
}

/** Difference of rate between two heights (m) where gravity at the ellipsoid is `gravity` (m/s2). */
export function lift(gravity: number, low: number, high: number): number {
  const latitude = latitudeOfGravity(gravity);
  return restingRate(latitude, 0, high, "ellipsoid") - restingRate(latitude, 0, low, "ellipsoid");
}

/** Gravity rises from 9.780 m/s2 at the equator to 9.832 m/s2 at the pole: halving finds the place. */
function latitudeOfGravity(gravity: number): number {
  let south = 0;
  let north = Math.PI / 2;
  for (let i = 0; i < 40; i++) {
    const middle = (south + north) / 2;
    const rise = restingRate(middle, 0, 50, "ellipsoid") - restingRate(middle, 0, -50, "ellipsoid");
    if ((rise / 100) * C2 < gravity) south = middle;
    else north = middle;
  }
  return south;
}

/** Terms of an oscillator of which nothing is known but a deliberate offset, after a proper time (s). */
export function presetTerm(preset: number, properSeconds: number): { rate: number; accumulated: Duration } {
  const oscillator = {
    offset: null,
    preset,
    frequency: null,
    aging: null,
    frequencySigma: null,
    agingSigma: null,
    covariance: null,
  };
  return oscillatorTerms(oscillator, unbroken({ high: properSeconds, low: 0 }), 1)[0]!;
}

/** Ticks a second of proper time that a counter with a preset shows, counted over a million seconds. */
export function countedFrequency(preset: number, nominal: number): number {
  const span = 1e6;
  const indicated = addDurations({ seconds: span, femtoseconds: 0 }, presetTerm(preset, span).accumulated);
  const counter = { ticksPerSecond: rational(BigInt(nominal), 1n), widthBits: null, stands: "edge" } as const;
  const { ticks, fraction } = durationToTicks(indicated, counter);
  return (Number(ticks) + fraction) / span;
}
