import { json2satrec, sgp4 } from "satellite.js";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { C2, GM_EARTH, KM } from "../../src/units/index.ts";
import { corrections, plainBench } from "../../src/wire/index.ts";
import { correction, lowOrbit } from "../support/requests.ts";
import { between, plain, type Row, sink, speedRatio } from "./measure.ts";

const rows = 10_000;

/** Invented mean elements of a low orbit. */
const record = json2satrec({
  OBJECT_NAME: "INVENTED",
  OBJECT_ID: "2026-000A",
  EPOCH: "2026-03-01T00:00:00.000",
  MEAN_MOTION: 15.2,
  ECCENTRICITY: 0.0011,
  INCLINATION: 51.5,
  RA_OF_ASC_NODE: 44,
  ARG_OF_PERICENTER: 111,
  MEAN_ANOMALY: 222,
  EPHEMERIS_TYPE: 0,
  CLASSIFICATION_TYPE: "U",
  NORAD_CAT_ID: 0,
  ELEMENT_SET_NO: 0,
  REV_AT_EPOCH: 0,
  BSTAR: 1e-5,
  MEAN_MOTION_DOT: 0,
  MEAN_MOTION_DDOT: 0,
});

/** What a row costs whoever has a position by SGP4 and multiplies the rate there by the time since the last row. */
function byFormula(): void {
  let accumulated = 0;
  for (let i = 1; i <= rows; i++) {
    const state = sgp4(record, (8.64 * i) / 60)!;
    const { x, y, z } = state.position;
    const { x: vx, y: vy, z: vz } = state.velocity;
    const speedSquared = (vx * vx + vy * vy + vz * vz) * KM * KM;
    accumulated -= ((speedSquared / 2 + GM_EARTH / (Math.hypot(x, y, z) * KM)) / C2) * 8.64;
  }
  sink.value += accumulated;
}

/** CSV-N as far as it goes: rows of one LEO day through the JSON call, all terms, uncertainty and flags for each. */
export function manyReadings(): Row[] {
  const bench = plainBench(defaultLeapSeconds, "bench");
  const readings = Array.from({ length: rows }, (_, i) => ({ reading: 8640 * (i + 1) }));
  const body = correction({ trajectory: lowOrbit(), readings });
  const ours = (): void => {
    sink.value += corrections(body, bench).results.length;
  };
  const ratio = speedRatio(ours, byFormula, 4, 15);
  return [
    {
      id: "CSV-N",
      definition: "corrections() of 10 000 rows / SGP4 + formula a row (no CSV yet)",
      reached: plain(ratio.median),
      target: "20",
      met: ratio.median >= 20,
      spread: between(ratio),
    },
  ];
}
