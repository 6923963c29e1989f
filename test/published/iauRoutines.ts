import {
  EarthAxes,
  earthRotationAngle,
  geodeticToFixed,
  nutation2000B,
  siderealLessRotation,
} from "../../src/bodies/index.ts";
import { defaultLeapSeconds, parseInstant } from "../../src/time/index.ts";
import type { Row } from "./row.ts";

const source = (routine: string): string =>
  `ERFA test vectors (${routine}), t_erfa_c.c, BSD-3; published figures; data/erfa-vectors`;

/** TT of all the dates below: MJD 53736.0. UT1 has the same reading, so it is 32.184 s ahead of TAI. */
const date = parseInstant("2006-01-01T00:00:00", "TT", defaultLeapSeconds);
const ut1MinusTai = 32.184;
const centuries = (53_736 - 51_544.5) / 36_525;

/** 2000B is made to follow 2000A to a milliarcsecond, 4.85e-9 rad. */
const milliarcsecond = 5e-9;

function siderealTime(): number {
  return earthRotationAngle(date, ut1MinusTai) + siderealLessRotation(centuries, nutation2000B(centuries));
}

function celestialToTerrestrial(): readonly number[] {
  return new EarthAxes(date, { ut1MinusTai, xPole: 2.55060238e-7, yPole: 1.860359247e-6 }).rotation(0);
}

/**
 * The frames and the ellipsoid against the test numbers of the IAU-derived routines. The list prints up to nineteen digits;
 * here stand as many as a double holds.
 */
export const iauRoutines: readonly Row[] = [
  {
    id: "V01",
    what: "nutation, IAU 2000B",
    inputs: { ttMjd: 53_736 },
    published: [-9.632552291148363e-6, 4.063197106621159e-5],
    got: () => {
      const { longitude, obliquity } = nutation2000B(centuries);
      return [longitude, obliquity];
    },
    tolerance: 1e-13,
    unit: "rad",
    source: source("nut00b"),
    standing: "read",
    place: "bodies: nutation2000B",
  },
  {
    id: "V02",
    what: "Earth rotation angle",
    inputs: { ut1Mjd: 54_388 },
    published: 0.4022837240028158,
    got: () => earthRotationAngle({ seconds: (54_388 - 40_587) * 86_400, picoseconds: 0 }, 0),
    tolerance: 1e-12,
    unit: "rad",
    source: source("era00"),
    standing: "read",
    place: "bodies: earthRotationAngle",
  },
  {
    id: "V03",
    what: "Greenwich apparent sidereal time",
    inputs: { ttMjd: 53_736, ut1Mjd: 53_736 },
    published: 1.754166137675019,
    got: siderealTime,
    tolerance: milliarcsecond,
    unit: "rad",
    source: source("gst06a"),
    standing: "read",
    place: "bodies: earthRotationAngle, siderealLessRotation",
    note: "The vector uses nutation 2000A, the project 2000B: 1 mas = 5e-9 rad is allowed.",
  },
  {
    id: "V04",
    what: "celestial to terrestrial matrix",
    inputs: { ttMjd: 53_736, ut1Mjd: 53_736, xPole: 2.55060238e-7, yPole: 1.860359247e-6 },
    // biome-ignore format: one row of the matrix a line
    published: [
      -0.18103321283058973, 0.9834769806938592, 6.555550962998436e-5,
      -0.9834768134136215, -0.1810332203649131, 5.749800844905594e-4,
      5.773474024748546e-4, 3.9618168296326906e-5, 0.9999998325501748,
    ],
    got: celestialToTerrestrial,
    tolerance: milliarcsecond,
    unit: "1",
    source: source("c2t06a"),
    standing: "read",
    place: "bodies: EarthAxes.rotation",
    note: "The vector uses nutation 2000A, the project 2000B: 1 mas = 5e-9 rad is allowed.",
  },
  {
    id: "V05",
    what: "geodetic to geocentric, WGS 84",
    inputs: { longitude: 3.1, latitude: -0.5, height_m: 2500 },
    published: [-5_599_000.557704994, 233_011.67223479203, -3_040_909.470698336],
    got: () => geodeticToFixed(-0.5, 3.1, 2500),
    tolerance: 1e-7,
    unit: "m",
    source: source("gd2gc"),
    standing: "read",
    place: "bodies: geodeticToFixed",
  },
];
