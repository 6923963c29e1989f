import { readdirSync, readFileSync, statSync } from "node:fs";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { ommFromJson, writeOmm } from "../../src/formats/index.ts";
import type { BudgetResponse, CorrectionResponse } from "../../src/wire/index.ts";
import { changed, inventedLine1, inventedLine2, summed } from "../formats/inventedMessages.ts";
import { noMessage, refused } from "../formats/standardSamples.data.ts";
import { openData } from "../published/sharedFolder.ts";
import { holdGoodAnswer, holdProblem, type ProblemBody } from "../support/contract.ts";
import { type Body, circleTable, epoch, millisecondClock, moment } from "../support/requests.ts";
import { post, type Service, startService } from "../support/service.ts";

/**
 * Orbit messages as trajectories, over the calls: what they say is what is computed, or the refusal helps.
 * Sources: CCSDS 502.0-B-3 (orbit data messages); two-line elements: common practice, no source.
 */

const budgets = "/v1/drift-budgets";
const corrections = "/v1/corrections";

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

async function budget(trajectory: Body, horizonS: number, more: Body = {}): Promise<BudgetResponse> {
  const body = { trajectory, horizonS, ...more };
  return holdGoodAnswer(budgets, body, await post(service.address, budgets, body)) as BudgetResponse;
}

const correctionOf = (trajectory: Body, seconds: readonly number[], at: string): Body => ({
  clock: { ...millisecondClock(), anchor: { reading: 0, at } },
  trajectory,
  readings: seconds.map((s) => ({ reading: 1000 * s })),
});

async function corrected(trajectory: Body, seconds: readonly number[], at = epoch): Promise<CorrectionResponse> {
  const body = correctionOf(trajectory, seconds, at);
  return holdGoodAnswer(corrections, body, await post(service.address, corrections, body)) as CorrectionResponse;
}

const instantsOf = ({ results }: CorrectionResponse): string[] => results.map(({ corrected: instant }) => instant);
const timesOf = ({ results }: CorrectionResponse): number[] => results.map(({ clockMinusTtNs }) => clockMinusTtNs);
const codesOf = ({ notices }: { notices: readonly { code: string }[] }): string[] => notices.map(({ code }) => code);
const sourcesOf = ({ results }: CorrectionResponse): string[] => results[0]!.uncertainty.map(({ source }) => source);

/** An instant as a message writes it; its scale stands in TIME_SYSTEM. */
const written = (instant: string): string => instant.replace("Z", "");

interface Segment {
  readonly states: readonly Body[];
  readonly lines?: readonly string[];
  readonly frame?: string;
  readonly center?: string;
  readonly covariance?: string;
}

/** A message about a pebble that nobody threw. */
const oemText = (segments: readonly Segment[]): string =>
  [
    "CCSDS_OEM_VERS = 2.0",
    "CREATION_DATE = 2026-02-28T00:00:00",
    "ORIGINATOR = NOBODY",
    ...segments.flatMap(({ states, lines = [], frame = "GCRF", center = "EARTH", covariance }) => [
      "META_START",
      "OBJECT_NAME = PEBBLE 4",
      "OBJECT_ID = 2026-999Z",
      `CENTER_NAME = ${center}`,
      `REF_FRAME = ${frame}`,
      "TIME_SYSTEM = UTC",
      `START_TIME = ${written(states[0].epoch)}`,
      ...lines.filter((line) => line.startsWith("USEABLE")),
      `STOP_TIME = ${written(states.at(-1).epoch)}`,
      ...lines.filter((line) => !line.startsWith("USEABLE")),
      "META_STOP",
      ...states.map((state) => [written(state.epoch), ...state.positionKm, ...state.velocityKmPerS].join(" ")),
      ...(covariance === undefined ? [] : [covariance]),
    ]),
    "",
  ].join("\n");

const oem = (...segments: Segment[]): Body => ({ kind: "oem", text: oemText(segments) });

const circle = circleTable(121, 60, true);
const states: readonly Body[] = circle.states;
const whole: Segment = { states };

/** Position known to 20 m outward and 40 m along, speed to 4 and 2 cm/s, in km. */
const covarianceIn = (frame: string): string =>
  [
    "COVARIANCE_START",
    `EPOCH = ${written(epoch)}`,
    `COV_REF_FRAME = ${frame}`,
    "4e-4",
    "0 16e-4",
    "0 0 1e-4",
    "0 0 0 16e-10",
    "0 0 0 0 4e-10",
    "0 0 0 0 0 1e-10",
    "COVARIANCE_STOP",
  ].join("\n");

