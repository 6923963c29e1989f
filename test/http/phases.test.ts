import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { BudgetResponse, CorrectionResponse } from "../../src/wire/index.ts";
import { changed, inventedLine1, inventedLine2 } from "../formats/inventedMessages.ts";
import { holdGoodAnswer, holdProblem } from "../support/contract.ts";
import { type Body, circleTable, epoch, highOrbit, lowOrbit, millisecondClock, moment } from "../support/requests.ts";
import { post, type Service, startService } from "../support/service.ts";

/** Trajectories one after the other, over the calls. Everything in them is invented. */

const budgets = "/v1/drift-budgets";
const corrections = "/v1/corrections";

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

const phases = (...parts: (readonly [from: string, trajectory: Body])[]): Body => ({
  kind: "phases",
  parts: parts.map(([from, trajectory]) => ({ from, trajectory })),
});

const correctionOf = (
  trajectory: Body,
  readings: readonly number[],
  anchor: Body = { reading: 0, at: epoch },
): Body => ({
  clock: { ...millisecondClock(), anchor },
  trajectory,
  readings: readings.map((reading) => ({ reading })),
});

async function corrected(trajectory: Body, readings: readonly number[], anchor?: Body): Promise<CorrectionResponse> {
  const body = correctionOf(trajectory, readings, anchor);
  return holdGoodAnswer(corrections, body, await post(service.address, corrections, body)) as CorrectionResponse;
}

async function budget(trajectory: Body, horizonS: number, more: Body = {}): Promise<BudgetResponse> {
  const body = { trajectory, horizonS, ...more };
  return holdGoodAnswer(budgets, body, await post(service.address, budgets, body)) as BudgetResponse;
}

const codesOf = ({ notices }: { notices: readonly { code: string }[] }): string[] => notices.map(({ code }) => code);

/** A state on another orbit, 100 km higher and a quarter turn on: as after a push. */
const pushed = (seconds: number): Body => ({
  ...highOrbit(),
  epoch: moment(seconds),
  positionKm: [0, 42_266, 0],
  velocityKmPerS: [-3.071, 0, 0.02],
});

/** A workshop, a lorry to the pad, the wait there, and the flight. */
const workshop: Body = {
  kind: "surface",
  body: "Earth",
  latitudeDeg: 4.25,
  longitudeDeg: -51.5,
  heightM: 120,
  heightOf: "geoid",
};
const padPlace = { latitudeDeg: 4.5, longitudeDeg: -51.75, heightM: 15 };
const lorry: Body = {
  kind: "track",
  body: "Earth",
  heightOf: "geoid",
  points: [
    { at: moment(3600), latitudeDeg: 4.25, longitudeDeg: -51.5, heightM: 120 },
    { at: moment(5400), latitudeDeg: 4.375, longitudeDeg: -51.625, heightM: 60 },
    { at: moment(7200), ...padPlace },
  ],
};
const pad: Body = { ...workshop, ...padPlace };
const flight: Body = { ...lowOrbit(), epoch: moment(9000) };
const mission = phases([epoch, workshop], [moment(3600), lorry], [moment(7200), pad], [moment(9000), flight]);

describe("a clock from the workshop to orbit", () => {
  it("keeps its time over every border and changes its rate at the launch", async () => {
    const borders = [3600, 7200, 9000];
    // A millisecond before and after: the rate is below 1e-9, so that nothing may change by more than 2 ps.
    const { results } = await corrected(
      mission,
      borders.flatMap((s) => [1000 * s - 1, 1000 * s + 1]),
    );
    const rateOf = (k: number): number => results[k]!.terms.reduce((sum, { rate }) => sum + rate, 0);
    for (const k of [0, 2, 4]) {
      const [before, after] = [results[k]!, results[k + 1]!];
      expect(Math.abs(after.clockMinusTtNs - before.clockMinusTtNs)).toBeLessThan(2e-3);
    }
    expect(Math.abs(rateOf(0) - rateOf(1))).toBeLessThan(1e-13);
    expect(Math.abs(rateOf(2) - rateOf(3))).toBeLessThan(1e-13);
    // On the pad hardly a rate, in a low orbit -3e-10 of it.
    expect(Math.abs(rateOf(4))).toBeLessThan(1e-13);
    expect(rateOf(5)).toBeLessThan(-2e-10);
  });

  it("runs g h/c^2 fast in the workshop and as the orbit does later", async () => {
    const { results } = await corrected(mission, [3_600_000, 9_000_000, 95_400_000]);
    // 120 m above the geoid: 9.78 * 120/c^2 = 1.31e-14, 0.047 ns in an hour.
    expect(results[0]!.clockMinusTtNs).toBeCloseTo(((9.78 * 120) / 299_792_458 ** 2) * 3600e9, 2);
    const launch = results[1]!;
    const alone = await corrected(flight, [86_400_000], { reading: 0, at: moment(9000) });
    expect(results[2]!.clockMinusTtNs - launch.clockMinusTtNs).toBeCloseTo(alone.results[0]!.clockMinusTtNs, 2);
  });

  it("has a budget from its first part on, or from where it is asked", async () => {
    const whole = await budget(mission, 9000 + 86_400);
    expect(whole.from).toBe("2026-03-01T00:00:00.000000000000Z");
    const late = await budget(mission, 86_400, { from: moment(9000) });
    const alone = await budget(flight, 86_400);
    expect(late.total.meanRate / alone.total.meanRate).toBeCloseTo(1, 9);
    expect(late.orbit!.revolutions).toBe(alone.orbit!.revolutions);
  });
});

