import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { BudgetResponse } from "../../src/wire/index.ts";
import { holdGoodAnswer, holdProblem } from "../support/contract.ts";
import { altered, type Body, circleTable, epoch, flight, highOrbit, lowOrbit, mountain } from "../support/requests.ts";
import { post, type Service, startService } from "../support/service.ts";

const path = "/v1/drift-budgets";
const day = 86_400;

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

async function budget(body: Body): Promise<BudgetResponse> {
  const response = await post(service.address, path, body);
  return holdGoodAnswer(path, body, response) as BudgetResponse;
}

const gpsLike = { ...lowOrbit(), positionKm: [26_561.4, 0, 0], velocityKmPerS: [0, 2.222, 3.1735] };
const eccentric = { ...lowOrbit(), positionKm: [7378.137, 0, 0], velocityKmPerS: [0, 4.3414, 8.6696] };

describe("a drift budget", () => {
  it.each([
    ["low", lowOrbit(), 5 * day, "argument of latitude"],
    ["12 h", gpsLike, 10 * day, "argument of latitude"],
    ["24 h", highOrbit(), 10 * day, "argument of latitude"],
    ["e = 0.74", eccentric, 10 * day, "perigee"],
  ] as const)(
    "%s: the closed form stands beside the integral, to 0.5 ns a day",
    async (_, trajectory, horizonS, countedBy) => {
      const answer = await budget({ trajectory, horizonS });
      const { orbit, closedForm, total, terms, meanOverS } = answer;
      expect(orbit?.countedBy).toBe(countedBy);
      expect(meanOverS).toBeLessThanOrEqual(horizonS);
      expect(meanOverS).toBeGreaterThan(horizonS - orbit!.periodS - 1);
      expect(meanOverS / orbit!.periodS).toBeCloseTo(orbit!.revolutions, 9);
      // First order in J2: 0.2 to 1 ns a day in low orbits (physics of the secular form).
      expect(Math.abs(closedForm!.differenceNs / meanOverS) * day).toBeLessThan(0.5);
      expect(terms.reduce((sum, { meanRate }) => sum + meanRate, 0)).toBeCloseTo(total.meanRate, 20);
      expect(total.perDayUs).toBeCloseTo(total.meanRate * day * 1e6, 12);
      expect(total.perOrbitNs).toBeCloseTo(total.meanRate * orbit!.periodS * 1e9, 9);
    },
  );

  it("of a navigation-type orbit is near 38.6 microseconds a day (IS-GPS-200: 4.4647e-10)", async () => {
    const { total, frequencyPreset } = await budget({
      trajectory: gpsLike,
      horizonS: 10 * day,
      clock: {
        counter: { ticksPerSecond: 1000 },
        anchor: { reading: 0, at: epoch },
        oscillator: { nominalHz: 10.23e6 },
      },
    });
    expect(total.perDayUs).toBeCloseTo(38.57, 1);
    // The interface specification sets 10.229 999 995 4326 MHz for a = 26 561.4 km exactly.
    expect(frequencyPreset.setHz).toBeCloseTo(10_229_999.9954326, 6);
    expect(frequencyPreset.hz).toBeCloseTo(-0.0045674, 6);
  });

  it("shows the eccentricity's wave twice its amplitude from peak to peak", async () => {
    const { total, closedForm } = await budget({ trajectory: eccentric, horizonS: 2 * day });
    expect(total.peakToPeakNs / (2 * closedForm!.eccentricityAmplitudeNs)).toBeCloseTo(1, 2);
  });

  it.each([
    ["a clock on the ground", { trajectory: mountain(), horizonS: day, from: epoch }, /no orbit/],
    ["a clock that is carried", { trajectory: flight(), horizonS: 3600 }, /no orbit/],
    ["an escape", { trajectory: { ...lowOrbit(), velocityKmPerS: [0, 11.5, 0] }, horizonS: 3600 }, /escape/],
    ["less than one revolution", { trajectory: highOrbit(), horizonS: 3600 }, /shorter than one revolution/],
  ])("without an orbit runs from end to end and says why: %s", async (_, body, why) => {
    const answer = await budget(body);
    expect(answer.orbit).toBeNull();
    expect(answer.closedForm).toBeNull();
    expect(answer.total.perOrbitNs).toBeNull();
    expect(answer.withoutOrbit).toMatch(why);
    expect(answer.meanOverS).toBeCloseTo(body.horizonS, 6);
  });

  it("along a table of states, with chosen terms and a series of the asked length", async () => {
    const body = {
      trajectory: circleTable(200, 60, true),
      horizonS: 199 * 60,
      terms: ["velocity", "earth-monopole"],
      seriesPoints: 50,
    };
    const { terms, series } = await budget(body);
    expect(terms.map(({ term }) => term)).toEqual(["velocity", "earth-monopole"]);
    expect(series).toHaveLength(50);
    expect(series[0]).toEqual({ atS: 0, accumulatedNs: 0, periodicNs: 0 });
    expect(series[49]!.atS).toBeCloseTo(199 * 60, 6);
  });
});

const good = { trajectory: lowOrbit(), horizonS: day };
const bad: readonly (readonly [string, Body, string, Parameters<typeof holdProblem>[3], RegExp])[] = [
  ["no horizon", altered(good, "/horizonS", undefined), "/horizonS", "invalid-request", /missing/],
  ["a horizon of nothing", altered(good, "/horizonS", 0), "/horizonS", "invalid-request", /more than 0/],
  ["a horizon backwards", altered(good, "/horizonS", -5), "/horizonS", "invalid-request", /more than 0/],
  ["a horizon over 20 years", altered(good, "/horizonS", 21 * 366 * day), "/horizonS", "horizon-too-long", /20 years/],
  ["a horizon past the span", altered(good, "/horizonS", 500 * day), "/horizonS", "outside-span", /2027-04-05/],
  ["a start before the span", { ...good, from: "2020-01-01T00:00:00Z" }, "/from", "outside-span", /2025-01-25/],
  ["an unreadable start", { ...good, from: "tomorrow" }, "/from", "invalid-instant", /ISO 8601/],
  [
    "a clock on the ground without a start",
    { trajectory: mountain(), horizonS: day },
    "/from",
    "invalid-request",
    /no epoch/,
  ],
  ["too long a series", { ...good, seriesPoints: 2001 }, "/seriesPoints", "invalid-request", /at most 2000/],
  ["no trajectory", altered(good, "/trajectory", undefined), "/trajectory", "invalid-request", /missing/],
  ["an unknown field", { ...good, toleranceNs: 5 }, "/toleranceNs", "invalid-request", /no such field/],
  [
    "a state inside the Earth",
    altered(good, "/trajectory/positionKm", [10, 0, 0]),
    "/trajectory/positionKm",
    "impossible-state",
    /inside the Earth/,
  ],
  ["terms of nothing", { ...good, terms: [] }, "/terms", "invalid-request", /at least 1/],
];

describe("a budget that cannot be", () => {
  it.each(bad)("%s", async (_, body, pointer, code, hint) => {
    const problem = holdProblem("POST", path, await post(service.address, path, body), code);
    expect(problem.faults?.[0]?.pointer).toBe(pointer);
    expect(`${problem.detail} ${problem.faults?.[0]?.expected}`).toMatch(hint);
  });
});
