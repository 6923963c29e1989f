import { type EarthAxes, ellipsoidRadiusTowards } from "../bodies/index.ts";
import { cross, dot, norm, scale, subtract, type Vec3 } from "../numeric/index.ts";
import { type Notice, type Place, Problem } from "../problem/index.ts";
import { C, C2, GM_EARTH } from "../units/index.ts";
import { type OsculatingElements, osculatingElements } from "./elements.ts";
import type { Frame, Kinematics } from "./frames.ts";
import { outermost } from "./propagated.ts";

/** The ellipsoid's polar radius, m: a perigee below it lies inside the Earth everywhere. */
const insideEarth = 6_356_752;
/** The deepest place on which a clock can be, below the ellipsoid, m. */
const deepest = 12_000;

const km = (metres: number): string => `${Math.round(metres / 1000)} km`;

/** Refuses what cannot be a clock near the Earth. `place`: where the state stands in the request. */
export function requirePossible(place: Place, state: Kinematics): void {
  const r = norm(state.position);
  const fault = (field: string, expected: string) => [{ place: [...place, field], expected }];
  if (r > outermost) {
    const hint = r / 1000 > insideEarth && r / 1000 < outermost ? " Were metres given instead of kilometres?" : "";
    throw new Problem(
      "impossible-state",
      `The position is ${km(r)} from the Earth's centre, beyond the reach of the geocentric model.${hint}`,
      fault("positionKm", "a position in km within 1 500 000 km of the Earth's centre"),
    );
  }
  if (!(r >= ellipsoidRadiusTowards(state.position) - deepest)) {
    const hint = r > 6_300 && r < 500_000 ? " Were thousands of kilometres given?" : "";
    throw new Problem(
      "impossible-state",
      `The position is inside the Earth, ${r < 10_000 ? `${r.toPrecision(4)} m` : km(r)} from its centre.${hint}`,
      fault("positionKm", "a position outside the Earth, in km"),
    );
  }
  requireSlowerThanLight([...place, "velocityKmPerS"], state.velocity);
}

function requireSlowerThanLight(place: Place, velocity: Vec3): void {
  const v = norm(velocity);
  if (v < C) return;
  const hint = v / 1000 < 20_000 ? " Were metres per second given instead of km/s?" : "";
  throw new Problem(
    "impossible-state",
    `The speed ${(v / 1000).toPrecision(7)} km/s is not below that of light.${hint}`,
    [{ place, expected: "a velocity in km/s below 299 792.458 km/s" }],
  );
}

const isOrbit = (e: OsculatingElements): boolean => e.eccentricity < 1 && e.perigee >= insideEarth;

function inWords(e: OsculatingElements): string {
  const perigee =
    e.perigee < insideEarth
      ? `a perigee ${km(insideEarth - e.perigee)} inside the Earth`
      : `a perigee of ${km(e.perigee)} from the centre`;
  return `an eccentricity of ${e.eccentricity.toPrecision(3)} and ${perigee}`;
}

/**
 * Whether a state makes sense as an orbit in its frame, and what was probably meant when not: a perigee inside the Earth;
 * an eccentric orbit that becomes circular when the Earth's rotation is added (or taken away); an escape that becomes an
 * orbit when km/s are read as m/s. `given` as in the request, `inertial` the same in GCRF. Null: nothing to say.
 */
export function implausibleState(
  frame: Frame,
  given: Kinematics,
  inertial: Kinematics,
  axes: EarthAxes,
  t: number,
): Omit<Notice, "place"> | null {
  const asGiven = osculatingElements(inertial.position, inertial.velocity);
  const rotating = cross(axes.angularVelocity(t), inertial.position);
  const fixed = frame === "ITRF";
  // The other reading: an inertial velocity that was Earth-fixed, or an Earth-fixed one that was inertial.
  const otherVelocity = fixed ? subtract(inertial.velocity, rotating) : addRotation(inertial.velocity, rotating);
  const other = osculatingElements(inertial.position, otherVelocity);
  const circular = asGiven.eccentricity > 0.1 && other.eccentricity < 0.02;
  const inside = asGiven.perigee < insideEarth;
  const slower = osculatingElements(inertial.position, scale(given.velocity, 1e-3));
  const escapes = asGiven.eccentricity >= 1 && isOrbit(slower);
  if (!inside && !circular && !escapes) return null;
  const start = `As given in ${frame} the orbit has ${inWords(asGiven)}`;
  const meant =
    circular || (inside && isOrbit(other))
      ? fixed
        ? `; without the Earth's rotation it has ${inWords(other)}: an inertial velocity was probably meant, not ITRF.`
        : `; with the Earth's rotation added it has ${inWords(other)}: Earth-fixed components were probably meant, frame ITRF.`
      : escapes
        ? `; read as m/s the velocity gives ${inWords(slower)}: m/s were probably given instead of km/s.`
        : ": check units, frame and the order of the components.";
  return { code: "implausible-orbit", text: start + meant };
}