describe("an ephemeris message", () => {
  const seconds = [600, 3000, 7000];

  it("gives the same instants as a table of the same states", async () => {
    const message = await corrected(oem(whole), seconds);
    const table = await corrected(circle, seconds);
    expect(instantsOf(message)).toEqual(instantsOf(table));
    expect(message.results.map(({ terms }) => terms)).toEqual(table.results.map(({ terms }) => terms));
  });

  it("of two segments that join is one path", async () => {
    const joined = oem({ states: states.slice(0, 61) }, { states: states.slice(60) });
    const answer = await corrected(joined, seconds);
    const single = timesOf(await corrected(oem(whole), seconds));
    for (const [i, ns] of timesOf(answer).entries()) expect(Math.abs(ns - single[i]!)).toBeLessThan(1e-6);
    expect(codesOf(answer)).not.toContain("segments-apart");
    expect((await budget(joined, 7200)).total.meanRate).toBeCloseTo(
      (await budget(oem(whole), 7200)).total.meanRate,
      17,
    );
  });

  it("of two segments with a gap counts in the part that holds the anchor, and says so", async () => {
    const apart = oem({ states: states.slice(0, 51) }, { states: states.slice(70) });
    const early = await corrected(apart, [600]);
    expect(codesOf(early)).toContain("segments-apart");
    expect(timesOf(early)[0]).toBeCloseTo(timesOf(await corrected(oem(whole), [600]))[0]!, 6);
    const late = await corrected(apart, [600], moment(5000));
    expect(timesOf(late)[0]).toBeCloseTo(timesOf(await corrected(oem(whole), [600], moment(5000)))[0]!, 6);
    const body = correctionOf(apart, [3600], epoch);
    const problem = holdProblem("POST", corrections, await post(service.address, corrections, body), "outside-span");
    expect(problem.faults![0]!.pointer).toBe("/readings/0/reading");
  });

  it.each([
    ["HERMITE", 11, 1e-3, false],
    ["HERMITE", 3, 1, true],
    ["LAGRANGE", 9, 1e-3, false],
    ["LINEAR", 1, 1e3, true],
  ] as const)("is read by %s of degree %i, to %d ns of the usual reading", async (name, degree, ns, isCoarse) => {
    // States every ten minutes, two fifths of a radian: so far apart that each way of reading is another number. In the
    // velocity term, for in the sum the errors of a free path cancel.
    const sparse = circleTable(31, 600, true).states;
    const velocity = async (lines: readonly string[]): Promise<[number[], CorrectionResponse]> => {
      const answer = await corrected(oem({ states: sparse, lines }), seconds);
      return [answer.results.map(({ terms }) => terms[0]!.accumulatedNs), answer];
    };
    const [given, answer] = await velocity([`INTERPOLATION = ${name}`, `INTERPOLATION_DEGREE = ${degree}`]);
    const [usual] = await velocity([]);
    const differences = given.map((value, i) => Math.abs(value - usual[i]!));
    expect(Math.max(...differences)).toBeLessThan(ns);
    // Another reading is another number, or the keyword was not honoured.
    expect(Math.max(...differences)).toBeGreaterThan(0);
    expect(codesOf(answer).includes("coarse-ephemeris")).toBe(isCoarse);
    if (isCoarse) expect(answer.results[0]!.flags).toContain("coarse-ephemeris");
  });

  it("is used in its useable span only, which the other states only support", async () => {
    const lines = [`USEABLE_START_TIME = ${written(moment(600))}`, `USEABLE_STOP_TIME = ${written(moment(6600))}`];
    const short = oem({ states, lines });
    const answer = await corrected(short, [60, 5900], moment(600));
    const full = await corrected(oem(whole), [60, 5900], moment(600));
    expect(instantsOf(answer)).toEqual(instantsOf(full));
    for (const [at, seconds, pointer] of [
      [moment(600), 6100, "/readings/0/reading"],
      [epoch, 60, "/clock/anchor/at"],
    ] as const) {
      const body = correctionOf(short, [seconds], at);
      const problem = holdProblem("POST", corrections, await post(service.address, corrections, body), "outside-span");
      expect(problem.faults![0]!.pointer).toBe(pointer);
      expect(problem.detail).toContain("01:50:00");
    }
    expect((await budget(short, 6000)).from).toBe("2026-03-01T00:10:00.000000000000Z");
  });

  it("brings its covariance in RTN axes into the uncertainty", async () => {
    const answer = await corrected(oem({ states, covariance: covarianceIn("RTN") }), [7000]);
    expect(sourcesOf(answer)).toContain("orbit");
    expect(codesOf(answer)).not.toContain("orbit-uncertainty-not-given");
    // Of one axis: da = 2 a dr/r and 2 a dv/v, here hypot(40 m, 2 * 9200 km * 2e-5/6.582 = 55.9 m) = 68.7 m; 3GM/(2a^2c^2) da dt.
    const growing = (1.5 * 3.986004418e14 * 68.7 * 7000 * 1e9) / (9.2e6 ** 2 * 299_792_458 ** 2);
    const orbit = answer.results[0]!.uncertainty.filter(({ source }) => source === "orbit");
    expect(Math.hypot(...orbit.map(({ ns }) => ns))).toBeGreaterThan(growing);
  });

  it("leaves a covariance in other axes aside and says so", async () => {
    const answer = await corrected(oem({ states, covariance: covarianceIn("EME2000") }), [7000]);
    expect(sourcesOf(answer)).not.toContain("orbit");
    expect(codesOf(answer)).toEqual(expect.arrayContaining(["message-remark", "orbit-uncertainty-not-given"]));
    expect(answer.notices.find(({ code }) => code === "message-remark")!.text).toMatch(/RTN/);
  });
});

