import {
  EarthAxes,
  type EarthOrientation,
  geodeticToFixed,
  geoidHeight,
  normalToFixed,
  normalToFixedRate,
} from "../bodies/index.ts";
import { cross, dot, norm, scale, type Vec3 } from "../numeric/index.ts";
import { type Instant, secondsBetween } from "../time/index.ts";
import type { DescriptionOf, GeodeticPoint, HeightOf } from "./description.ts";
import { impossibleTable, requireRising } from "./impossible.ts";
import { SurfaceTrajectory, surfaceReference, type TrackLeg, TrackTrajectory } from "./surface.ts";
import type { Trajectory } from "./trajectory.ts";

/**
 * One sigma of the height's equivalent in potential: the field that gives the potential ends at degree 4 (15 m); above the
 * geoid the same field gives the geoid, and what is left is how gravity differs along the height.
 * Common practice, no source: 64 m/n for the height left out beyond degree n (Kaula's rule), 1e-4 of gravity.
 */
const heightDoubt = (heightOf: HeightOf, height: number): number =>
  heightOf === "geoid" ? 0.3 + 1e-4 * Math.abs(height) : 15;

/** A clock at rest. `moment`: any near the work. */
export function buildSurface(
  { latitude, longitude, height, heightOf }: DescriptionOf<"surface">,
  orientation: EarthOrientation,
  moment: Instant,
): Trajectory {
  const reference = surfaceReference(moment);
  const above = height + (heightOf === "geoid" ? geoidHeight(latitude, longitude) : 0);
  const position = geodeticToFixed(latitude, longitude, above);
  return new SurfaceTrajectory(
    reference,
    position,
    heightDoubt(heightOf, height),
    new EarthAxes(reference, orientation),
  );
}

/** A clock that is carried. Errors: impossible-table. */
export function buildTrack(description: DescriptionOf<"track">, orientation: EarthOrientation): Trajectory {
  const { points, heightOf } = description;
  if (points.length < 2) throw impossibleTable(["points"], "A track needs two points.", "at least 2 points");
  requireRising(
    points.map((point) => point.at),
    "points",
    "at",
  );
  const reference = points[0]!.at;
  const axes = new EarthAxes(reference, orientation);
  const above = points.map((p) => p.height + (heightOf === "geoid" ? geoidHeight(p.latitude, p.longitude) : 0));
  const legs: TrackLeg[] = [];
  for (let i = 0; i + 1 < points.length; i++) {
    const start = secondsBetween(reference, points[i]!.at);
    const duration = secondsBetween(points[i]!.at, points[i + 1]!.at);
    legs.push(leg(normal(points[i]!), normal(points[i + 1]!), above[i]!, above[i + 1]!, start, duration, i + 1));
  }
  const highest = Math.max(...points.map((p) => Math.abs(p.height)));
  return new TrackTrajectory(reference, points.at(-1)!.at, legs, heightDoubt(heightOf, highest), axes);
}

const normal = ({ latitude, longitude }: GeodeticPoint): Vec3 => [
  Math.cos(latitude) * Math.cos(longitude),
  Math.cos(latitude) * Math.sin(longitude),
  Math.sin(latitude),
];

/** A leg on which the normal turns evenly along a great circle and the height changes evenly. */
function leg(
  from: Vec3,
  to: Vec3,
  low: number,
  high: number,
  start: number,
  duration: number,
  index: number,
): TrackLeg {
  const axis = cross(from, to);
  const sine = norm(axis);
  const angle = Math.atan2(sine, dot(from, to));
  if (Math.PI - angle < 1e-6) {
    throw impossibleTable(
      ["points", index],
      "Two neighbouring points are antipodes: the way between them is open.",
      "a point on the way between them",
    );
  }
  const metresPerSecond = Math.hypot(angle * 6.4e6, high - low) / duration;
  if (metresPerSecond > 12_000) {
    const speed = (metresPerSecond / 1000).toPrecision(3);
    throw impossibleTable(
      ["points", index],
      `Between two points the track would move at ${speed} km/s.`,
      "a speed below 12 km/s; an orbit is a state-vector or a state-table",
    );
  }
  const pole: Vec3 = sine === 0 ? [0, 0, 0] : scale(axis, 1 / sine);
  const across = cross(pole, from);
  const turnRate = angle / duration;
  const climb = (high - low) / duration;
  return {
    start,
    duration,
    at(fraction) {
      const c = Math.cos(angle * fraction);
      const s = Math.sin(angle * fraction);
      const n: Vec3 =
        sine === 0 ? from : [from[0] * c + across[0] * s, from[1] * c + across[1] * s, from[2] * c + across[2] * s];
      const rate = scale(cross(pole, n), turnRate);
      const height = low + (high - low) * fraction;
      return { position: normalToFixed(n, height), velocity: normalToFixedRate(n, rate, height, climb) };
    },
  };
}
