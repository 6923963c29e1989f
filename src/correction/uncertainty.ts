import { oscillatorSigmas, tickSeconds } from "../clock/index.ts";
import { C2, DAY, EARTH_ROTATION, GM_EARTH } from "../units/index.ts";
import { anchorTime } from "./clockMinusTt.ts";
import type { Face, Setting, UncertaintyItem } from "./model.ts";

/** 0.9 s, the largest |UT1 - UTC|, as a rectangular distribution: its angle in rad. */
const unknownRotation = (0.9 / Math.sqrt(3)) * EARTH_ROTATION;

/**
 * The named contributions to the standard uncertainty of a corrected instant, `elapsed` seconds after the anchor.
 * Only what is known or modelled is listed; nothing is invented for what was not given.
 * Source: JCGM 100:2008, 4.3 and 5.1 (independent contributions, combined in quadrature).
 */
export function uncertaintyItems(setting: Setting, elapsed: number, asRead: boolean): UncertaintyItem[] {
  const { clock, trajectory } = setting;
  const start = anchorTime(setting);
  const end = Math.min(setting.window.to, Math.max(setting.window.from, start + elapsed));
  const out: UncertaintyItem[] = [];
  const item = (source: string, sigma: number, shared: UncertaintyItem["shared"]) =>
    out.push({ source, type: "B", sigma, shared });
  if (clock.anchor.sigma !== null) item("anchor", clock.anchor.sigma, "log");
  for (const { source, sigma } of oscillatorSigmas(clock.oscillator, elapsed)) item(source, sigma, "log");
  const orbit = orbitSigma(setting, elapsed);
  if (orbit !== null) item("orbit", orbit, "log");
  const { modelError } = trajectory;
  const before = modelError.propagation(start);
  const after = modelError.propagation(end);
  const grown = Math.sign(start) * Math.sign(end) < 0 ? before + after : Math.abs(after - before);
  item("force-model", Math.hypot(modelError.fieldTruncation(elapsed), grown), "log");
  if (!setting.earthOrientationGiven && trajectory.kind === "state-vector") {
    item("earth-orientation", earthOrientationSigma(elapsed), "log");
  }
  // 1e-17 s a segment of the integral (about one an hour), and what the reading of the table costs.
  item(
    "integration",
    Math.abs(trajectory.interpolationError(start, end)) + 1e-17 * (1 + Math.abs(elapsed) / 3600),
    "log",
  );
  const step = faceStep(clock.face);
  if (asRead && step !== null) item("tick", step / Math.sqrt(12), "row");
  return out;
}

/** The step in which a face hides the time, s; null when a reading marks its own moment. */
function faceStep(face: Face): number | null {
  if (face.kind === "stamp") return face.resolution;
  return face.stands === "edge" ? null : tickSeconds(face.ticksPerSecond);
}

/** Root of the sum of squares. Source: JCGM 100:2008 eq. 10. */
export const combine = (items: readonly UncertaintyItem[]): number => Math.hypot(...items.map((item) => item.sigma));

/**
 * Orbit: [3 GM/(2 a^2 c^2)] sigma_a dt grows, (2/c^2) sigma(r.v) stays bounded.
 * Source: derivative of the two-body closed form (relativity/closedForm).
 */
function orbitSigma({ trajectory }: Setting, elapsed: number): number | null {
  const error = trajectory.orbitError;
  if (error === null) return null;
  const growing =
    error.axis === null || error.semiMajorAxis === null
      ? 0
      : ((3 * GM_EARTH) / (2 * error.axis * error.axis * C2)) * error.semiMajorAxis * Math.abs(elapsed);
  const bounded = (2 / C2) * (error.positionDotVelocity ?? 0);
  return Math.hypot(growing, elapsed === 0 ? 0 : bounded);
}

/**
 * What an unknown UT1 does: the equatorial ellipticity acts with a wrong phase. Its effect on time is 8 ps periodic and
 * 600 ps a day at most (measured: a propagated state without C22 and S22); twice the angle of it is in doubt.
 */
function earthOrientationSigma(elapsed: number): number {
  return 2 * unknownRotation * (8e-12 + 600e-12 * (Math.abs(elapsed) / DAY));
}