/** A circle 100 km above the Moon: GM of the Moon 4902.8 km^3/s^2 (IERS Conventions 2010, Earth's by the mass ratio). */
function lunarCircle(count: number, stepS: number): readonly Body[] {
  const radius = 1837.4;
  const rate = Math.sqrt(4902.8 / radius ** 3);
  return Array.from({ length: count }, (_, i) => {
    const [c, s] = [Math.cos(rate * stepS * i), Math.sin(rate * stepS * i)];
    return {
      epoch: moment(stepS * i),
      positionKm: [radius * c, radius * s * 0.6, radius * s * 0.8],
      velocityKmPerS: [-radius * rate * s, radius * rate * c * 0.6, radius * rate * c * 0.8],
    };
  });
}

it("about the Moon in ICRF a table and a message run as clocks in lunar orbit do", async () => {
  const lunar = lunarCircle(250, 60);
  // Two revolutions of 7067 s, so that the product of the clock's and the Moon's velocity averages out.
  const horizonS = 14_134;
  const table = await budget({ kind: "state-table", frame: "ICRF", center: "Moon", states: lunar }, horizonS);
  const message = await budget(oem({ states: lunar, frame: "ICRF", center: "MOON" }), horizonS);
  expect(message.total.meanRate).toBeCloseTo(table.total.meanRate, 17);
  // 56.02 us/day on the surface (Ashby & Patla 2024); GM/(c^2 R) there against 3GM/(2c^2 r) in orbit is 1.13 less. The
  // Moon's own eccentric path moves the day's rate by a quarter of a microsecond.
  expect(Math.abs(table.total.perDayUs - 54.89)).toBeLessThan(0.3);
});

const opmText = (...more: string[]): string =>
  [
    "CCSDS_OPM_VERS = 2.0",
    "CREATION_DATE = 2026-02-28T00:00:00",
    "ORIGINATOR = NOBODY",
    "OBJECT_NAME = SKIPPED STONE",
    "OBJECT_ID = 2026-998Y",
    "CENTER_NAME = EARTH",
    "REF_FRAME = GCRF",
    "TIME_SYSTEM = UTC",
    `EPOCH = ${written(epoch)}`,
    "X = 9200 [km]",
    "Y = 0 [km]",
    "Z = 0 [km]",
    "X_DOT = 0 [km/s]",
    "Y_DOT = 5.25 [km/s]",
    "Z_DOT = 4 [km/s]",
    ...more,
    "",
  ].join("\n");

const opm = (text = opmText()): Body => ({ kind: "opm", text });

const stone: Body = {
  kind: "state-vector",
  frame: "GCRF",
  epoch,
  positionKm: [9200, 0, 0],
  velocityKmPerS: [0, 5.25, 4],
};

const elementNames = ["X", "Y", "Z", "X_DOT", "Y_DOT", "Z_DOT"];
const variances = [4e-4, 16e-4, 1e-4, 16e-10, 4e-10, 1e-10];
const opmCovariance = elementNames.flatMap((row, i) =>
  elementNames.slice(0, i + 1).map((column, j) => `C${row}_${column} = ${i === j ? variances[i] : 0}`),
);

describe("a state message", () => {
  it("is a state vector", async () => {
    const [message, state] = [await corrected(opm(), [86_400]), await corrected(stone, [86_400])];
    expect(message.results).toEqual(state.results);
    expect((await budget(opm(), 86_400)).terms).toEqual((await budget(stone, 86_400)).terms);
  });

  it("has its covariance in RTN axes honoured like covarianceRtn", async () => {
    const covarianceRtn = variances.map((value, i) => variances.map((_, j) => (i === j ? value : 0)));
    const state = await corrected({ ...stone, covarianceRtn }, [86_400]);
    const message = await corrected(opm(opmText("COV_REF_FRAME = RTN", ...opmCovariance)), [86_400]);
    expect(message.results[0]!.uncertaintyNs).toBe(state.results[0]!.uncertaintyNs);
    expect(sourcesOf(message)).toContain("orbit");
    const inertial = await corrected(opm(opmText("COV_REF_FRAME = GCRF", ...opmCovariance)), [86_400]);
    expect(codesOf(inertial)).toEqual(expect.arrayContaining(["message-remark", "orbit-uncertainty-not-given"]));
  });
});

