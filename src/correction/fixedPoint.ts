import { Problem } from "../problem/index.ts";
import {
  addDurations,
  type Duration,
  durationFromSeconds,
  subtractDurations,
  toSeconds,
  zeroDuration,
} from "../time/index.ts";

/** The fixed point takes 2 steps at 1e-10, 3 at 1 ppm, 5 at 100 ppm. */
const mostIterations = 12;

/**
 * Solves elapsed + off(elapsed) = indicated, to the femtosecond. `slope`: a part of d(off)/d(elapsed) that is known, such
 * as a slew's; each step is divided by it. Errors: impossible-clock when it does not settle.
 */
export function fixedPoint(indicated: Duration, off: (elapsed: Duration) => Duration, slope = 0): Duration {
  let elapsed = indicated;
  let moved = zeroDuration;
  for (let i = 0; i < mostIterations; i++) {
    const next = subtractDurations(indicated, off(elapsed));
    moved = subtractDurations(next, elapsed);
    if (slope !== 0 && Math.abs(moved.seconds) < 1e11) moved = durationFromSeconds(toSeconds(moved) / (1 + slope));
    elapsed = slope === 0 ? next : addDurations(elapsed, moved);
    if (moved.seconds === 0 && moved.femtoseconds === 0) return elapsed;
    // Two neighbours a femtosecond apart may alternate; either is right.
    if (i > 2 && Math.abs(toSeconds(moved)) < 1.5e-15) return elapsed;
    if (Math.abs(elapsed.seconds) > 1e11) return elapsed; // outside all that is covered; the caller refuses it
  }
  const left = Math.abs(toSeconds(moved)).toExponential(1);
  throw new Problem(
    "impossible-clock",
    `The oscillator moves too far from its nominal rate at this reading to be inverted (${left} s left after ${mostIterations} steps).`,
    [{ place: ["reading"], expected: "a reading at which ageing has moved the rate by less than some percent" }],
  );
}