describe("phases", () => {
  it.each([
    ["two states with a push between", phases([epoch, highOrbit()], [moment(43_200), pushed(43_200)]), 43_200, 86_400],
    ["a table and then a state", phases([epoch, circleTable(131, 60, true)], [moment(7200), lowOrbit()]), 7200, 14_400],
    [
      "a state and then mean elements of a later epoch",
      phases(
        [epoch, lowOrbit()],
        [moment(7200), { kind: "omm", omm: { ...inventedKite, EPOCH: "2026-03-01T12:00:00" } }],
      ),
      7200,
      14_400,
    ],
  ] as const)("%s add up to the two alone, term by term", async (_, trajectory, border, end) => {
    const [first, second] = trajectory.parts as [Body, Body];
    const both = await corrected(trajectory, [1000 * border, 1000 * end]);
    const one = await corrected(first.trajectory, [1000 * border]);
    const atBorder = both.results[0]!;
    expect(atBorder.clockMinusTt).toBe(one.results[0]!.clockMinusTt);
    // The second alone, anchored at the border with what the clock showed there (to the picosecond of the answer).
    const scaled = { ...millisecondClock(), anchor: { reading: 1000 * border, at: atBorder.corrected } };
    const body = { clock: scaled, trajectory: second.trajectory, readings: [{ reading: 1000 * end }] };
    const response = await post(service.address, corrections, body);
    const two = holdGoodAnswer(corrections, body, response) as CorrectionResponse;
    for (const [k, term] of both.results[1]!.terms.entries()) {
      const sum = atBorder.terms[k]!.accumulatedNs + two.results[0]!.terms[k]!.accumulatedNs;
      // A picosecond of the border's instant is 1e-21 s of time; the latch's tick is not a sum.
      expect(Math.abs(term.accumulatedNs - sum), term.term).toBeLessThan(1e-5);
    }
    const total = atBorder.clockMinusTtNs + two.results[0]!.clockMinusTtNs;
    expect(Math.abs(both.results[1]!.clockMinusTtNs - total)).toBeLessThan(1e-5);
  });

  it("jump in rate and not in time where the path jumps", async () => {
    const jump = phases([epoch, lowOrbit()], [moment(3600), { ...highOrbit(), epoch: moment(3600) }]);
    const { results } = await corrected(jump, [3_599_999, 3_600_001]);
    const [before, after] = results;
    const rate = ({ terms }: CorrectionResponse["results"][number]): number =>
      terms.reduce((sum, { rate: one }) => sum + one, 0);
    expect(rate(before!)).toBeLessThan(-2e-10);
    expect(rate(after!)).toBeGreaterThan(5e-10);
    // Two milliseconds at under 1e-9.
    expect(Math.abs(after!.clockMinusTtNs - before!.clockMinusTtNs)).toBeLessThan(2e-3);
  });

  it("count backwards from an anchor in a later part as forwards from the first", async () => {
    const path = phases([epoch, highOrbit()], [moment(43_200), pushed(43_200)]);
    const forwards = await corrected(path, [86_400_000]);
    const backwards = await corrected(path, [0], { reading: 86_400_000, at: forwards.results[0]!.corrected });
    expect(backwards.results[0]!.clockMinusTtNs).toBeCloseTo(-forwards.results[0]!.clockMinusTtNs, 5);
    expect(backwards.results[0]!.flags).toContain("before-anchor");
  });

  it("of a single part are that part", async () => {
    const one = await corrected(phases([epoch, highOrbit()]), [86_400_000]);
    const plain = await corrected(highOrbit(), [86_400_000]);
    expect(one.results[0]!.corrected).toBe(plain.results[0]!.corrected);
  });

  it("place the remarks on a message in their part", async () => {
    const message = { kind: "omm", omm: inventedKite };
    const { notices } = await corrected(phases([epoch, lowOrbit()], [moment(7200), message]), [1000]);
    const remark = notices.find(({ code }) => code === "mean-element-uncertainty");
    expect(remark?.pointer).toBe("/trajectory/parts/1/trajectory");
    expect(codesOf({ notices })).toContain("orbit-uncertainty-not-given");
  });
});

