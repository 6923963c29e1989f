import { type EarthAxes, moonRotation, moonTable } from "../bodies/index.ts";
import { axisRotation, cross, multiplyTransposed, product, type Vec3 } from "../numeric/index.ts";
import { type Instant, ttSecondsSinceJ2000 } from "../time/index.ts";
import { DAY } from "../units/index.ts";
import { halve } from "./surface.ts";
import type { ModelError, StateArray, Trajectory } from "./trajectory.ts";

/** Sphere above which lunar heights are counted, m. Source: IAU working group (2015), mean radius of the Moon. */
export const moonRadius = 1_737_400;

const pieceLength = DAY;

/** What the Moon's own J2 and C22, which are not modelled, do to a clock there, one sigma: 0.2 to 0.5 ns a day. */
const modelError: ModelError = {
  fieldTruncation: (dt) => 0.5e-9 * (Math.abs(dt) / DAY),
  energyRate: 0,
  drag: () => 0,
};

/**
 * A clock that rests on the Moon, as a path about the Earth. Mean Earth / polar axes, height above 1737.4 km.
 * Accuracy: the Moon's place to 20 km and 0.1 m/s; its field beyond the monopole is left out (0.5 ns a day).
 */
export class MoonSurfaceTrajectory implements Trajectory {
  readonly kind = "surface";
  readonly reference: Instant;
  readonly from = Number.NEGATIVE_INFINITY;
  readonly to = Number.POSITIVE_INFINITY;
  readonly first = null;
  readonly last = null;
  readonly axes: EarthAxes;
  readonly notices = [];
  readonly implausible = false;
  readonly coarse = false;
  readonly orbitError = null;
  readonly usesSunMoon = true;
  readonly modelError = modelError;
  readonly #fixed: Vec3;
  readonly #ttAtReference: number;
  readonly #angles = new Float64Array(3);
  readonly #angleRates = new Float64Array(3);
  readonly #place = new Float64Array(3);
  readonly #velocity = new Float64Array(3);

  /** latitude and longitude in rad, height in m above moonRadius. */
  constructor(reference: Instant, latitude: number, longitude: number, height: number, axes: EarthAxes) {
    this.reference = reference;
    this.axes = axes;
    this.#ttAtReference = ttSecondsSinceJ2000(reference);
    const r = moonRadius + height;
    const c = Math.cos(latitude);
    this.#fixed = [r * c * Math.cos(longitude), r * c * Math.sin(longitude), r * Math.sin(latitude)];
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    const tt = this.#ttAtReference + t;
    moonTable.evaluate(tt, this.#place, this.#velocity);
    moonRotation.evaluate(tt, this.#angles, this.#angleRates);
    const [ascension, declination, meridian] = this.#angles;
    // From ICRF to axes fixed to the Moon: R3(W) R1(90 deg - dec) R3(90 deg + ra).
    const toFixed = product(
      axisRotation(3, meridian!),
      product(axisRotation(1, Math.PI / 2 - declination!), axisRotation(3, Math.PI / 2 + ascension!)),
    );
    const position = multiplyTransposed(toFixed, this.#fixed);
    const spin = multiplyTransposed(toFixed, [0, 0, this.#angleRates[2]!]);
    const carried = cross(spin, position);
    for (let k = 0; k < 3; k++) {
      out[k] = this.#place[k]! + position[k]!;
      out[k + 3] = this.#velocity[k]! + carried[k]!;
    }
  }

  pieceOf = (t: number): number => Math.floor(t / pieceLength);
  pieceStart = (index: number): number => index * pieceLength;
  split = halve;
  energyLever = (a: number, b: number): number => Math.abs(b - a);
  interpolationError = (): number => 0;
}
