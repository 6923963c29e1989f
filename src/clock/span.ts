import { type Duration, subtractDurations } from "../time/index.ts";

const femto = 1_000_000_000_000_000n;

/** Below zero when a is shorter (earlier) than b. */
export const compareSpans = (a: Duration, b: Duration): number =>
  a.seconds - b.seconds || a.femtoseconds - b.femtoseconds;

/** A span in whole femtoseconds. */
export const spanFemtoseconds = (a: Duration): bigint => BigInt(a.seconds) * femto + BigInt(a.femtoseconds);

/** The part `gone`/`length` of a span, to the nearest femtosecond; `length` positive. */
export function portion(whole: Duration, gone: Duration, length: Duration): Duration {
  const product = spanFemtoseconds(whole) * spanFemtoseconds(gone);
  const by = spanFemtoseconds(length);
  const twice = 2n * product + by;
  const rest = ((twice % (2n * by)) + 2n * by) % (2n * by);
  const total = (twice - rest) / (2n * by);
  const within = ((total % femto) + femto) % femto;
  return { seconds: Number((total - within) / femto), femtoseconds: Number(within) };
}

/** The size of a difference. */
export function distance(a: Duration, b: Duration): Duration {
  return compareSpans(a, b) >= 0 ? subtractDurations(a, b) : subtractDurations(b, a);
}