const inventedKite = {
  OBJECT_NAME: "KITE 15",
  OBJECT_ID: "2026-994U",
  EPOCH: "2026-03-01T02:00:00",
  MEAN_MOTION: 14.25,
  ECCENTRICITY: 0.0025,
  INCLINATION: 77.7,
  RA_OF_ASC_NODE: 10,
  ARG_OF_PERICENTER: 20,
  MEAN_ANOMALY: 30,
  NORAD_CAT_ID: 77_778,
  BSTAR: 0,
  MEAN_MOTION_DOT: 0,
  MEAN_MOTION_DDOT: 0,
};

type Code = Parameters<typeof holdProblem>[3];
const second = "/trajectory/parts/1";
const after = (trajectory: Body): Body => phases([epoch, highOrbit()], [moment(43_200), trajectory]);
const tle = { kind: "tle", line1: inventedLine1, line2: inventedLine2 };

const bad: readonly (readonly [name: string, trajectory: Body, pointer: string, code: Code, hint: RegExp])[] = [
  ["no part", phases(), "/trajectory/parts", "invalid-request", /at least 1/],
  [
    "parts out of order",
    phases([moment(60), highOrbit()], [epoch, highOrbit()]),
    `${second}/from`,
    "impossible-table",
    /lies before/,
  ],
  [
    "two parts at one instant",
    phases([epoch, highOrbit()], [epoch, highOrbit()]),
    `${second}/from`,
    "impossible-table",
    /same instant/,
  ],
  [
    "a gap: a table that ends before the next part",
    phases([epoch, circleTable(60, 60, true)], [moment(7200), highOrbit()]),
    "/trajectory/parts/0/trajectory",
    "impossible-table",
    /ends before the next part/,
  ],
  [
    "a part that begins before its track",
    phases([epoch, highOrbit()], [moment(60), lorry]),
    `${second}/from`,
    "impossible-table",
    /begins before its trajectory/,
  ],
  [
    "a part that begins after its table's end",
    phases([epoch, highOrbit()], [moment(43_200), circleTable(60, 60, true)]),
    second,
    "impossible-table",
    /begins after|ends before/,
  ],
  [
    "a part inside the Earth",
    after({ ...pushed(43_200), positionKm: [1, 2, 3] }),
    `${second}/trajectory/positionKm`,
    "impossible-state",
    /inside the Earth/,
  ],
  [
    "a part faster than light",
    after({ ...pushed(43_200), velocityKmPerS: [3e5, 0, 0] }),
    `${second}/trajectory/velocityKmPerS`,
    "impossible-state",
    /light/,
  ],
  [
    "an unreadable start",
    phases([epoch, highOrbit()], ["teatime", highOrbit()]),
    `${second}/from`,
    "invalid-instant",
    /ISO 8601/,
  ],
  [
    "an unreadable epoch in a part",
    after({ ...highOrbit(), epoch: "teatime" }),
    `${second}/trajectory/epoch`,
    "invalid-instant",
    /ISO 8601/,
  ],
  [
    "an unreadable epoch in a part's table",
    after({
      ...circleTable(9, 60, true),
      states: circleTable(9, 60, true).states.map((state: Body, i: number) =>
        i === 4 ? { ...state, epoch: "2026-02-30T00:00:00Z" } : state,
      ),
    }),
    `${second}/trajectory/states/4/epoch`,
    "invalid-instant",
    /day|month|calendar|February/,
  ],
  [
    "a part of an unknown kind",
    after({ kind: "carpet" }),
    `${second}/trajectory/kind`,
    "invalid-request",
    /carpet|one of/,
  ],
  [
    "phases in phases",
    after(phases([epoch, highOrbit()])),
    `${second}/trajectory/kind`,
    "invalid-request",
    /phases|one of/,
  ],
  [
    "a part without a trajectory",
    { kind: "phases", parts: [{ from: epoch }] },
    "/trajectory/parts/0/trajectory",
    "invalid-request",
    /missing|object/,
  ],
  [
    "a part without a start",
    { kind: "phases", parts: [{ trajectory: highOrbit() }] },
    "/trajectory/parts/0/from",
    "invalid-request",
    /missing/,
  ],
  [
    "a field of another kind in a part",
    after({ ...highOrbit(), line1: "1" }),
    `${second}/trajectory/line1`,
    "invalid-request",
    /no such field/,
  ],
  [
    "a covariance that cannot be in a part",
    after({ ...pushed(43_200), covarianceRtn: Array.from({ length: 6 }, () => [1, 2, 3, 4, 5, 6]) }),
    `${second}/trajectory/covarianceRtn/0/1`,
    "impossible-state",
    /not symmetric/,
  ],
  [
    "a wrong checksum in a part",
    after({ ...tle, line2: changed(inventedLine2, "77.7000", "77.8000") }),
    `${second}/trajectory/line2`,
    "invalid-message",
    /checksum/,
  ],
  [
    "a broken message in a part",
    after({ kind: "oem", text: "CCSDS_OEM_VERS = 9.9" }),
    `${second}/trajectory/text`,
    "invalid-message",
    /line 1/,
  ],
  [
    "a message without BSTAR in a part",
    after({ kind: "omm", omm: { ...inventedKite, BSTAR: undefined } }),
    `${second}/trajectory/omm`,
    "invalid-message",
    /BSTAR/,
  ],
  [
    "a message about Mars in a part",
    after({ kind: "omm", omm: { ...inventedKite, CENTER_NAME: "MARS" } }),
    `${second}/trajectory/omm`,
    "unusable-message",
    /MARS/,
  ],
  [
    "a table in a part that goes back",
    after({ ...lorry, points: lorry.points.toReversed() }),
    `${second}/trajectory/points/1/at`,
    "impossible-table",
    /lies before/,
  ],
];

