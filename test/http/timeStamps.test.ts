import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";
import { type Body, mountain } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");

/** A clock on the geoid: nothing but the oscillator and the tides moves it against TT. */
const seaLevel = { ...mountain(), heightM: 0 };
const quiet = {
  trajectory: seaLevel,
  terms: ["reference-surface", "velocity", "earth-monopole", "earth-oblateness", "earth-higher"],
};

const stamped = (timeStamp: Body, anchor: Body, readings: string[], oscillator?: Body) =>
  corrections(
    {
      ...quiet,
      clock: { timeStamp, anchor, ...(oscillator && { oscillator }) },
      readings: readings.map((reading) => ({ reading })),
    },
    bench,
  ).results.map(({ corrected, clockMinusTtNs }) => ({ corrected, clockMinusTtNs }));

describe("a clock that shows the time itself", () => {
  it("is off by what it showed less what it was at the anchor, and by the offset given besides", () => {
    const [result] = stamped(
      { scale: "UTC" },
      { reading: "2026-03-01T00:00:00.000250Z", at: "2026-03-01T00:00:00Z" },
      ["2026-03-01T06:00:00.000250Z"],
      { offsetNs: 1000 },
    );
    expect(result!.corrected).toBe("2026-03-01T05:59:59.999999000000Z");
    expect(result!.clockMinusTtNs).toBeCloseTo(251_000, 3);
  });

  it.each([
    ["UTC", "2026-03-01T00:10:00Z", "2026-03-01T00:00:00Z"],
    ["TAI", "2026-03-01T00:10:37", "2026-03-01T00:00:37"],
    ["TT", "2026-03-01T00:11:09.184", "2026-03-01T00:01:09.184"],
    ["GPS", "2026-03-01T00:10:18", "2026-03-01T00:00:18"],
  ])("in %s", (scale, reading, atAnchor) => {
    const [result] = stamped({ scale }, { reading: atAnchor, at: "2026-03-01T00:00:00Z" }, [reading]);
    expect(result!.corrected).toBe("2026-03-01T00:10:00.000000000000Z");
  });

  it("counts GPS weeks and seconds from 1980-01-06 (IS-GPS-200 3.3.4): week 2408 began on 2026-03-01", () => {
    const [result] = stamped(
      { scale: "GPS", form: "week-seconds" },
      { reading: "2408 18", at: "2026-03-01T00:00:00Z" },
      ["2408 618.5"],
    );
    expect(result!.corrected).toBe("2026-03-01T00:10:00.500000000000Z");
    const bySeconds = stamped(
      { scale: "GPS", form: "seconds" },
      { reading: String(2408 * 604_800 + 18), at: "2026-03-01T00:00:00Z" },
      [`${2408 * 604_800 + 618}.5`],
    );
    expect(bySeconds[0]!.corrected).toBe("2026-03-01T00:10:00.500000000000Z");
  });

  it("follows a leap second or holds TAI - UTC (IERS Bulletin C 52)", () => {
    const anchor = { reading: "2016-12-31T23:00:00Z", at: "2016-12-31T23:00:00Z" };
    const followed = stamped({ scale: "UTC" }, anchor, ["2016-12-31T23:59:60.5Z", "2017-01-01T00:00:00Z"]);
    expect(followed.map(({ corrected }) => corrected)).toEqual([
      "2016-12-31T23:59:60.500000000000Z",
      "2017-01-01T00:00:00.000000000000Z",
    ]);
    const held = stamped({ scale: "UTC", leapSeconds: { heldAt: 36 } }, anchor, ["2017-01-01T00:00:00Z"]);
    expect(held[0]!.corrected).toBe("2016-12-31T23:59:60.000000000000Z");
  });

  it.each([
    [{ scale: "UTC" }, "2026-03-01T00:00:00.000001000000Z"],
    [{ scale: "UTC", leapSeconds: { heldAt: 30 } }, "2026-02-28T23:59:53.000000000000Z"],
    [{ scale: "GPS", form: "week-seconds" }, "2408 18.250000000000"],
    [{ scale: "TT" }, "2026-03-01T00:01:09.184000000000"],
  ])("is predicted as it writes: %j", (timeStamp, reading) => {
    const clock = { timeStamp, anchor: { reading, at: "2026-03-01T00:00:00Z" } };
    const { results } = predictedReadings({ ...quiet, clock, instants: ["2026-03-01T00:00:00Z"] }, bench);
    expect(results[0]).toMatchObject({ reading, fraction: 0, sigmaTicks: null });
  });

  it("brings the step of its stamp into the uncertainty", () => {
    const clock = {
      timeStamp: { scale: "UTC", resolutionS: 0.001 },
      anchor: { reading: "2026-03-01T00:00:00Z", at: "2026-03-01T00:00:00Z" },
    };
    const { results } = corrections({ ...quiet, clock, readings: [{ reading: "2026-03-01T00:00:01.234Z" }] }, bench);
    expect(results[0]!.uncertainty.find(({ source }) => source === "tick")!.ns).toBeCloseTo(1e6 / Math.sqrt(12), 3);
  });

  it.each([
    ["a number for a stamp", { scale: "UTC" }, 5, "/readings/0/reading", /text/],
    ["no Z", { scale: "UTC" }, "2026-03-01T00:00:00", "/readings/0/reading", /Z/],
    ["a Z in GPS time", { scale: "GPS" }, "2026-03-01T00:00:00Z", "/readings/0/reading", /no Z/],
    ["seconds beyond the week", { scale: "GPS", form: "week-seconds" }, "2408 604800", "/readings/0/reading", /604800/],
    ["weeks of UTC", { scale: "UTC", form: "week-seconds" }, "2408 0", "/clock/timeStamp/form", /GPS/],
    [
      "leap seconds of TAI",
      { scale: "TAI", leapSeconds: { heldAt: 37 } },
      "2026-03-01T00:00:00",
      "/clock/timeStamp/leapSeconds",
      /UTC/,
    ],
  ])("refuses %s", (_, timeStamp: Body, reading, pointer, hint) => {
    const good =
      timeStamp.form === undefined
        ? timeStamp.scale === "UTC"
          ? "2026-03-01T00:00:00Z"
          : "2026-03-01T00:00:00"
        : "2408 0";
    const clock = { timeStamp, anchor: { reading: good, at: "2026-03-01T00:00:00Z" } };
    try {
      corrections({ ...quiet, clock, readings: [{ reading }] }, bench);
      expect.unreachable();
    } catch (error) {
      const { faults, message } = error as { faults: { place: unknown[]; expected: string }[]; message: string };
      expect(`/${faults[0]!.place.join("/")}`).toBe(pointer);
      expect(`${message} ${faults[0]!.expected}`).toMatch(hint);
    }
  });
});
