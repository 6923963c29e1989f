import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  compareInstants,
  coveredYears,
  defaultLeapSeconds,
  formatInstant,
  geocentricTdbMinusTt,
  type Instant,
  parseInstant,
  type Scale,
  scales,
} from "../../src/time/index.ts";

/** The scales of spacecraft timing beside UTC, TAI, TT and GPS: exactness, order, leap seconds, refusals. */

const table = defaultLeapSeconds;
const seed = 19770101;
const { first, last } = coveredYears(table);
const second = 1_000_000_000_000n;
const beside = ["TCG", "TDB", "TCB", "GST", "BDT", "GLONASS"] as const;

const picoseconds = fc.oneof(
  fc.integer({ min: 0, max: 999_999_999_999 }),
  fc.constantFrom(0, 1, 499_999_999_999, 500_000_000_000, 815_999_999_999, 816_000_000_000, 999_999_999_999),
);
/** Any moment from 1972 to 2100, half of them within a day of a leap second. */
const instants: fc.Arbitrary<Instant> = fc.record({
  seconds: fc.oneof(
    fc.integer({ min: first.seconds + 200, max: last.seconds - 200 }),
    fc
      .tuple(fc.constantFrom(...table.steps.slice(1)), fc.integer({ min: -86_402, max: 86_402 }))
      .map(([{ day, offset }, shift]) => day * 86_400 + offset + shift),
  ),
  picoseconds,
});

const exact = ({ seconds, picoseconds: ps }: Instant): bigint => BigInt(seconds) * second + BigInt(ps);

/** Picoseconds since 1970-01-01T00:00:00 of a text in its own reckoning, without the project's reader. */
function labelOf(text: string): bigint {
  const m = /^(\d+-\d+-\d+T\d+:\d+:\d+)\.(\d{12})$/.exec(text)!;
  return BigInt(Date.parse(`${m[1]}Z`)) * 1_000_000_000n + BigInt(m[2]!);
}

const textOf = (label: bigint): string => {
  const whole = label / second;
  return `${new Date(Number(whole) * 1000).toISOString().slice(0, 19)}.${String(label % second).padStart(12, "0")}`;
};

const runs = { seed, numRuns: 4_000 };

describe("every scale", () => {
  it("instant to text to instant is the same picosecond", () => {
    fc.assert(
      fc.property(instants, fc.constantFrom(...beside), (instant, scale) => {
        expect(parseInstant(formatInstant(instant, scale, table), scale, table)).toEqual(instant);
      }),
      runs,
    );
  });

  it("text to instant to text is the same picosecond", () => {
    const labels = fc.tuple(fc.integer({ min: first.seconds + 200, max: last.seconds - 200 }), picoseconds);
    fc.assert(
      fc.property(labels, fc.constantFrom<Scale>("TCG", "TDB", "TCB", "GST", "BDT"), ([whole, ps], scale) => {
        const text = textOf(BigInt(whole) * second + BigInt(ps));
        expect(formatInstant(parseInstant(text, scale, table), scale, table)).toBe(text);
      }),
      runs,
    );
  });

  it("keeps the order of time and steps by a picosecond where time does", () => {
    fc.assert(
      fc.property(instants, fc.integer({ min: 1, max: 200_000 }), fc.constantFrom(...scales), (a, step, scale) => {
        const total = exact(a) + BigInt(step);
        const b = { seconds: Number(total / second), picoseconds: Number(total % second) };
        expect(compareInstants(a, b)).toBeLessThan(0);
        const [before, after] = [a, b].map((instant) => formatInstant(instant, scale, table));
        expect(after! > before!).toBe(true);
        if (!before!.startsWith(after!.slice(0, 19)) || scale === "UTC" || scale === "GLONASS") return;
        // Within two hundred nanoseconds no scale gains or loses a picosecond, but for one that rounds the other way.
        expect(
          Math.abs(Number(labelOf(after!.replace("Z", "")) - labelOf(before!.replace("Z", ""))) - step),
        ).toBeLessThan(2);
      }),
      runs,
    );
  });
});