describe("phases that cannot be", () => {
  it.each(bad)("%s", async (_, trajectory, pointer, code, hint) => {
    for (const [path, body] of [
      [budgets, { trajectory, horizonS: 60 }],
      [corrections, correctionOf(trajectory, [60_000])],
    ] as const) {
      const problem = holdProblem("POST", path, await post(service.address, path, body), code);
      expect(problem.faults?.map(({ pointer: at }) => at)).toContain(pointer);
      expect(`${problem.detail} ${problem.faults?.map(({ expected }) => expected).join(" ")}`).toMatch(hint);
    }
  });

  it("are told all their broken parts at once", async () => {
    const trajectory = phases([epoch, { ...highOrbit(), epoch: "soon" }], ["later", highOrbit()], [moment(60), tle]);
    const body = correctionOf(trajectory, [60]);
    const problem = holdProblem("POST", corrections, await post(service.address, corrections, body), "invalid-instant");
    expect(problem.faults!.map(({ pointer }) => pointer)).toEqual([
      "/trajectory/parts/0/trajectory/epoch",
      "/trajectory/parts/1/from",
    ]);
  });

  it("do not answer before their first part", async () => {
    const path = phases([epoch, highOrbit()]);
    const body = correctionOf(path, [60], { reading: 0, at: moment(-60) });
    const problem = holdProblem("POST", corrections, await post(service.address, corrections, body), "outside-span");
    expect(problem.faults![0]!.pointer).toBe("/clock/anchor/at");
  });

  it("end with a propagated part that comes to its end inside the Earth", async () => {
    const falling = { ...lowOrbit(), epoch: moment(43_200), velocityKmPerS: [-9, 0, 0.1] };
    const body = correctionOf(after(falling), [60_000, 50_000_000]);
    const problem = holdProblem(
      "POST",
      corrections,
      await post(service.address, corrections, body),
      "impossible-state",
    );
    expect(problem.detail).toMatch(/inside of the Earth/);
    expect(problem.faults![0]!.pointer).toMatch(/^\/trajectory\/parts\/1\/trajectory/);
  });
});
