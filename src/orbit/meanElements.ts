import { json2satrec, type SatRec, sgp4 } from "satellite.js";
import type { EarthAxes } from "../bodies/index.ts";
import { multiply, type Vec3 } from "../numeric/index.ts";
import { type Notice, type Place, Problem } from "../problem/index.ts";
import { addSeconds, defaultLeapSeconds, formatInstant, type Instant } from "../time/index.ts";
import { DAY, GM_EARTH, KM } from "../units/index.ts";
import { osculatingElements } from "./elements.ts";
import { fieldTruncation, leverAlong } from "./modelError.ts";
import { propagationReach } from "./propagated.ts";
import type { OrbitError, StateArray, Trajectory } from "./trajectory.ts";

/** Mean elements of the SGP4 theory, in the units of the orbit-data standards. */
export interface MeanElements {
  readonly epoch: Instant;
  /** rev/day */
  readonly meanMotion: number;
  readonly eccentricity: number;
  /** deg */
  readonly inclination: number;
  readonly node: number;
  readonly perigeeArgument: number;
  readonly meanAnomaly: number;
  /** 1/Earth radii */
  readonly bStar: number;
}

/** Along-track error of mean elements without a stated one, m at the epoch and m a day; common practice, no source. */
const assumedError = { atEpoch: 1000, perDay: 2000 };

/**
 * Mean elements through SGP4/SDP4, in its own axes (TEME) and from there to GCRF. The theory's velocity is not the
 * derivative of its position (0.004 to 0.4 m/s), so a clock's time along it is honest to 0.1 to 1 ns a day.
 * Source: AIAA 2006-6753; TEME by sidereal time of 1982 and the Earth's turn, so that UT1 falls out.
 */
export class MeanElementTrajectory implements Trajectory {
  readonly kind = "mean-elements";
  readonly reference: Instant;
  readonly from = -propagationReach;
  readonly to = propagationReach;
  readonly first: Instant;
  readonly last: Instant;
  readonly axes: EarthAxes;
  faultPlace: Place = ["trajectory"];
  readonly notices: readonly Notice[];
  readonly implausible = false;
  readonly coarse = false;
  readonly orbitError: OrbitError;
  readonly usesSunMoon = false;
  readonly modelError;
  readonly #record: SatRec;
  readonly #axis: number;

  constructor(elements: MeanElements, axes: EarthAxes) {
    const { epoch } = elements;
    this.reference = epoch;
    this.first = addSeconds(epoch, -propagationReach);
    this.last = addSeconds(epoch, propagationReach);
    this.axes = axes;
    this.#record = initialise(elements);
    const state = new Float64Array(6);
    this.state(0, state);
    const [x, y, z, vx, vy, vz] = state;
    const speed = Math.hypot(vx!, vy!, vz!);
    const { semiMajorAxis, perigee } = osculatingElements([x!, y!, z!], [vx!, vy!, vz!]);
    const meanMotion = Math.sqrt(GM_EARTH / semiMajorAxis ** 3);
    this.orbitError = {
      // An along-track error that grows by s a second means da = s/(1.5 n).
      semiMajorAxis: assumedError.perDay / DAY / (1.5 * meanMotion),
      positionDotVelocity: speed * assumedError.atEpoch,
      axis: semiMajorAxis,
      isotropic: false,
    };
    this.modelError = { fieldTruncation: (dt: number) => fieldTruncation(perigee, dt), energyRate: 0, drag: () => 0 };
    this.#axis = semiMajorAxis;
    this.notices = [
      {
        code: "mean-element-uncertainty",
        text: "Mean elements bring no uncertainty: 1 km at the epoch, growing by 2 km a day along track, is assumed (common practice).",
      },
    ];
  }

  extend(): void {}

  state(t: number, out: StateArray): void {
    const result = sgp4(this.#record, t / 60);
    if (result === null || this.#record.error !== 0) throw this.#gaveUp(t);
    const { position, velocity } = result;
    const m = this.axes.fromTeme(t);
    const turn = (x: number, y: number, z: number): Vec3 => multiply(m, [x * KM, y * KM, z * KM]);
    out.set(turn(position.x, position.y, position.z));
    out.set(turn(velocity.x, velocity.y, velocity.z), 3);
  }

  pieceOf = (t: number): number => Math.floor(t / pieceLength);
  pieceStart = (index: number): number => index * pieceLength;
  // The theory is smooth to a metre only; finer cuts would follow its grain.
  split = (a: number, b: number): number | null => (b - a <= 60 ? null : (a + b) / 2);
  energyLever = (a: number, b: number): number => leverAlong(this, this.#axis, a, b);
  interpolationError = (): number => 0;

  #gaveUp(t: number): Problem {
    const at = formatInstant(addSeconds(this.reference, Math.round(t)), "TAI", defaultLeapSeconds);
    const why =
      this.#record.error === 6
        ? "the orbit has decayed"
        : `the elements leave their range (SGP4 code ${this.#record.error})`;
    return new Problem(
      "impossible-state",
      `The mean elements cannot be followed to ${at} TAI: ${why}.`,
      [{ place: this.faultPlace, expected: "instants for which the elements still describe an orbit" }],
      true,
    );
  }
}

const pieceLength = 3600;

function initialise(e: MeanElements): SatRec {
  // The library wants a message; its epoch serves the lunar and solar terms only, for which a millisecond is ample.
  const text = formatInstant(e.epoch, "UTC", defaultLeapSeconds).slice(0, 23).replace(":60.", ":59.");
  const record = json2satrec({
    OBJECT_NAME: "",
    OBJECT_ID: "",
    EPOCH: text,
    MEAN_MOTION: e.meanMotion,
    ECCENTRICITY: e.eccentricity,
    INCLINATION: e.inclination,
    RA_OF_ASC_NODE: e.node,
    ARG_OF_PERICENTER: e.perigeeArgument,
    MEAN_ANOMALY: e.meanAnomaly,
    EPHEMERIS_TYPE: 0,
    CLASSIFICATION_TYPE: "U",
    NORAD_CAT_ID: 0,
    ELEMENT_SET_NO: 0,
    REV_AT_EPOCH: 0,
    BSTAR: e.bStar,
    MEAN_MOTION_DOT: 0,
    MEAN_MOTION_DDOT: 0,
  });
  if (record.error !== 0) {
    throw new Problem("impossible-state", `The mean elements describe no orbit (SGP4 code ${record.error}).`, [
      { place: [], expected: "mean elements of an orbit about the Earth" },
    ]);
  }
  return record;
}
