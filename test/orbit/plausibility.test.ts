import { describe, expect, it } from "vitest";
import { toGcrf } from "../../src/orbit/frames.ts";
import { buildTrajectory, twoBodyState } from "../../src/orbit/index.ts";
import { addSeconds } from "../../src/time/index.ts";
import { axes, epoch, orbitClasses } from "../support/orbits.ts";

const orientation = { ut1MinusTai: -37, xPole: 0, yPole: 0 };
const circular = { ...orbitClasses["low 400 km, 51.6 deg"], eccentricity: 0.001 };
const noError = { positionSigma: null, velocitySigma: null, semiMajorAxisSigma: null, covarianceRtn: null };

/** A table of the low orbit, in inertial or Earth-fixed components, labelled as told. */
function table(components: "inertial" | "earth-fixed", frame: "GCRF" | "ITRF", withVelocity: boolean) {
  const states = Array.from({ length: 60 }, (_, i) => {
    const inertial = twoBodyState(circular, 60 * i);
    const { position, velocity } =
      components === "inertial" ? inertial : axes.toEarthFixed(60 * i, inertial.position, inertial.velocity);
    return { epoch: addSeconds(epoch, 60 * i), position, velocity: withVelocity ? velocity : null };
  });
  return buildTrajectory({ kind: "state-table", frame, center: "Earth", states }, orientation, epoch);
}

const meantOf = (trajectory: { notices: readonly { code: string; text: string }[] }): string =>
  trajectory.notices.find(({ code }) => code === "implausible-orbit")?.text ?? "";

describe("an implausible orbit", () => {
  it.each([true, false])("a table in its true frame is not flagged (velocities: %s)", (withVelocity) => {
    expect(table("inertial", "GCRF", withVelocity).implausible).toBe(false);
    expect(table("earth-fixed", "ITRF", withVelocity).implausible).toBe(false);
  });

  it.each([true, false])(
    "a table with the wrong label says which was probably meant (velocities: %s)",
    (withVelocity) => {
      const fixedAsInertial = table("earth-fixed", "GCRF", withVelocity);
      expect(fixedAsInertial.implausible).toBe(true);
      expect(meantOf(fixedAsInertial)).toMatch(/Earth-fixed components were probably meant, frame ITRF/);
      const inertialAsFixed = table("inertial", "ITRF", withVelocity);
      expect(inertialAsFixed.implausible).toBe(true);
      expect(meantOf(inertialAsFixed)).toMatch(/inertial frame was probably meant/);
    },
  );

  it("a single Earth-fixed state labelled GCRF, and the reverse", () => {
    // 97 degrees would differ little: a low inclination shows it best.
    const { position, velocity } = twoBodyState({ ...circular, inclination: 0.1 }, 0);
    const fixed = axes.toEarthFixed(0, position, velocity);
    const state = (frame: "GCRF" | "ITRF", given: typeof fixed) =>
      buildTrajectory({ kind: "state-vector", frame, epoch, ...given, error: noError }, orientation, epoch);
    expect(state("GCRF", { position, velocity }).implausible).toBe(false);
    expect(state("ITRF", fixed).implausible).toBe(false);
    expect(meantOf(state("GCRF", fixed))).toMatch(/frame ITRF/);
    expect(meantOf(state("ITRF", { position, velocity }))).toMatch(/inertial velocity was probably meant/);
  });

  it("metres per second given as km/s", () => {
    const { position, velocity } = twoBodyState(circular, 0);
    // 7.7 km/s written as 7700 would be an escape at 2.6 % of light.
    const fast = velocity.map((v) => v * 1000) as unknown as typeof velocity;
    const trajectory = buildTrajectory(
      { kind: "state-vector", frame: "GCRF", epoch, position, velocity: fast, error: noError },
      orientation,
      epoch,
    );
    expect(meantOf(trajectory)).toMatch(/m\/s were probably given instead of km\/s/);
  });
});

describe("frames", () => {
  it("EME2000 differs from GCRF by the frame bias, 23 milliarcseconds (IERS Conventions 2010, 5.4.4)", () => {
    const { position, velocity } = twoBodyState(circular, 0);
    const moved = toGcrf("EME2000", axes, 0, { position, velocity }).position;
    const angle = Math.hypot(...moved.map((x, k) => x - position[k]!)) / Math.hypot(...position);
    expect(angle).toBeGreaterThan(5e-8);
    expect(angle).toBeLessThan(1.13e-7);
  });

  it("Earth-fixed and back to the rounding of a metre", () => {
    const { position, velocity } = twoBodyState(circular, 0);
    const fixed = axes.toEarthFixed(1234.5, position, velocity);
    const back = axes.toInertial(1234.5, fixed.position, fixed.velocity);
    for (let k = 0; k < 3; k++) {
      expect(Math.abs(back.position[k]! - position[k]!)).toBeLessThan(1e-8);
      expect(Math.abs(back.velocity[k]! - velocity[k]!)).toBeLessThan(1e-11);
    }
  });

  it("an Earth-fixed velocity is the derivative of the Earth-fixed place", () => {
    const h = 0.5;
    const place = (t: number) => {
      const { position, velocity } = twoBodyState(circular, t);
      return axes.toEarthFixed(t, position, velocity);
    };
    const [before, middle, after] = [place(100 - h), place(100), place(100 + h)];
    for (let k = 0; k < 3; k++) {
      const slope = (after.position[k]! - before.position[k]!) / (2 * h);
      // The central difference itself is off by h^2/6 of the third derivative, 5e-4 m/s here.
      expect(Math.abs(slope - middle.velocity[k]!)).toBeLessThan(1e-3);
    }
  });
});
