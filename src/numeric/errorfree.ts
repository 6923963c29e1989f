/** Error-free transformations (Dekker 1971, Knuth TAOCP 2, 4.2.2): a sum or product as a double and its exact error. */
export interface TwoPart {
  readonly high: number;
  readonly low: number;
}

export function twoSum(a: number, b: number): TwoPart {
  const high = a + b;
  const bb = high - a;
  return { high, low: a - (high - bb) + (b - bb) };
}

const splitter = 134_217_729; // 2^27 + 1

/** Exact for |a|, |b| below about 1e300 and products above about 1e-290. */
export function twoProduct(a: number, b: number): TwoPart {
  const high = a * b;
  const ca = splitter * a;
  const ah = ca - (ca - a);
  const al = a - ah;
  const cb = splitter * b;
  const bh = cb - (cb - b);
  const bl = b - bh;
  return { high, low: al * bl - (high - ah * bh - al * bh - ah * bl) };
}

/** Product of two two-part numbers, good to about 1e-31 relative. */
export function multiplyTwoPart(a: TwoPart, b: TwoPart): TwoPart {
  const p = twoProduct(a.high, b.high);
  return twoSum(p.high, p.low + (a.high * b.low + a.low * b.high));
}

export function addToTwoPart(a: TwoPart, b: number): TwoPart {
  const s = twoSum(a.high, b);
  return twoSum(s.high, s.low + a.low);
}
