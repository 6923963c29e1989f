import { type EarthAxes, ellipsoidRadiusTowards } from "../bodies/index.ts";
import { add, cross, dot, norm, scale, subtract, type Vec3 } from "../numeric/index.ts";
import { type Notice, type Place, Problem } from "../problem/index.ts";
import type { Instant } from "../time/index.ts";
import { C, C2, GM_EARTH, GM_MOON } from "../units/index.ts";
import { type OsculatingElements, osculatingElements } from "./elements.ts";
import { ForceModel } from "./forces.ts";
import type { Frame, Kinematics } from "./frames.ts";
import { outermost } from "./propagated.ts";
import { eccentricAnomaly } from "./twoBody.ts";

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

export function requireSlowerThanLight(place: Place, velocity: Vec3): void {
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
  const otherVelocity = fixed ? subtract(inertial.velocity, rotating) : add(inertial.velocity, rotating);
  const other = osculatingElements(inertial.position, otherVelocity);
  // Read the wrong way a nearly circular orbit gets an eccentricity of 0.01 to 0.13, by its height and inclination.
  const circular =
    (asGiven.eccentricity > 0.1 && other.eccentricity < 0.02) ||
    (asGiven.eccentricity > 0.01 && other.eccentricity < Math.min(0.004, asGiven.eccentricity / 5));
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

/**
 * Whether a table's velocities follow gravity: the change of velocity over stretches of the table against the attraction
 * of Earth, Sun and Moon along them, summed over the table. Over 1 % is implausible for a free path; the rotation of the
 * Earth is tried as the reason. `states` in GCRF (six numbers a knot), `times` in TT seconds since `first`.
 */
export function implausibleTable(
  frame: Frame,
  times: Float64Array,
  states: Float64Array,
  first: Instant,
  axes: EarthAxes,
): Omit<Notice, "place"> | null {
  const force = new ForceModel(first, axes);
  const asGiven = disagreement(times, states, force);
  if (asGiven === null || asGiven < 0.01) return null;
  // The other reading of the same numbers: Earth-fixed where an inertial frame was named, or the reverse.
  const otherStates = states.slice();
  for (let i = 0; i < times.length; i++) {
    const { position, velocity } = knot(states, i);
    const other =
      frame === "ITRF"
        ? axes.toEarthFixed(times[i]!, position, velocity)
        : axes.toInertial(times[i]!, position, velocity);
    otherStates.set([...other.position, ...other.velocity], 6 * i);
  }
  const other = disagreement(times, otherStates, force);
  const percent = (x: number): string => `${(100 * x).toPrecision(2)} %`;
  const start = `The table's change of velocity in ${frame} disagrees with gravity by ${percent(asGiven)}`;
  if (other !== null && other < Math.min(0.05, asGiven / 3)) {
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

function knot(states: Float64Array, i: number): Kinematics {
  const [x, y, z, vx, vy, vz] = states.subarray(6 * i, 6 * i + 6);
  return { position: [x!, y!, z!], velocity: [vx!, vy!, vz!] };
}

/** Turns of an orbit, rad: shorter stretches would show the table's rounding, longer ones the error of Simpson's rule. */
const shortestStretch = 0.05;
const longestStretch = 0.5;

/** Sum of |change of velocity - integral of gravity| over the sum of |integral of gravity|; null when too coarse to say. */
function disagreement(times: Float64Array, states: Float64Array, force: ForceModel): number | null {
  let off = 0;
  let all = 0;
  const moment = force.moment(0);
  const pulled = new Float64Array(3);
  const attraction = (position: Vec3, t: number): Vec3 => {
    force.moment(t, moment);
    force.acceleration(moment, ...position, pulled, 0);
    return [pulled[0]!, pulled[1]!, pulled[2]!];
  };
  let i = 0;
  while (i + 1 < times.length) {
    const a = knot(states, i);
    force.moment(times[i]!, moment);
    const fromMoon = norm(subtract(a.position, [moment.moon[0]!, moment.moon[1]!, moment.moon[2]!]));
    const aboutEarth = Math.sqrt(GM_EARTH / norm(a.position) ** 3);
    const aboutMoon = Math.sqrt(GM_MOON / fromMoon ** 3);
    const turn = Math.max(aboutEarth, aboutMoon);
    let j = i + 1;
    while (j + 1 < times.length && (times[j]! - times[i]!) * turn < shortestStretch) j++;
    const dt = times[j]! - times[i]!;
    const b = knot(states, j);
    const [from, to] = [times[i]!, times[j]!];
    i = j;
    if (dt * turn > longestStretch) {
      const step = aboutMoon > 0.1 * aboutEarth ? null : keplerStep(a, dt);
      if (step === null || dt * turn > Math.PI) continue;
      off += norm(subtract(b.velocity, step));
      all += norm(subtract(step, a.velocity));
      continue;
    }
    // The place in the middle by a cubic through both ends; Simpson's rule for the attraction.
    const middle = [0, 1, 2].map(
      (k) => (a.position[k]! + b.position[k]!) / 2 + (dt / 8) * (a.velocity[k]! - b.velocity[k]!),
    ) as unknown as Vec3;
    const atEnds = add(attraction(a.position, from), attraction(b.position, to));
    const pull = scale(add(atEnds, scale(attraction(middle, (from + to) / 2), 4)), dt / 6);
    off += norm(subtract(subtract(b.velocity, a.velocity), pull));
    all += norm(pull);
  }
  return all === 0 ? null : off / all;
}

/** Velocity after dt on the undisturbed ellipse of a state; null when it is none. Source: Bate, Mueller & White (1971), 4.4. */
function keplerStep({ position, velocity }: Kinematics, dt: number): Vec3 | null {
  const r0 = norm(position);
  const a = 1 / (2 / r0 - dot(velocity, velocity) / GM_EARTH);
  if (!(a > 0) || !Number.isFinite(a)) return null;
  const motion = Math.sqrt(GM_EARTH / a ** 3);
  const cosine = 1 - r0 / a;
  const sine = dot(position, velocity) / Math.sqrt(GM_EARTH * a);
  const e = Math.hypot(cosine, sine);
  if (!(e < 1)) return null;
  const before = Math.atan2(sine, cosine);
  const after = eccentricAnomaly(before - sine + motion * dt, e);
  const turned = after - before;
  const r1 = a * (1 - e * Math.cos(after));
  const f = (-Math.sqrt(GM_EARTH * a) / (r0 * r1)) * Math.sin(turned);
  const g = 1 - (a / r1) * (1 - Math.cos(turned));
  return add(scale(position, f), scale(velocity, g));
}

/** Beyond 1e-3 of light the sum of the terms is approximate near masses. */
export const isFast = (velocity: Vec3): boolean => dot(velocity, velocity) > 1e-6 * C2;

export const weakFieldLimit: Notice = {
  code: "weak-field-limit",
  text: "The speed is beyond 1e-3 of light: the velocity term is exact, its sum with gravitation is good to second order only.",
};
