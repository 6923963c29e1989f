import type { Vec3 } from "../../src/numeric/index.ts";
import { addSeconds, defaultLeapSeconds, parseInstant } from "../../src/time/index.ts";
import { type BroadcastMessage, broadcastTerm } from "./broadcastMessage.ts";
import { endTermAt, gnssTrajectory } from "./gnssEccentricity.ts";
import { type GnssFigures, gnssFigures } from "./gnssFigures.data.ts";
import type { Row } from "./row.ts";

const step = 300;

function messageOf(figures: GnssFigures): BroadcastMessage {
  const { toe, meanAnomaly, motionCorrection, eccentricity, rootOfAxis } = figures;
  return { week: 2155, second: toe, eccentricity, rootOfAxis, meanAnomaly, motionCorrection, fitHours: 4 };
}

/** Both forms at the middle of five positions, ns: along the orbit by derived velocities, and by the message. */
function bothForms(figures: GnssFigures): readonly number[] {
  const middle = parseInstant(figures.at, "GPS", defaultLeapSeconds);
  const half = ((figures.positions.length - 1) / 2) * step;
  const points = figures.positions.map(([x, y, z], i) => {
    const position: Vec3 = [x * 1000, y * 1000, z * 1000];
    return { epoch: addSeconds(middle, i * step - half), position };
  });
  return [endTermAt(gnssTrajectory(points), half) * 1e9, broadcastTerm(messageOf(figures), middle) * 1e9];
}

/** The twelve figures as rows: 0.1 ns for the orbit (J2), a picosecond for the message. */
export const gnssFigureRows: readonly Row[] = gnssFigures.map((figures, i) => ({
  id: `D${String(i + 1).padStart(2, "0")}`,
  what: `${figures.satellite} ${figures.at.slice(11, 16)}: -2 r.v/c^2, message`,
  inputs: { at: figures.at, toe: figures.toe, e: figures.eccentricity },
  published: [figures.term, figures.term],
  got: () => bothForms(figures),
  tolerance: [0.1, 1e-3],
  unit: "ns",
  source: "IS-GPS-200 20.3.3.3.3.1 with figures of COD0MGXFIN (CODE, AIUB) and the broadcast file of CDDIS",
  standing: "derived",
  place: "orbit: buildTrajectory of five positions, frame ITRF, velocities derived; relativity: endTerm",
}));
