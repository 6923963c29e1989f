import fc from "fast-check";
import { DateTime } from "luxon";
import { describe, expect, it } from "vitest";
import {
  addDuration,
  calendarDate,
  compareInstants,
  dayNumber,
  defaultLeapSeconds,
  durationBetween,
  formatInstant,
  type Instant,
  parseInstant,
  type Scale,
  scales,
} from "../../src/time/index.ts";

const table = defaultLeapSeconds;
const seed = 20260301;
const first = parseInstant("1972-01-01T00:00:00Z", "UTC", table).seconds;
const last = parseInstant("2100-12-31T23:59:59Z", "UTC", table).seconds;

/** Hard moments: any time of the covered years, and often within seconds of a leap second. */
const instants: fc.Arbitrary<Instant> = fc
  .oneof(
    fc.integer({ min: first + 40, max: last - 40 }),
    fc
      .tuple(fc.constantFrom(...table.steps.slice(1)), fc.integer({ min: -3, max: 3 }))
      .map(([{ day, offset }, shift]) => day * 86_400 + offset + shift),
  )
  .chain((seconds) =>
    fc
      .oneof(
        fc.integer({ min: 0, max: 999_999_999_999 }),
        fc.constantFrom(0, 1, 999_999_999_999, 184_000_000_000, 816_000_000_000),
      )
      .map((picoseconds) => ({ seconds, picoseconds })),
  );

describe("instants", () => {
  it("print and read back to the picosecond in every scale, leap seconds included", () => {
    fc.assert(
      fc.property(instants, fc.constantFrom<Scale>(...scales), (instant, scale) => {
        const text = formatInstant(instant, scale, table);
        expect(parseInstant(text, scale, table)).toEqual(instant);
      }),
      { seed, numRuns: 20_000 },
    );
  });

  it("print in UTC in the order of time, and 23:59:60 only where the list has a step (IERS leap-second list)", () => {
    const days = new Set(table.steps.slice(1).map(({ day }) => day - 1));
    fc.assert(
      fc.property(instants, (instant) => {
        const text = formatInstant(instant, "UTC", table);
        const later = formatInstant({ ...instant, seconds: instant.seconds + 1 }, "UTC", table);
        expect(later > text).toBe(true);
        if (text.slice(17, 19) === "60") {
          const [year, month, day] = text.slice(0, 10).split("-").map(Number);
          expect(days.has(dayNumber(year!, month!, day!))).toBe(true);
        }
      }),
      { seed, numRuns: 10_000 },
    );
  });

  it("agree with a calendar library to the millisecond where there is no leap second (luxon)", () => {
    fc.assert(
      fc.property(fc.integer({ min: -719_000, max: 200_000 }), (day) => {
        const { year, month, day: dayOfMonth } = calendarDate(day);
        const oracle = DateTime.fromMillis(day * 86_400_000, { zone: "utc" });
        expect([year, month, dayOfMonth]).toEqual([oracle.year, oracle.month, oracle.day]);
        expect(dayNumber(year, month, dayOfMonth)).toBe(day);
      }),
      { seed, numRuns: 20_000 },
    );
  });

  it("read the day of year as the calendar date", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1972, max: 2100 }), fc.integer({ min: 1, max: 365 }), (year, ordinal) => {
        const date = DateTime.fromObject({ year, ordinal }, { zone: "utc" }).toISODate();
        const byOrdinal = parseInstant(`${year}-${String(ordinal).padStart(3, "0")}T06:07:08.9Z`, "UTC", table);
        expect(byOrdinal).toEqual(parseInstant(`${date}T06:07:08.9Z`, "UTC", table));
      }),
      { seed, numRuns: 2_000 },
    );
  });

  it("differ by exactly what is added between them", () => {
    fc.assert(
      fc.property(instants, instants, (a, b) => {
        const between = durationBetween(a, b);
        expect(addDuration(a, between)).toEqual(b);
        expect(Math.sign(compareInstants(a, b))).toBe(-Math.sign(compareInstants(b, a)) + 0);
        // Exact by big integers.
        const ps = (i: Instant) => BigInt(i.seconds) * 1_000_000_000_000n + BigInt(i.picoseconds);
        expect(BigInt(between.seconds) * 1_000_000_000_000_000n + BigInt(between.femtoseconds)).toBe(
          (ps(b) - ps(a)) * 1000n,
        );
      }),
      { seed, numRuns: 10_000 },
    );
  });
});