const kite = {
  OBJECT_NAME: "KITE 14",
  OBJECT_ID: "2033-995V",
  CENTER_NAME: "EARTH",
  REF_FRAME: "TEME",
  TIME_SYSTEM: "UTC",
  MEAN_ELEMENT_THEORY: "SGP4",
  EPOCH: "2033-03-03T12:00:00",
  MEAN_MOTION: 14.25,
  ECCENTRICITY: 0.0025,
  INCLINATION: 77.7,
  RA_OF_ASC_NODE: 10,
  ARG_OF_PERICENTER: 20,
  MEAN_ANOMALY: 30,
  EPHEMERIS_TYPE: 0,
  CLASSIFICATION_TYPE: "U",
  NORAD_CAT_ID: 77_777,
  ELEMENT_SET_NO: 4,
  REV_AT_EPOCH: 42,
  BSTAR: -0.0000125,
  MEAN_MOTION_DOT: 0.000001,
  MEAN_MOTION_DDOT: 0,
} as const;
const kiteEpoch = "2033-03-03T12:00:00Z";

const without = (...names: (keyof typeof kite)[]): Body =>
  Object.fromEntries(Object.entries(kite).filter(([name]) => !(names as string[]).includes(name)));

const kiteKvn = [
  "CCSDS_OMM_VERS = 2.0",
  "CREATION_DATE = 2033-03-03T03:03:03",
  "ORIGINATOR = NOBODY",
  ...Object.entries(kite).map(([name, value]) => `${name} = ${value}`),
  "",
].join("\n");
const kiteXml = writeOmm(ommFromJson(kite).message, "xml");

describe("mean elements", () => {
  const seconds = [3600, 86_400];
  const tle = { kind: "tle", line1: inventedLine1, line2: inventedLine2 };

  it("give the same numbers as JSON, as JSON text, KVN and XML", async () => {
    const json = await corrected({ kind: "omm", omm: kite }, seconds, kiteEpoch);
    for (const text of [JSON.stringify(kite), JSON.stringify([kite]), kiteKvn, kiteXml]) {
      expect((await corrected({ kind: "omm", text }, seconds, kiteEpoch)).results).toEqual(json.results);
    }
    expect(codesOf(json)).toContain("mean-element-uncertainty");
    expect(sourcesOf(json)).toContain("orbit");
  });

  it("give the same numbers as the two lines that they fit into", async () => {
    const lines = await corrected(tle, seconds, kiteEpoch);
    const message = await corrected({ kind: "omm", omm: kite }, seconds, kiteEpoch);
    expect(lines.results).toEqual(message.results);
    expect((await budget(tle, 86_400)).terms).toEqual((await budget({ kind: "omm", omm: kite }, 86_400)).terms);
  });

  it("finer than two lines are as near as the lines' last digits", async () => {
    // Half of the last digit of the mean motion is 5e-9 rev/day: 3.5e-10 of it, two thirds of that of the rate's 3GM/2a.
    const finer = { ...kite, MEAN_MOTION: 14.250000004, INCLINATION: 77.70004, ECCENTRICITY: 0.00250004 };
    const [message] = timesOf(await corrected({ kind: "omm", omm: finer }, [86_400], kiteEpoch));
    const [lines] = timesOf(await corrected(tle, [86_400], kiteEpoch));
    expect(message).not.toBe(lines);
    expect(Math.abs(message! - lines!)).toBeLessThan(0.05);
  });

  it.each([
    ["a byte-order mark", { line1: `\ufeff${inventedLine1}` }],
    ["blanks and line ends behind the columns", { line1: `${inventedLine1}  \r\n`, line2: `${inventedLine2}\r` }],
    [
      "numbers padded with blanks",
      {
        line1: summed("1   777U 33999Z   33 62.50000000  .00000100  00000+0 -12500-4 0   42"),
        line2: summed("2   777  77.7000  10.0000   25000  20.0000  30.0000 14.25000000   42"),
      },
    ],
  ])("are read from lines with %s", async (_, lines) => {
    const plain = await corrected(tle, [86_400], kiteEpoch);
    expect((await corrected({ ...tle, ...lines }, [86_400], kiteEpoch)).results).toEqual(plain.results);
  });
});

type Code = Parameters<typeof holdProblem>[3];
type Bad = readonly [name: string, trajectory: Body, pointer: string, code: Code, hint: RegExp];

const oemWith = (what: string, by: string): Body => ({ kind: "oem", text: changed(oemText([whole]), what, by) });
const opmWith = (what: string, by: string): Body => opm(changed(opmText(), what, by));
const ommWith = (changes: Body): Body => ({ kind: "omm", omm: { ...kite, ...changes } });
const kvnWith = (what: string, by: string): Body => ({ kind: "omm", text: changed(kiteKvn, what, by) });
const line1With = (what: string, by: string): Body => ({
  kind: "tle",
  line1: summed(changed(inventedLine1, what, by).slice(0, 68)),
  line2: inventedLine2,
});
const line2With = (what: string, by: string): Body => ({
  kind: "tle",
  line1: inventedLine1,
  line2: summed(changed(inventedLine2, what, by).slice(0, 68)),
});
const moved = (index: number, changes: Body): readonly Body[] =>
  states.map((state, i) => (i === index ? { ...state, ...changes } : state));
