import { LB, LG, TDB0 } from "../units/index.ts";
import type { Instant } from "./instant.ts";
import { geocentricTdbMinusTt, roughTdbMinusTt } from "./tdbMinusTt.ts";

/** The scales whose second is not that of TAI. */
export type CoordinateTime = "TCG" | "TDB" | "TCB";

/**
 * 1977-01-01T00:00:00 TAI, where TT, TCG and TCB read the same (JD 2443144.5003725 in each), in TAI seconds since 1970.
 * Source: IAU 1991 Resolution A4, recommendation III.
 */
const origin = 220_924_800;
const second = 1e12;
const secondExact = 1_000_000_000_000n;

/** L / (1 - L) of a defining constant as a fraction of integers. `decimals`: how many the constant is printed with. */
function ratio(value: number, decimals: number): { numerator: bigint; denominator: bigint } {
  const numerator = BigInt(Math.round(value * 10 ** decimals));
  return { numerator, denominator: 10n ** BigInt(decimals) - numerator };
}

const geocentric = ratio(LG, 19);
const barycentric = ratio(LB, 17);

/** A number of picoseconds in two parts: whole ones, exact, and the rest (below one). */
interface Picoseconds {
  readonly whole: number;
  readonly rest: number;
}

/** L / (1 - L) times the TAI seconds since 1977, in exact arithmetic: a double of seconds since then has only 1e-7 s. */
function linear({ numerator, denominator }: typeof geocentric, { seconds, picoseconds }: Instant): Picoseconds {
  const product = numerator * (BigInt(seconds - origin) * secondExact + BigInt(picoseconds));
  const whole = product / denominator;
  return { whole: Number(whole), rest: Number(product - whole * denominator) / Number(denominator) };
}

/** Scale - TT from TDB - TT (s) at an instant, rounded to the picosecond. */
function fromTdbMinusTt(scale: CoordinateTime, instant: Instant, tdbMinusTt: number): number {
  const periodic = tdbMinusTt * second;
  if (scale === "TDB") return Math.round(periodic);
  // TCB - TDB = (L_B (TDB - origin) - TDB0) / (1 - L_B), the inverse of IAU 2006 Resolution B3.
  const { whole, rest } = linear(barycentric, instant);
  return whole + Math.round(rest + (periodic - TDB0 * second) / (1 - LB));
}

function fromTcg(instant: Instant): number {
  // TCG - TT = L_G / (1 - L_G) (JD_TT - 2443144.5003725) 86400 s: IAU 2000 Resolution B1.9.
  const { whole, rest } = linear(geocentric, instant);
  return whole + Math.round(rest);
}

/**
 * A coordinate time - TT at an instant, in whole picoseconds.
 * Accuracy: exact for TCG and for TCB - TDB; TDB - TT as geocentricTdbMinusTt, computed to below 0.1 ps.
 * Source: IAU 1991 Resolution A4, IAU 2000 Resolution B1.9 (TCG), IAU 2006 Resolution B3 (TDB and TCB).
 */
export function coordinateTimeMinusTt(scale: CoordinateTime, instant: Instant): number {
  return scale === "TCG" ? fromTcg(instant) : fromTdbMinusTt(scale, instant, geocentricTdbMinusTt(instant));
}

function roughly(scale: CoordinateTime, instant: Instant): number {
  return scale === "TCG" ? fromTcg(instant) : fromTdbMinusTt(scale, instant, roughTdbMinusTt(instant));
}

/** An instant moved by a whole number of picoseconds, below 2^53 in size. */
export function shifted({ seconds, picoseconds }: Instant, by: number): Instant {
  const total = picoseconds + (by % second);
  const carry = Math.floor(total / second);
  return { seconds: seconds + Math.trunc(by / second) + carry, picoseconds: total - carry * second };
}

/**
 * The instant at which a coordinate time reads `label`: its seconds and picoseconds since 1970-01-01T00:00:32.184 in its
 * own reckoning. Solved until nothing moves, so that an instant that is written and read again is the same picosecond.
 * The scales tick at different rates, so a few labels have no picosecond of TAI to themselves (one in 6e7 of TCB, one in
 * 1.4e9 of TCG, fewer of TDB): they give the instant beside it. Where TDB is the slower, as few picoseconds share a label.
 * No errors.
 */
export function instantOfCoordinateTime(scale: CoordinateTime, label: Instant): Instant {
  let instant = shifted(label, -roughly(scale, label));
  instant = shifted(label, -roughly(scale, instant));
  for (let i = 0; i < 6; i++) {
    const next = shifted(label, -coordinateTimeMinusTt(scale, instant));
    if (next.picoseconds === instant.picoseconds && next.seconds === instant.seconds) return instant;
    instant = next;
  }
  return instant;
}
