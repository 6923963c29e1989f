import { durationFromNanoseconds, sumDurations, toNanoseconds } from "../../src/time/index.ts";
import { DEGREE } from "../../src/units/index.ts";
import { carriedRate, lift } from "./bench.ts";
import type { Row } from "./row.ts";

const paper = "Hafele & Keating 1972, Science 177, 166/168";

/** What a clock gains at a height (m) in so many hours beside one at sea level, ns. */
const gained = (height: number, hours: number): number => lift(9.8, 0, height) * hours * 3600 * 1e9;

/** What a clock that is carried due east (m/s) along a parallel loses by its speed beside one at rest there, ns. */
const byMotion = (eastward: number, latitudeDeg: number, hours: number): number =>
  (carriedRate(latitudeDeg * DEGREE, eastward) - carriedRate(latitudeDeg * DEGREE, 0)) * hours * 3600 * 1e9;

const meanFlight =
  "The printed figure sums the legs of the real flights. One mean speed on one mean parallel, due east or west all the way, is all that is known here; it gives the sign and the size.";

/** Sum of terms as an answer sums them, ns. */
const net = (...parts: number[]): number => toNanoseconds(sumDurations(parts.map(durationFromNanoseconds)));

/** The flights around the world of 1971. */
export const hafeleKeating: readonly Row[] = [
  {
    id: "H01",
    what: "gravitational part, flight eastward",
    inputs: { h_m: 8900, t_h: 41.2, g: 9.8 },
    published: 144,
    got: () => gained(8900, 41.2),
    tolerance: 3,
    unit: "ns",
    source: `${paper} Table (gravitational 144+-14)`,
    standing: "from memory",
    place: "orbit: surfaces at two heights where g = 9.8; relativity: ProperTime.rates",
    note: "Mean altitude and time are from memory.",
  },
  {
    id: "H02",
    what: "gravitational part, flight westward",
    inputs: { h_m: 9360, t_h: 48.6, g: 9.8 },
    published: 179,
    got: () => gained(9360, 48.6),
    tolerance: 3,
    unit: "ns",
    source: `${paper} Table (179+-18)`,
    standing: "from memory",
    place: "orbit: surfaces at two heights where g = 9.8; relativity: ProperTime.rates",
  },
  {
    id: "H03",
    what: "part of the motion, flight eastward",
    inputs: { v_mPerS: 243, latitudeDeg: 34, t_h: 41.2 },
    published: -184,
    got: () => byMotion(243, 34, 41.2),
    tolerance: 18,
    unit: "ns",
    source: `${paper} Table (-184+-18)`,
    standing: "from memory",
    place: "orbit: a track along a parallel; relativity: ProperTime, the term velocity",
    explained: meanFlight,
  },
  {
    id: "H04",
    what: "part of the motion, flight westward",
    inputs: { v_mPerS: 218, latitudeDeg: 31, t_h: 48.6 },
    published: 96,
    got: () => byMotion(-218, 31, 48.6),
    tolerance: 10,
    unit: "ns",
    source: `${paper} Table (96+-10)`,
    standing: "from memory",
    place: "orbit: a track along a parallel; relativity: ProperTime, the term velocity",
    explained: meanFlight,
  },
  {
    id: "H05",
    what: "net prediction eastward, sum of parts",
    inputs: { parts: [144, -184] },
    published: -40,
    got: () => net(144, -184),
    tolerance: 0.5,
    unit: "ns",
    source: paper,
    standing: "derived",
    place: "time: sumDurations, as for the terms of an answer",
    note: "A check of the printed table; no flight is computed.",
  },
  {
    id: "H06",
    what: "net prediction westward, sum of parts",
    inputs: { parts: [179, 96] },
    published: 275,
    got: () => net(179, 96),
    tolerance: 0.5,
    unit: "ns",
    source: paper,
    standing: "derived",
    place: "time: sumDurations, as for the terms of an answer",
    note: "A check of the printed table; no flight is computed.",
  },
];