it.each([
  ["TCB", 100_000_000n],
  ["TCG", 3_000_000_000n],
] as const)("a label of %s that no picosecond of TAI has to itself gives one beside it", (scale, stretch) => {
  const at = (total: bigint): Instant => ({ seconds: Number(total / second), picoseconds: Number(total % second) });
  const ahead = (total: bigint): bigint => labelOf(formatInstant(at(total), scale, table)) - total;
  // The scale gains at least a picosecond on this stretch: halve it down to the two neighbours with a label between them.
  let low = exact(parseInstant("2026-03-01T00:00:00Z", "UTC", table));
  let high = low + stretch;
  const start = ahead(low);
  expect(ahead(high)).toBeGreaterThan(start);
  while (high - low > 1n) {
    const middle = (low + high) / 2n;
    if (ahead(middle) > start) high = middle;
    else low = middle;
  }
  const [before, after] = [low, high].map((total) => labelOf(formatInstant(at(total), scale, table)));
  expect(after! - before!).toBe(2n);
  expect([at(low), at(high)]).toContainEqual(parseInstant(textOf(before! + 1n), scale, table));
});

describe("rates and origins, against exact decimals", () => {
  const Exact = Decimal.clone({ precision: 60 });
  const origin = 220_924_800n * second; // 1977-01-01T00:00:00 TAI
  const sinceOrigin = (instant: Instant) => new Exact(String(exact(instant) - origin));
  const LG = new Exact("6.969290134e-10"); // IAU 2000 Resolution B1.9
  const LB = new Exact("1.550519768e-8"); // IAU 2006 Resolution B3
  const tdb0 = new Exact("-6.55e7"); // ps, IAU 2006 Resolution B3
  const gap = (instant: Instant, scale: Scale, against: Scale): bigint =>
    labelOf(formatInstant(instant, scale, table)) - labelOf(formatInstant(instant, against, table));

  it("TCG - TT (IAU 2000 Resolution B1.9)", () => {
    fc.assert(
      fc.property(instants, (instant) => {
        const expected = LG.div(new Exact(1).minus(LG)).times(sinceOrigin(instant));
        expect(
          expected
            .minus(String(gap(instant, "TCG", "TT")))
            .abs()
            .toNumber(),
        ).toBeLessThanOrEqual(0.5);
      }),
      runs,
    );
  });

  it("TDB - TCB (IAU 2006 Resolution B3): both labels are rounded to a picosecond", () => {
    fc.assert(
      fc.property(instants, (instant) => {
        const tcb = new Exact(String(labelOf(formatInstant(instant, "TCB", table)) - 32_184_000_000_000n - origin));
        const expected = tdb0.minus(LB.times(tcb));
        expect(
          expected
            .minus(String(gap(instant, "TDB", "TCB")))
            .abs()
            .toNumber(),
        ).toBeLessThanOrEqual(1.001);
      }),
      runs,
    );
  });

  it("TDB - TT is the series, and stays below 2 ms (IERS Conventions 2010, chapter 10)", () => {
    fc.assert(
      fc.property(instants, (instant) => {
        const series = geocentricTdbMinusTt(instant);
        expect(Math.abs(series)).toBeLessThan(2e-3);
        expect(Math.abs(Number(gap(instant, "TDB", "TT")) - series * 1e12)).toBeLessThanOrEqual(0.501);
      }),
      runs,
    );
  });

  it("TT, TCG and TCB read the same at 1977-01-01T00:00:00 TAI, but for the periodic part (IAU 1991 Resolution A4)", () => {
    const at = parseInstant("1977-01-01T00:00:00", "TAI", table);
    expect(formatInstant(at, "TT", table)).toBe("1977-01-01T00:00:32.184000000000");
    expect(formatInstant(at, "TCG", table)).toBe("1977-01-01T00:00:32.184000000000");
    // TCB - TDB is 65.5 microseconds there, and TDB - TT is nearly the opposite.
    expect(Math.abs(Number(gap(at, "TCB", "TT")))).toBeLessThan(1e6);
    expect(gap(at, "TCB", "TDB")).toBe(65_500_000n);
  });

  it.each([
    ["GST", -19n],
    ["BDT", -33n],
    ["GPS", -19n],
  ] as const)(
    "%s keeps a whole number of seconds from TAI (Galileo OS SIS ICD, BDS-SIS-ICD, IS-GPS-200)",
    (scale, distance) => {
      for (const instant of fc.sample(instants, runs)) expect(gap(instant, scale, "TAI")).toBe(distance * second);
    },
  );
});

