import { eccentricAnomaly } from "../../src/orbit/index.ts";
import { broadcastEccentricityTerm } from "../../src/relativity/index.ts";
import type { Instant } from "../../src/time/index.ts";
import { addSeconds, secondsBetween } from "../../src/time/index.ts";

/** GM that the users of the broadcast orbits apply, m3/s2. Source: IS-GPS-200, table 20-IV. */
export const gpsGm = 3.986005e14;

/** What the relativistic term needs of one broadcast orbit. */
export interface BroadcastMessage {
  /** Week of GPS time and second of it to which the elements belong (toe). */
  readonly week: number;
  readonly second: number;
  readonly eccentricity: number;
  /** Square root of the semi-major axis, m^0.5. */
  readonly rootOfAxis: number;
  /** At toe, rad. */
  readonly meanAnomaly: number;
  /** Correction of the mean motion, rad/s. */
  readonly motionCorrection: number;
  /** Hours for which the fit holds, half of them before toe. */
  readonly fitHours: number;
}

/** 1980-01-06T00:00:00 UTC, where GPS time begins: 19 s behind TAI. */
const gpsBegin: Instant = { seconds: 315_964_800 + 19, picoseconds: 0 };

const toeOf = ({ week, second }: BroadcastMessage): Instant => addSeconds(gpsBegin, week * 604_800 + second);

/** Seconds since toe. The fit holds for half of its span to both sides. */
export const ageAt = (message: BroadcastMessage, at: Instant): number => secondsBetween(toeOf(message), at);

/** F e sqrt(A) sin E of a message, s. Source: IS-GPS-200 20.3.3.3.3.1 with the mean anomaly of table 20-IV. */
export function broadcastTerm(message: BroadcastMessage, at: Instant): number {
  const axis = message.rootOfAxis * message.rootOfAxis;
  const motion = Math.sqrt(gpsGm / axis ** 3) + message.motionCorrection;
  const anomaly = message.meanAnomaly + motion * ageAt(message, at);
  const e = message.eccentricity;
  return broadcastEccentricityTerm(gpsGm, axis, e, eccentricAnomaly(anomaly, e));
}
