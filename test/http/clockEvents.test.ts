import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { ProblemCode } from "../../src/problem/index.ts";
import { documentAllows, holdGoodAnswer, holdProblem } from "../support/contract.ts";
import { type Body, correction, highOrbit, millisecondClock, moment, prediction } from "../support/requests.ts";
import { post, type Service, startService } from "../support/service.ts";

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

const path = "/v1/corrections";
const withEvents = (events: Body, more: Body = {}, clock: Body = {}): Body =>
  correction({ clock: { ...millisecondClock(), ...clock, events }, ...more });
const step = { kind: "step", at: moment(10), stepNs: 5 };
const wide = { counter: { ticksPerSecond: 1000, widthBits: 24 } };
const stamp = { timeStamp: { scale: "UTC" }, anchor: { reading: moment(0), at: moment(0) } };

interface Case {
  readonly name: string;
  readonly body: Body;
  readonly code: ProblemCode;
  readonly pointer: string;
  readonly hint: RegExp;
  /** The document tells it too. */
  readonly misshapen?: boolean;
}

const shape = (name: string, events: Body, pointer: string, hint: RegExp): Case => ({
  name,
  body: withEvents(events),
  code: "invalid-request",
  pointer: `/clock/events${pointer}`,
  hint,
  misshapen: true,
});
const other = (
  name: string,
  code: ProblemCode,
  events: Body,
  pointer: string,
  hint: RegExp,
  more?: Body,
  clock?: Body,
): Case => ({ name, body: withEvents(events, more, clock), code, pointer, hint });

const at = moment(10);
const first = "/clock/events/0";
const second = "/clock/events/1";

const cases: readonly Case[] = [
  shape("no list", {}, "", /array/),
  shape("an unknown kind", [{ kind: "jump", at, stepNs: 5 }], "/0/kind", /step/),
  shape("no kind", [{ at, stepNs: 5 }], "/0/kind", /leap-second/),
  shape("a step without stepNs", [{ kind: "step", at }], "/0/stepNs", /missing/),
  shape("a leap second without stepNs: none is guessed", [{ kind: "leap-second", at }], "/0/stepNs", /missing/),
  shape("a rate without fractionalChange", [{ kind: "rate", at }], "/0/fractionalChange", /missing/),
  shape("a slew without durationS", [{ kind: "slew", at, stepNs: 5 }], "/0/durationS", /missing/),
  shape("a set without toReading", [{ kind: "set", at }], "/0/toReading", /missing/),
  shape("a slew of zero duration", [{ kind: "slew", at, stepNs: 5, durationS: 0 }], "/0/durationS", /at least/),
  shape("a slew of negative duration", [{ kind: "slew", at, stepNs: 5, durationS: -3 }], "/0/durationS", /at least/),
  shape("stepNs of a rate", [{ kind: "rate", at, fractionalChange: 1e-9, stepNs: 5 }], "/0/stepNs", /no such field/),
  shape("durationS of a step", [{ ...step, durationS: 5 }], "/0/durationS", /no such field/),
  shape("toReading of a reset", [{ kind: "reset", at, toReading: 5 }], "/0/toReading", /no such field/),
  shape(
    "a rate of one percent",
    [{ kind: "rate", at, fractionalChange: 0.01 }],
    "/0/fractionalChange",
    /less than 0.01/,
  ),
  shape("a negative sigma", [{ ...step, sigmaNs: -1 }], "/0/sigmaNs", /at least 0/),
  shape("an unknown origin", [{ ...step, origin: "guessed" }], "/0/origin", /commanded/),
  shape(
    "1001 events",
    Array.from({ length: 1001 }, () => step),
    "",
    /at most 1000/,
  ),
  other("both at and atReading", "invalid-request", [{ ...step, atReading: 5 }], `${first}/atReading`, /both/),
  other("neither at nor atReading", "invalid-request", [{ kind: "reset" }], first, /neither/),
  other("local time", "invalid-instant", [{ ...step, at: "2026-03-01T00:00:10" }], `${first}/at`, /Z/),
  other(
    "an unreadable toReading",
    "invalid-request",
    [{ kind: "set", at, toReading: "0x5" }],
    `${first}/toReading`,
    /digits/,
  ),
  other(
    "an unreadable atReading",
    "invalid-request",
    [{ kind: "reset", atReading: "1.5" }],
    `${first}/atReading`,
    /digits/,
  ),
  other(
    "a number shown by a stamp",
    "invalid-request",
    [{ kind: "set", at, toReading: 5 }],
    `${first}/toReading`,
    /text/,
    {},
    {
      ...stamp,
      counter: undefined,
    },
  ),
  other(
    "a set beyond the width",
    "reading-beyond-width",
    [{ kind: "set", at, toReading: 16_777_216 }],
    `${first}/toReading`,
    /2\^24/,
    {},
    wide,
  ),
  other(
    "two sets at one instant",
    "impossible-clock",
    [
      { kind: "set", at, toReading: 1 },
      { kind: "set", at, toReading: 2 },
    ],
    second,
    /which came first/,
  ),
  other(
    "a set and a step at one instant",
    "impossible-clock",
    [{ kind: "set", at, toReading: 1 }, step],
    second,
    /which came first/,
  ),
  other("free without locked", "impossible-clock", [{ kind: "free", at }], `${first}/kind`, /locked/),
  other(
    "free without locked before the anchor",
    "impossible-clock",
    [{ kind: "free", at: moment(-10) }],
    `${first}/kind`,
    /locked/,
  ),
  other(
    "locked twice",
    "impossible-clock",
    [
      { kind: "locked", at },
      { kind: "locked", at: moment(20) },
    ],
    `${second}/kind`,
    /free/,
  ),
  other(
    "locked and free at one instant",
    "impossible-clock",
    [
      { kind: "locked", at: moment(5) },
      { kind: "free", at },
      { kind: "locked", at },
    ],
    "/clock/events/2",
    /which came first/,
  ),
  other(
    "slews that overlap",
    "impossible-clock",
    [
      { kind: "slew", at, stepNs: 5, durationS: 60 },
      { kind: "slew", at: moment(69), stepNs: 5, durationS: 60 },
    ],
    second,
    /join/,
  ),
  other(
    "slews that overlap before the anchor",
    "impossible-clock",
    [
      { kind: "slew", at: moment(-90), stepNs: 5, durationS: 60 },
      { kind: "slew", at: moment(-70), stepNs: 5, durationS: 60 },
    ],
    first,
    /join/,
  ),
  other(
    "a slew of a second a second",
    "impossible-clock",
    [{ kind: "slew", at, stepNs: 1e9, durationS: 1 }],
    `${first}/durationS`,
    /step/,
  ),
  other(
    "rates that add up to a tenth",
    "impossible-clock",
    Array.from({ length: 12 }, (_, i) => ({ kind: "rate", at: moment(10 + i), fractionalChange: 0.009 })),
    "/clock/events/11/fractionalChange",
    /0\.1/,
  ),
  other("an event outside the span", "outside-span", [{ ...step, at: "2029-01-01T00:00:00Z" }], `${first}/at`, /2027/, {
    trajectory: highOrbit(),
  }),
  other(
    "an event before UTC",
    "instant-out-of-range",
    [{ ...step, at: "1971-01-01T00:00:00Z" }],
    `${first}/at`,
    /1972/,
  ),
  other(
    "a reading from before the anchor",
    "impossible-clock",
    [{ kind: "step", atReading: -5000, stepNs: 5 }],
    `${first}/atReading`,
    /anchor/,
  ),
  other(
    "a reading that rolls over inside the span",
    "ambiguous-rollover",
    [{ kind: "step", atReading: 5000, stepNs: 5 }],
    `${first}/atReading`,
    /at, in place/,
    {},
    wide,
  ),
  other(
    "a reading that was shown twice",
    "ambiguous-reading",
    [{ ...step, stepNs: -8e9 }],
    "/readings/0/reading",
    /near/,
    { readings: [{ reading: 5000 }] },
  ),
  other(
    "a reading that was passed over",
    "reading-not-shown",
    [{ ...step, stepNs: 8e9 }],
    "/readings/0/reading",
    /events\[0\] \(step\)/,
    { readings: [{ reading: 15_000 }] },
  ),
  other("a reading from beyond a reset", "anchor-needed", [{ kind: "reset", at }], "/readings/0/reading", /anchor/),
  other("a rough time beyond a reset", "anchor-needed", [{ kind: "reset", at }], "/readings/0/near", /anchor/, {
    readings: [{ reading: 5, near: moment(60) }],
  }),
  other(
    "a reading from before a set before the anchor",
    "anchor-needed",
    [{ kind: "set", at: moment(-10), toReading: 0 }],
    "/readings/0/reading",
    /anchor/,
    { readings: [{ reading: -50_000 }] },
  ),
];