describe("GLONASS time is UTC + 3 h, leap seconds included (GLONASS ICD 5.1, from memory)", () => {
  const glonass = (text: string) => parseInstant(text, "GLONASS", table);
  it("has the leap second of UTC at 02:59:60", () => {
    const leap = parseInstant("2016-12-31T23:59:60.25Z", "UTC", table);
    expect(formatInstant(leap, "GLONASS", table)).toBe("2017-01-01T02:59:60.250000000000");
    expect(glonass("2017-01-01T02:59:60.25")).toEqual(leap);
    expect(glonass("2017-001T02:59:60.25")).toEqual(leap);
  });

  it.each([
    ["2016-12-31T20:59:59.999999999999Z", "2016-12-31T23:59:59.999999999999"],
    ["2016-12-31T21:00:00.000000000000Z", "2017-01-01T00:00:00.000000000000"],
    ["2016-12-31T23:59:59.000000000000Z", "2017-01-01T02:59:59.000000000000"],
    ["2017-01-01T00:00:00.000000000000Z", "2017-01-01T03:00:00.000000000000"],
    ["1972-01-01T00:00:00.000000000000Z", "1972-01-01T03:00:00.000000000000"],
    ["2100-12-31T23:59:59.999999999999Z", "2101-01-01T02:59:59.999999999999"],
  ])("%s is %s", (utc, text) => {
    expect(formatInstant(parseInstant(utc, "UTC", table), "GLONASS", table)).toBe(text);
    expect(formatInstant(glonass(text), "UTC", table)).toBe(utc);
  });

  it.each([
    "2017-01-01T23:59:60",
    "2018-01-01T02:59:60",
    "2016-12-31T02:59:60",
    "2017-01-01T03:59:60",
    "2017-01-01T02:60:00",
  ])("%s never was", (text) => expect(() => glonass(text)).toThrow(/second from 00 to 59|minute/));

  it("before 1972 in UTC is refused", () => {
    expect(() => glonass("1972-01-01T02:59:59.999999999999")).toThrow(/1972-01-01/);
  });
});

describe("refusals", () => {
  it.each(["TCG", "TDB", "TCB", "GST", "BDT"] as const)("%s has no leap seconds, no Z and no offset", (scale) => {
    const read = (text: string) => () => parseInstant(text, scale, table);
    expect(read("2016-12-31T23:59:60")).toThrow(`${scale} has no leap seconds`);
    expect(read("2016-12-31T23:59:59Z")).toThrow(/no Z/);
    expect(read("2016-12-31T23:59:59+00:00")).toThrow(/offset/);
    expect(read("1971-12-30T00:00:00")).toThrow(/1972-01-01/);
    expect(read("2101-01-02T00:00:00")).toThrow(/2100-12-31/);
    expect(read("0001-01-01T00:00:00")).toThrow(/1972-01-01/);
    expect(read("9999-12-31T23:59:59")).toThrow(/2100-12-31/);
  });

  it.each(scales)("the first and the last picosecond of the covered years are read and written in %s", (scale) => {
    for (const end of [first, last]) expect(parseInstant(formatInstant(end, scale, table), scale, table)).toEqual(end);
  });
});
