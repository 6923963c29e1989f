import { oscillatorSigmas, tickSeconds } from "../clock/index.ts";
import { ARCSECOND, C2, DAY, EARTH_ROTATION, GM_EARTH } from "../units/index.ts";
import { anchorTime } from "./clockMinusTt.ts";
import type { Face, Setting, UncertaintyItem } from "./model.ts";
import { freeSpans, type Stretch } from "./stretch.ts";

/** 0.9 s, the largest |UT1 - UTC|, as a rectangular distribution: its angle in rad. */
const unknownRotation = (0.9 / Math.sqrt(3)) * EARTH_ROTATION;

/** 0.3 arcsecond, about the largest distance of the pole from its mean place, rad. */
const unknownPole = 0.3 * ARCSECOND;

/**
 * The named contributions to the standard uncertainty of a corrected instant, `elapsed` seconds after the anchor.
 * Only what is known or modelled is listed; nothing is invented for what was not given.
 * Source: JCGM 100:2008, 4.3 and 5.1 (independent contributions, combined in quadrature).
 */
export function uncertaintyItems(
  setting: Setting,
  elapsed: number,
  asRead: boolean,
  stretch: Stretch | null,
): UncertaintyItem[] {
  const { clock, trajectory } = setting;
  const start = anchorTime(setting);
  const clipped = (since: number): number => Math.min(setting.window.to, Math.max(setting.window.from, start + since));
  // While locked to its scale nothing grows; without events there is one span, from the anchor on.
  const spans = freeSpans(stretch, elapsed);
  const over = (work: (from: number, to: number) => number): number =>
    spans.reduce((sum, [from, to]) => sum + work(from, to), 0);
  const free = over((from, to) => to - from);
  const out: UncertaintyItem[] = [];
  const item = (source: string, sigma: number, shared: UncertaintyItem["shared"]) =>
    out.push({ source, type: "B", sigma, shared });
  if (clock.anchor.sigma !== null) item("anchor", clock.anchor.sigma, "log");
  const squares = over((from, to) => (to - from) ** 2);
  for (const { source, sigma } of oscillatorSigmas(clock.oscillator, free, squares)) item(source, sigma, "log");
  if (stretch !== null && stretch.variance > 0) item("event", Math.sqrt(stretch.variance), "log");
  const { modelError } = trajectory;
  const lever = over((from, to) => trajectory.energyLever(clipped(from), clipped(to)));
  const orbit = orbitSigma(setting, lever, free);
  if (orbit !== null) item("orbit", orbit, "log");
  const dragged = over((since, until) => {
    const [from, to] = [clipped(since), clipped(until)];
    const [before, after] = [modelError.drag(from), modelError.drag(to)];
    return Math.sign(from) * Math.sign(to) < 0 ? before + after : Math.abs(after - before);
  });
  item("force-model", Math.hypot(modelError.fieldTruncation(free), modelError.energyRate * lever, dragged), "log");
  const turned = earthOrientationSigma(setting, free);
  if (turned > 0) item("earth-orientation", turned, "log");
  // 1e-17 s a segment of the integral (about one an hour), and what the reading of the table costs.
  item(
    "integration",
    over((from, to) => Math.abs(trajectory.interpolationError(clipped(from), clipped(to)))) +
      1e-17 * (1 + Math.abs(free) / 3600),
    "log",
  );
  const step = faceStep(clock.face);
  if (asRead && step !== null) item("tick", step / Math.sqrt(12), "row");
  return out;
}

/** The step in which a face hides the time, s; null when a reading marks its own moment. */
export function faceStep(face: Face): number | null {
  if (face.kind === "stamp") return face.resolution;
  return face.stands === "edge" ? null : tickSeconds(face.ticksPerSecond);
}

/** Root of the sum of squares. Source: JCGM 100:2008 eq. 10. */
export const combine = (items: readonly UncertaintyItem[]): number => Math.hypot(...items.map((item) => item.sigma));

/**
 * Orbit: 3 GM/(2 a^2 c^2) sigma_a over the lever of an energy error grows, (2/c^2) sigma(r.v) stays bounded.
 * Source: derivative of the two-body closed form (relativity/closedForm) and vis-viva.
 */
function orbitSigma({ trajectory }: Setting, lever: number, elapsed: number): number | null {
  const error = trajectory.orbitError;
  if (error === null) return null;
  const growing =
    error.axis === null || error.semiMajorAxis === null
      ? 0
      : ((3 * GM_EARTH) / (2 * error.axis * error.axis * C2)) * error.semiMajorAxis * lever;
  const bounded = (2 / C2) * (error.positionDotVelocity ?? 0);
  return Math.hypot(growing, elapsed === 0 ? 0 : bounded);
}

/**
 * What the unknown turn of the Earth does. UT1: its equatorial ellipticity acts with a wrong phase, 8 ps periodic on a
 * known path and 600 ps a day on a propagated one (measured: a propagated state without C22 and S22). Pole: its oblateness
 * acts about a wrong axis, 130 ps periodic and 190 ns a day. Twice the angle is in doubt each. On the ground only the tides'
 * phase is left, 1 ps.
 */
function earthOrientationSigma({ trajectory, given }: Setting, elapsed: number): number {
  const days = Math.abs(elapsed) / DAY;
  const onGround = trajectory.kind === "surface" || trajectory.kind === "track";
  const propagated = trajectory.usesSunMoon ? days : 0;
  const byRotation = onGround ? 1e-12 : 8e-12 + 600e-12 * propagated;
  const byPole = onGround ? 1e-12 : 130e-12 + 190e-9 * propagated;
  return 2 * Math.hypot(given.ut1 ? 0 : unknownRotation * byRotation, given.pole ? 0 : unknownPole * byPole);
}
