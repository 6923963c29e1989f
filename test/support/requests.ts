/**
 * Requests of an invented mission, "Quillwort", for tests. Every value is made up; nothing here ever flew.
 */

// biome-ignore lint/suspicious/noExplicitAny: tests bend requests into shapes that no type would allow.
export type Body = any;

export const epoch = "2026-03-01T00:00:00Z";

/** The epoch and so many seconds, UTC; there is no leap second in 2026. */
export const moment = (seconds: number): string => new Date(Date.parse(epoch) + 1000 * seconds).toISOString();

export const millisecondClock = (): Body => ({
  counter: { ticksPerSecond: 1000 },
  anchor: { reading: 0, at: epoch },
});

export const mountain = (): Body => ({
  kind: "surface",
  body: "Earth",
  latitudeDeg: 46.5,
  longitudeDeg: 11.25,
  heightM: 2750,
  heightOf: "geoid",
});

export const lowOrbit = (): Body => ({
  kind: "state-vector",
  frame: "GCRF",
  epoch,
  positionKm: [6901, 0, 0],
  velocityKmPerS: [0, 4.9, 5.8],
});

/** Round once a day: cheap to propagate far. */
export const highOrbit = (): Body => ({
  kind: "state-vector",
  frame: "GCRF",
  epoch,
  positionKm: [42_166, 0, 0],
  velocityKmPerS: [0, 3.0746, 0.02],
});

/** GM of the Earth, km^3/s^2. Source: IERS Conventions (2010), table 1.1 (TCG-compatible, rounded). */
const gm = 398_600.4418;

/** States on a circle about the Earth's centre, one every `stepS` seconds from the epoch. */
export function circleTable(count: number, stepS: number, withVelocities: boolean): Body {
  const radius = 9200;
  const rate = Math.sqrt(gm / radius ** 3);
  const states = Array.from({ length: count }, (_, i) => {
    const angle = rate * stepS * i;
    const [c, s] = [Math.cos(angle), Math.sin(angle)];
    return {
      epoch: moment(stepS * i),
      positionKm: [radius * c, radius * s * 0.8, radius * s * 0.6],
      ...(withVelocities
        ? { velocityKmPerS: [-radius * rate * s, radius * rate * c * 0.8, radius * rate * c * 0.6] }
        : {}),
    };
  });
  return { kind: "state-table", frame: "GCRF", states };
}

/** A flight of four hours in two legs. */
export const flight = (): Body => ({
  kind: "track",
  body: "Earth",
  heightOf: "ellipsoid",
  points: [
    { at: epoch, latitudeDeg: 10, longitudeDeg: 20, heightM: 11_000 },
    { at: moment(7200), latitudeDeg: 14, longitudeDeg: 35, heightM: 11_500 },
    { at: moment(14_400), latitudeDeg: 9, longitudeDeg: 50, heightM: 10_000 },
  ],
});

export const correction = (changes: Body = {}): Body => ({
  clock: millisecondClock(),
  trajectory: mountain(),
  readings: [{ reading: 3_600_000 }],
  ...changes,
});

export const prediction = (changes: Body = {}): Body => ({
  clock: millisecondClock(),
  trajectory: mountain(),
  instants: [moment(3600)],
  ...changes,
});

/** A copy of `body` with the value at an RFC 6901 pointer replaced, or taken out when `value` is undefined. */
export function altered(body: Body, pointer: string, value: unknown): Body {
  const copy = structuredClone(body);
  const keys = pointer.split("/").slice(1);
  const last = keys.pop()!;
  let holder = copy;
  for (const key of keys) holder = holder[key];
  if (value === undefined) delete holder[last];
  else holder[last] = value;
  return copy;
}