const addRotation = (v: Vec3, w: Vec3): Vec3 => [v[0] + w[0], v[1] + w[1], v[2] + w[2]];

/**
 * Whether a table's velocities follow gravity: the change of velocity over each interval against the central attraction
 * along it, summed over the table. Over 1 % is implausible for a free orbit; the rotation of the Earth is tried as the
 * reason. `states` in GCRF (six numbers a knot).
 */
export function implausibleTable(
  frame: Frame,
  times: Float64Array,
  states: Float64Array,
  axes: EarthAxes,
): Omit<Notice, "place"> | null {
  const asGiven = disagreement(times, states);
  if (asGiven === null || asGiven < 0.01) return null;
  // The other reading of the same numbers: Earth-fixed where an inertial frame was named, or the reverse.
  const otherStates = states.slice();
  for (let i = 0; i < times.length; i++) {
    const position: Vec3 = [states[6 * i]!, states[6 * i + 1]!, states[6 * i + 2]!];
    const velocity: Vec3 = [states[6 * i + 3]!, states[6 * i + 4]!, states[6 * i + 5]!];
    const other =
      frame === "ITRF"
        ? axes.toEarthFixed(times[i]!, position, velocity)
        : axes.toInertial(times[i]!, position, velocity);
    otherStates.set([...other.position, ...other.velocity], 6 * i);
  }
  const other = disagreement(times, otherStates);
  const percent = (x: number): string => `${(100 * x).toPrecision(2)} %`;
  const start = `The table's change of velocity in ${frame} disagrees with gravity by ${percent(asGiven)}`;
  if (other !== null && other < 0.01) {
    return {
      code: "implausible-orbit",
      text:
        frame === "ITRF"
          ? `${start}; read as inertial by ${percent(other)}: an inertial frame was probably meant.`
          : `${start}; read as Earth-fixed by ${percent(other)}: Earth-fixed components were probably meant, frame ITRF.`,
    };
  }
  return { code: "implausible-orbit", text: `${start}: thrust, a wrong frame or wrong units; check the table.` };
}

/** Sum of |change of velocity - integral of gravity| over the sum of |integral of gravity|; null when too coarse to say. */
function disagreement(times: Float64Array, states: Float64Array): number | null {
  let off = 0;
  let all = 0;
  for (let i = 0; i + 1 < times.length; i++) {
    const dt = times[i + 1]! - times[i]!;
    const a: Vec3 = [states[6 * i]!, states[6 * i + 1]!, states[6 * i + 2]!];
    const b: Vec3 = [states[6 * i + 6]!, states[6 * i + 7]!, states[6 * i + 8]!];
    const r = norm(a);
    if (Math.sqrt(GM_EARTH / r ** 3) * dt > 0.5) continue;
    const va: Vec3 = [states[6 * i + 3]!, states[6 * i + 4]!, states[6 * i + 5]!];
    const vb: Vec3 = [states[6 * i + 9]!, states[6 * i + 10]!, states[6 * i + 11]!];
    // The place in the middle by a cubic through both ends; Simpson's rule for the attraction.
    const middle: Vec3 = [0, 1, 2].map((k) => (a[k]! + b[k]!) / 2 + (dt / 8) * (va[k]! - vb[k]!)) as unknown as Vec3;
    const pull = [0, 1, 2].map(
      (k) => (dt / 6) * (attraction(a)[k]! + 4 * attraction(middle)[k]! + attraction(b)[k]!),
    ) as unknown as Vec3;
    off += norm(subtract(subtract(vb, va), pull));
    all += norm(pull);
  }
  return all === 0 ? null : off / all;
}

function attraction(position: Vec3): Vec3 {
  return scale(position, -GM_EARTH / norm(position) ** 3);
}

/** Beyond 1e-3 of light the sum of the terms is approximate near masses. */
export const isFast = (velocity: Vec3): boolean => dot(velocity, velocity) > 1e-6 * C2;
