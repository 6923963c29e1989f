import { type FieldSample, moonTable, sampleField, sunTable } from "../bodies/index.ts";
import type { Trajectory } from "../orbit/index.ts";
import { ttSecondsSinceJ2000 } from "../time/index.ts";

/** What a clock meets at one moment: all that the rate terms look at. GCRF, SI. */
export interface Environment {
  /** Position (m) and velocity (m/s). */
  readonly state: Float64Array;
  /** Distance from the Earth's centre, m. */
  distance: number;
  /** Speed squared, m2/s2. */
  speedSquared: number;
  /** The Earth's field beyond the monopole at the clock. */
  readonly field: FieldSample;
  /** Geocentric positions, m. */
  readonly sun: Float64Array;
  readonly moon: Float64Array;
}

export type Need = "field" | "sun" | "moon";

/** Fills the environment along a trajectory, only as far as the chosen terms need it. */
export class EnvironmentReader {
  readonly environment: Environment = {
    state: new Float64Array(6),
    distance: 0,
    speedSquared: 0,
    field: { oblateness: 0, higher: 0, x: 0, y: 0, z: 0 },
    sun: new Float64Array(3),
    moon: new Float64Array(3),
  };
  readonly #trajectory: Trajectory;
  readonly #needsField: boolean;
  readonly #needsSun: boolean;
  readonly #needsMoon: boolean;
  readonly #ttAtReference: number;

  constructor(trajectory: Trajectory, needs: ReadonlySet<Need>) {
    this.#trajectory = trajectory;
    this.#needsField = needs.has("field");
    this.#needsSun = needs.has("sun");
    this.#needsMoon = needs.has("moon");
    this.#ttAtReference = ttSecondsSinceJ2000(trajectory.reference);
  }

  read(t: number): Environment {
    const env = this.environment;
    this.#trajectory.state(t, env.state);
    const s = env.state;
    const x = s[0]!;
    const y = s[1]!;
    const z = s[2]!;
    const vx = s[3]!;
    const vy = s[4]!;
    const vz = s[5]!;
    env.distance = Math.sqrt(x * x + y * y + z * z);
    env.speedSquared = vx * vx + vy * vy + vz * vz;
    if (this.#needsField) {
      const m = this.#trajectory.axes.rotation(t);
      sampleField(
        m[0] * x + m[1] * y + m[2] * z,
        m[3] * x + m[4] * y + m[5] * z,
        m[6] * x + m[7] * y + m[8] * z,
        env.field,
      );
    }
    if (this.#needsSun) sunTable.evaluate(this.#ttAtReference + t, env.sun);
    if (this.#needsMoon) moonTable.evaluate(this.#ttAtReference + t, env.moon);
    return env;
  }
}