describe("bad events are refused with a sentence that helps", () => {
  it.each(cases)("$name", async ({ body, code, pointer, hint, misshapen }) => {
    const response = await post(service.address, path, body);
    const problem = holdProblem("POST", path, response, code);
    expect((problem.faults ?? []).map((fault) => fault.pointer)).toContain(pointer);
    const sentences = [problem.detail, ...(problem.faults ?? []).map(({ expected }) => expected)].join("\n");
    expect(sentences).toMatch(hint);
    expect(sentences).not.toMatch(/undefined|\[object|NaN/);
    if (misshapen) expect(documentAllows(path, body)).toBe(false);
  });

  it("no two alike", () => {
    expect(new Set(cases.map(({ name }) => name)).size).toBe(cases.length);
  });
});

describe("good events", () => {
  it("of every kind are answered as documented", async () => {
    const events = [
      { kind: "reset", at: moment(90_000), origin: "found" },
      { ...step, sigmaNs: 3, origin: "commanded" },
      { kind: "rate", at: moment(20), fractionalChange: -1e-9 },
      { kind: "slew", at: moment(30), stepNs: 4000, durationS: 30 },
      { kind: "set", at: moment(100), toReading: 100_001 },
      { kind: "leap-second", at: moment(200), stepNs: -1e9 },
      { kind: "locked", atReading: 249_500 },
      { kind: "free", at: moment(400) },
      { kind: "oscillator", at: moment(80_000) },
    ];
    const body = withEvents(events, { readings: [{ reading: 45_000 }, { reading: 300_000 }, { reading: 3_600_000 }] });
    const answer: Body = holdGoodAnswer(path, body, await post(service.address, path, body));
    expect(answer.results.map(({ flags }: Body) => flags)).toEqual([["slewing"], ["locked"], ["holdover"]]);
    const predicting = prediction({ clock: body.clock });
    holdGoodAnswer(
      "/v1/predicted-readings",
      predicting,
      await post(service.address, "/v1/predicted-readings", predicting),
    );
  });

  it("a thousand of them and a thousand readings are answered in bounded time", async () => {
    const events = Array.from({ length: 1000 }, (_, i) => ({
      kind: "step",
      at: moment(i * 7 + 1),
      stepNs: (i % 5) * 1000 - 2000,
    }));
    const readings = Array.from({ length: 1000 }, (_, i) => ({ reading: i * 7000 + 3500 }));
    const body = withEvents(events, { readings });
    const answer: Body = holdGoodAnswer(path, body, await post(service.address, path, body));
    expect(answer.results).toHaveLength(1000);
  });
});