const kick = [
  `MAN_EPOCH_IGNITION = ${written(moment(600))}`,
  "MAN_DURATION = 12",
  "MAN_DELTA_MASS = -0.5",
  "MAN_REF_FRAME = RTN",
  "MAN_DV_1 = 0.001",
  "MAN_DV_2 = 0",
  "MAN_DV_3 = 0",
];

const text = "/trajectory/text";
const badEphemerides: readonly Bad[] = [
  ["an empty text", { kind: "oem", text: "" }, text, "invalid-message", /CCSDS_OEM_VERS/],
  ["prose", { kind: "oem", text: "Dear flight dynamics,\n" }, text, "invalid-message", /line 1/],
  ["a state message", { kind: "oem", text: opmText() }, text, "invalid-message", /CCSDS_OEM_VERS/],
  ["no text", { kind: "oem" }, text, "invalid-request", /missing/],
  ["a number for a text", { kind: "oem", text: 7 }, text, "invalid-request", /string|text/],
  ["an unknown frame", oemWith("= GCRF", "= FLAT_EARTH"), text, "unusable-message", /FLAT_EARTH.*GCRF/s],
  ["another body", oemWith("= EARTH", "= MARS BARYCENTER"), text, "unusable-message", /MARS.*MOON/s],
  [
    "another interpolation",
    oem({ states, lines: ["INTERPOLATION = KNITTED", "INTERPOLATION_DEGREE = 3"] }),
    text,
    "unusable-message",
    /KNITTED.*HERMITE/s,
  ],
  [
    "interpolation without degree",
    oem({ states, lines: ["INTERPOLATION = HERMITE"] }),
    text,
    "invalid-message",
    /DEGREE/,
  ],
  ["an unknown time system", oemWith("= UTC", "= TEATIME"), text, "invalid-message", /TEATIME/],
  ["a day that is not", oemWith("2026-03-01T00:05:00", "2026-02-30T00:05:00"), text, "invalid-message", /line \d+/],
  [
    "letters in a state",
    oemWith("\n2026-03-01T00:05:00.000 ", "\n2026-03-01T00:05:00.000 x"),
    text,
    "invalid-message",
    /line \d+/,
  ],
  ["no META_STOP", oemWith("META_STOP\n", ""), text, "invalid-message", /line \d+/],
  ["no start", oemWith(`START_TIME = ${written(moment(0))}\n`, ""), text, "invalid-message", /START_TIME/],
  ["an unknown keyword", oemWith("META_STOP", "COLOUR = BLUE\nMETA_STOP"), text, "invalid-message", /COLOUR/],
  [
    "states that go back",
    oem({ states: moved(5, { epoch: moment(10) }) }),
    text,
    "invalid-message",
    /line \d+.*after the one before/s,
  ],
  [
    "one state twice",
    oem({ states: moved(5, { epoch: moment(240) }) }),
    text,
    "invalid-message",
    /line \d+.*after the one before/s,
  ],
  ["a single state", oem({ states: states.slice(0, 1) }), text, "impossible-table", /state/],
  [
    "a state inside the Earth",
    oem({ states: moved(5, { positionKm: [10, 0, 0] }) }),
    text,
    "impossible-state",
    /inside/,
  ],
  [
    "metres for kilometres",
    oem({ states: states.map((state) => ({ ...state, positionKm: state.positionKm.map((x: number) => 1000 * x) })) }),
    text,
    "impossible-state",
    /metres/,
  ],
  ["metres a second", oem({ states: moved(0, { velocityKmPerS: [0, 6582e3, 0] }) }), text, "impossible-state", /km\/s/],
  [
    "a covariance with a row missing",
    oem({ states, covariance: covarianceIn("RTN").replace("0 0 1e-4\n", "") }),
    text,
    "invalid-message",
    /row/,
  ],
  [
    "true of date about the Moon",
    oem({ states: lunarCircle(90, 60), frame: "TOD", center: "MOON" }),
    text,
    "unusable-message",
    /TOD|Moon/,
  ],
  [
    "Earth-fixed axes about the Moon",
    oem({ states: lunarCircle(90, 60), frame: "ITRF-2000", center: "MOON" }),
    text,
    "unusable-message",
    /ITRF|Moon/,
  ],
  [
    "a state inside the Moon",
    oem({
      states: lunarCircle(90, 60).map((state) => ({ ...state, positionKm: [900, 0, 0] })),
      frame: "ICRF",
      center: "MOON",
    }),
    text,
    "impossible-state",
    /inside the Moon/,
  ],
  [
    "a useable span beyond the states",
    oem({
      states,
      lines: [`USEABLE_START_TIME = ${written(epoch)}`, `USEABLE_STOP_TIME = ${written(moment(9000))}`],
    }),
    text,
    "invalid-message",
    /USEABLE_STOP_TIME/,
  ],
  [
    "a second segment of another frame that is unknown",
    oem(whole, { states, frame: "SQUARE" }),
    text,
    "unusable-message",
    /segment 2 of 2/,
  ],
];

