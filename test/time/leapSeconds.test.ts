import { describe, expect, it } from "vitest";
import { defaultLeapSeconds, formatInstant, parseInstant } from "../../src/time/index.ts";

const utc = (text: string) => parseInstant(text, "UTC", defaultLeapSeconds);

describe("the leap second of 2016-12-31 (IERS Bulletin C 52)", () => {
  it("is one second before the new year and has a place of its own", () => {
    const last = utc("2016-12-31T23:59:59Z");
    const leap = utc("2016-12-31T23:59:60Z");
    const next = utc("2017-01-01T00:00:00Z");
    expect(leap.seconds - last.seconds).toBe(1);
    expect(next.seconds - leap.seconds).toBe(1);
    expect(formatInstant(leap, "UTC", defaultLeapSeconds)).toBe("2016-12-31T23:59:60.000000000000Z");
    expect(formatInstant(leap, "TAI", defaultLeapSeconds)).toBe("2017-01-01T00:00:36.000000000000");
  });
});