const badStates: readonly Bad[] = [
  ["an ephemeris", opm(oemText([whole])), text, "invalid-message", /CCSDS_OPM_VERS/],
  ["manoeuvres", opm(opmText(...kick)), text, "unusable-message", /1 manoeuvres?.*ephemeris/s],
  ["a state about the Moon", opmWith("= EARTH", "= MOON"), text, "unusable-message", /Moon.*ephemeris/s],
  ["a state about Mars", opmWith("= EARTH", "= MARS"), text, "unusable-message", /MARS/],
  ["an unknown frame", opmWith("= GCRF", "= RIVERBED"), text, "unusable-message", /RIVERBED/],
  ["a component missing", opmWith("Z_DOT = 4 [km/s]\n", ""), text, "invalid-message", /Z_DOT/],
  ["another unit", opmWith("9200 [km]", "9200000 [m]"), text, "invalid-message", /\[m\].*km|km.*\[m\]/s],
  ["a comma in a number", opmWith("9200 [km]", "9,200 [km]"), text, "invalid-message", /9,200/],
  ["a keyword twice", opmWith("Y = 0 [km]", "Y = 0 [km]\nY = 0 [km]"), text, "invalid-message", /Y.*once/s],
  ["a state inside the Earth", opmWith("9200 [km]", "92 [km]"), text, "impossible-state", /inside/],
  ["metres a second", opmWith("5.25 [km/s]", "5250000 [km/s]"), text, "impossible-state", /light/],
  ["XML that does not end", opm("<opm><header>"), text, "invalid-message", /XML|line/],
];

const badElements: readonly Bad[] = [
  ["neither form", { kind: "omm" }, "/trajectory", "invalid-request", /exactly one of omm .*text/],
  ["both forms", { kind: "omm", omm: kite, text: kiteKvn }, text, "invalid-request", /exactly one of omm .*text/],
  ["a list for an object", { kind: "omm", omm: [kite] }, "/trajectory/omm", "invalid-request", /JSON object/],
  ["another theory", ommWith({ MEAN_ELEMENT_THEORY: "DSST" }), "/trajectory/omm", "unusable-message", /DSST.*SGP4/s],
  [
    "SGP4-XP",
    {
      kind: "omm",
      text: [
        ["VERS = 2.0", "VERS = 3.0"],
        ["THEORY = SGP4", "THEORY = SGP4-XP"],
        ["BSTAR = -0.0000125", "BTERM = 0.01"],
        ["MEAN_MOTION_DDOT = 0", "AGOM = 0.01"],
      ].reduce((kvn, [what, by]) => changed(kvn, what!, by!), kiteKvn),
    },
    text,
    "unusable-message",
    /SGP4-XP/,
  ],
  ["ephemeris type 4", ommWith({ EPHEMERIS_TYPE: 4 }), "/trajectory/omm", "unusable-message", /type 4/],
  ["EME2000", ommWith({ REF_FRAME: "EME2000" }), "/trajectory/omm", "unusable-message", /EME2000.*TEME/s],
  ["another body", ommWith({ CENTER_NAME: "MARS" }), "/trajectory/omm", "unusable-message", /MARS/],
  ["BSTAR missing", { kind: "omm", omm: without("BSTAR") }, "/trajectory/omm", "invalid-message", /BSTAR/],
  ["the epoch missing", { kind: "omm", omm: without("EPOCH") }, "/trajectory/omm", "invalid-message", /EPOCH/],
  [
    "an eccentricity of 1.2",
    ommWith({ ECCENTRICITY: 1.2 }),
    "/trajectory/omm/ECCENTRICITY",
    "invalid-message",
    /ECCENTRICITY/,
  ],
  [
    "a word for a number",
    ommWith({ INCLINATION: "steep" }),
    "/trajectory/omm/INCLINATION",
    "invalid-message",
    /INCLINATION.*steep/s,
  ],
  [
    "an inclination of 200 degrees",
    ommWith({ INCLINATION: 200 }),
    "/trajectory/omm/INCLINATION",
    "invalid-message",
    /INCLINATION/,
  ],
  ["null for a number", ommWith({ MEAN_MOTION: null }), "/trajectory/omm", "invalid-message", /MEAN_MOTION/],
  ["no mean motion", ommWith({ MEAN_MOTION: 0 }), "/trajectory/omm/MEAN_MOTION", "invalid-message", /MEAN_MOTION/],
  ["an orbit inside the Earth", ommWith({ MEAN_MOTION: 40 }), "/trajectory/omm", "impossible-state", /orbit/],
  ["another unit", kvnWith("MEAN_MOTION = 14.25", "MEAN_MOTION = 14.25 [deg/s]"), text, "invalid-message", /rev\/day/],
  ["JSON cut off", { kind: "omm", text: JSON.stringify(kite).slice(0, 90) }, text, "invalid-message", /JSON/],
  ["two messages in a list", { kind: "omm", text: JSON.stringify([kite, kite]) }, text, "invalid-message", /one|2/],
  [
    "XML with entities of its own",
    { kind: "omm", text: `<!DOCTYPE omm [<!ENTITY a "b">]>${kiteXml}` },
    text,
    "invalid-message",
    /DOCTYPE|document type|entit/i,
  ],
];

const badLines: readonly Bad[] = [
  [
    "a wrong checksum",
    {
      kind: "tle",
      line1: `${inventedLine1.slice(0, 68)}${(Number(inventedLine1[68]) + 1) % 10}`,
      line2: inventedLine2,
    },
    "/trajectory/line1",
    "invalid-message",
    /column 69.*checksum/s,
  ],
  [
    "a digit changed",
    { kind: "tle", line1: inventedLine1, line2: changed(inventedLine2, "77.7000", "77.8000") },
    "/trajectory/line2",
    "invalid-message",
    /checksum/,
  ],
  [
    "the lines swapped",
    { kind: "tle", line1: inventedLine2, line2: inventedLine1 },
    "/trajectory/line1",
    "invalid-message",
    /swapped/,
  ],
  [
    "the checksum missing",
    { kind: "tle", line1: inventedLine1, line2: inventedLine2.slice(0, 68) },
    "/trajectory/line2",
    "invalid-message",
    /would be \d/,
  ],
  ["two objects", line2With("77777", "77778"), "/trajectory/line2", "invalid-message", /77777/],
  [
    "a tab",
    { kind: "tle", line1: inventedLine1.replace("1 ", "1\t"), line2: inventedLine2 },
    "/trajectory/line1",
    "invalid-message",
    /tab/,
  ],
  ["day 400", line1With("33062.5", "33400.5"), "/trajectory/line1", "invalid-message", /day of year/],
  ["ephemeris type 4", line1With(" 0   42", " 4   42"), "/trajectory/line1", "unusable-message", /type 4/],
  [
    "a letter in the eccentricity",
    line2With("0025000", "00250O0"),
    "/trajectory/line2",
    "invalid-message",
    /seven digits/,
  ],
  ["a mean motion of zero", line2With("14.25000000", " 0.00000000"), "/trajectory/line2", "invalid-message", /above 0/],
  ["line 2 missing", { kind: "tle", line1: inventedLine1 }, "/trajectory/line2", "invalid-request", /missing/],
  [
    "both lines in one",
    { kind: "tle", line1: `${inventedLine1}\n${inventedLine2}`, line2: "" },
    "/trajectory/line1",
    "invalid-message",
    /69 characters/,
  ],
];

/** A pointer must name something that the request has, or a field that it lacks in something that it has. */
function expectResolvable(pointer: string, body: Body): void {
  const keys = pointer.split("/").slice(1, -1);
  let here = body;
  for (const key of keys) {
    expect(here, `${pointer} leads through the request`).toHaveProperty([key]);
    here = here[key];
  }
  expect(typeof here, `${pointer} leads through the request`).toBe("object");
}

async function expectRefused([, trajectory, pointer, code, hint]: Bad): Promise<void> {
  for (const [path, body] of [
    [
      budgets,
      { trajectory, horizonS: 3600, from: trajectory.kind === "oem" || trajectory.kind === "opm" ? epoch : kiteEpoch },
    ],
    [
      corrections,
      correctionOf(trajectory, [60], trajectory.kind === "oem" || trajectory.kind === "opm" ? epoch : kiteEpoch),
    ],
  ] as const) {
    const problem: ProblemBody = holdProblem("POST", path, await post(service.address, path, body), code);
    const fault = problem.faults?.[0];
    expect(`${problem.detail} ${fault?.expected}`).toMatch(hint);
    expectResolvable(fault!.pointer, body);
    expect(fault!.pointer).toBe(pointer);
  }
}

describe("an ephemeris message is refused with", () => {
  it.each(badEphemerides)("%s", (...bad) => expectRefused(bad));
});
describe("a state message is refused with", () => {
  it.each(badStates)("%s", (...bad) => expectRefused(bad));
});
describe("mean elements are refused with", () => {
  it.each(badElements)("%s", (...bad) => expectRefused(bad));
});
describe("two lines are refused with", () => {
  it.each(badLines)("%s", (...bad) => expectRefused(bad));
});

const samples = openData("ccsds-ndm-samples");

/** Files below a folder, with paths from there. */
function filesBelow(folder: string, path = ""): string[] {
  return readdirSync(`${folder}/${path}`).flatMap((name) => {
    const inside = path === "" ? name : `${path}/${name}`;
    return statSync(`${folder}/${inside}`).isDirectory() ? filesBelow(folder, inside) : [inside];
  });
}

/** Read and not computed, or not read through this call: the words of the refusal. All ephemerides of the standard's figures are about Mars. */
const notComputed: readonly (readonly [files: RegExp, code: Code, words: readonly string[]])[] = [
  [/ocm_g/, "invalid-message", ["another kind of message"]],
  [/invalid-root\.xml$/, "invalid-message", ["<opm>", "<omm>"]],
  [/ndm_g21/, "invalid-message", ["one OMM in the combined message; there are 3"]],
  [/v2_0\/valid\/sample11\.oem/, "invalid-message", ["ABCD", "UTC, TAI"]],
  [/oem_g1[1-4]|\.skip$|v[123]_0\/valid\/sample\d\d\.oem$/, "unusable-message", ["MARS BARYCENTER"]],
  [
    /valid\/(covariance|semi-major-axis|covariance-default-frame|namespaced-user-defined|optional-header.*)\.(omm|xml)$/,
    "unusable-message",
    ["EME2000", "TEME"],
  ],
  [/valid\/sgp\.omm$/, "unusable-message", ['"SGP"', "SGP4"]],
  [/v3_0\/valid\/sgp4-xp\.omm$/, "unusable-message", ["SGP4-XP"]],
  [/opm_g2/, "unusable-message", ["2 manoeuvres"]],
];

function refusalOf(file: string): readonly [Code, readonly string[]] | null {
  const special = notComputed.find(([files]) => files.test(file));
  if (special !== undefined) return [special[1], special[2]];
  const broken = refused.find(([name]) => name === file && !name.includes("ndm_g22"));
  return broken === undefined ? null : ["invalid-message", broken.slice(2)];
}

// Source: figures G-1 to G-22 of CCSDS 502.0-B-3 and samples of others; PROVENANCE.md of data/ccsds-ndm-samples.
describe.skipIf(samples.absent !== null)(`every sample message, over the call ${samples.absent ?? ""}`, () => {
  const files = (samples.absent === null ? filesBelow(samples.path) : []).filter(
    (file) => !noMessage.test(file) && !file.endsWith(".md") && !file.endsWith("25544.txt"),
  );
  const content = (file: string): string => readFileSync(`${samples.path}/${file}`, "utf8");
  const kindOf = (file: string): string => (/opm_/.test(file) ? "opm" : /omm/.test(file) ? "omm" : "oem");

  it.each(files)("%s", async (file) => {
    const trajectory = { kind: kindOf(file), text: content(file) };
    const expected = refusalOf(file);
    if (expected === null) {
      const { total, terms } = await budget(trajectory, 60);
      expect(terms.length).toBe(7);
      // Any clock from the ground to beyond the navigation satellites: -40 to +50 us/day, and wider at a low perigee.
      expect(Math.abs(total.perDayUs)).toBeLessThan(100);
      return;
    }
    const [code, words] = expected;
    const body = { trajectory, horizonS: 60 };
    const problem = holdProblem("POST", budgets, await post(service.address, budgets, body), code);
    expect(problem.faults![0]!.pointer).toBe(text);
    for (const word of words) expect(`${problem.detail} ${problem.faults![0]!.expected}`).toContain(word);
  });

  it("the two forms of each real message give the same numbers", async () => {
    const folder = "bradsease/omm/samples/real";
    const names = readdirSync(`${samples.path}/${folder}/kvn`);
    expect(names.length).toBeGreaterThan(20);
    for (const name of names) {
      const lines = await budget({ kind: "omm", text: content(`${folder}/kvn/${name}`) }, 3600);
      const xml = await budget({ kind: "omm", text: content(`${folder}/xml/${name.replace(".omm", ".xml")}`) }, 3600);
      expect(xml.terms).toEqual(lines.terms);
    }
  });

  it("two lines and the message of the same object give the same numbers to the lines' digits", async () => {
    const folder = "odm-standard-figures";
    const [line1, line2] = content(`${folder}/tle_celestrak_iss_25544.txt`)
      .split(/\r?\n/)
      .filter((l) => /^[12] /.test(l));
    const lines = await budget({ kind: "tle", line1, line2 }, 86_400);
    const message = await budget({ kind: "omm", text: content(`${folder}/omm_celestrak_iss_25544.kvn`) }, 86_400);
    expect(lines.from).toBe(message.from);
    // The eccentricity is cut at 5e-8, which moves the wave of 2e sqrt(GM a)/c^2 by 0.06 ns at most.
    expect(Math.abs(lines.total.perDayUs - message.total.perDayUs) * 1000).toBeLessThan(0.1);
  });
});
