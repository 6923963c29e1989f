import { Decimal } from "decimal.js";
import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";
import { type Body, lowOrbit, millisecondClock, moment, mountain } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");

/** A clock at rest on the geoid keeps TT: there the physical terms are the constant one and its negative, below 1e-18. */
const still = { trajectory: { ...mountain(), heightM: 0 }, terms: ["reference-surface"] };
/** L_G, the only rate that is left when nothing but the reference surface is summed (IAU 2000 B1.9). */
const lg = 6.969290134e-10;

const microsecond = { counter: { ticksPerSecond: 1_000_000 }, anchor: { reading: 0, at: moment(0) } };

const correct = (clock: Body, readings: (number | string)[], more: Body = {}): Body[] =>
  corrections({ ...still, clock, readings: readings.map((reading) => ({ reading })), ...more }, bench).results;
const predict = (clock: Body, seconds: number[], more: Body = {}): Body[] =>
  predictedReadings({ ...still, clock, instants: seconds.map(moment), ...more }, bench).results;
const term = (result: Body, name = "event"): Body => result.terms.find((item: Body) => item.term === name);
const addsUp = (results: Body[]): void => {
  for (const { terms, clockMinusTt } of results) {
    const total = terms.reduce((sum: Decimal, { accumulated }: Body) => sum.plus(accumulated), new Decimal(0));
    expect(total.toFixed(15)).toBe(new Decimal(clockMinusTt).toFixed(15));
  }
};
const caught = (work: () => unknown): Body => {
  try {
    work();
  } catch (error) {
    return error;
  }
  throw new Error("nothing was refused");
};

describe("one event, by hand", () => {
  it("a step of 250 000 ns at 100 s: before it nothing, after it 0.00025 s", () => {
    const results = predict(
      { ...microsecond, events: [{ kind: "step", at: moment(100), stepNs: 250_000 }] },
      [99.999, 100, 200],
    );
    expect(results.map((r) => term(r).accumulated)).toEqual([
      "0.000000000000000",
      "0.000250000000000",
      "0.000250000000000",
    ]);
    // 99 999 000 us, 100 000 250 us, 200 000 250 us; L_G adds 0.07 and 0.14 us.
    expect(results.map((r) => r.reading)).toEqual([99_999_000, 100_000_250, 200_000_250]);
    expect(results.map((r) => r.flags)).toEqual([[], ["clock-event"], []]);
    addsUp(results);
  });

  it("a rate of 1e-9 from 1000 s on: 1e-9 x 2000 s (1 + L_G) = 2 us and 1.4 fs at 3000 s", () => {
    const [before, after] = predict(
      { ...microsecond, events: [{ kind: "rate", at: moment(1000), fractionalChange: 1e-9 }] },
      [1000, 3000],
    );
    expect(term(before).accumulated).toBe("0.000000000000000");
    expect(term(after).accumulated).toBe("0.000002000000001"); // 2000 x 1e-9 = 2e-6; x L_G = 1.39e-15
    expect(term(after).rate).toBeCloseTo(1e-9 * (1 + lg), 24);
  });

  it("a slew of -400 us over 200 s from 100 s: a quarter after 50 s, all after 200 s", () => {
    const clock = { ...microsecond, events: [{ kind: "slew", at: moment(100), stepNs: -400_000, durationS: 200 }] };
    const results = predict(clock, [100, 150, 299.5, 300, 1000]);
    expect(results.map((r) => term(r).accumulated)).toEqual([
      "0.000000000000000", // nothing yet
      "-0.000100000000000", // 50/200 x 400 us
      "-0.000399000000000", // 199.5/200 x 400 us
      "-0.000400000000000",
      "-0.000400000000000",
    ]);
    expect(results.map((r) => r.flags)).toEqual([["slewing"], ["slewing"], ["slewing"], [], []]);
    expect(term(results[1]!).rate).toBe(-2e-6);
    addsUp(results);
  });

  it("a set to 500 000 000 ticks at 100 s: 500 s less the 100.000 000 069 692 901 s that it showed", () => {
    const clock = { ...microsecond, events: [{ kind: "set", at: moment(100), toReading: 500_000_000 }] };
    const results = predict(clock, [100, 101]);
    expect(results.map((r) => r.reading)).toEqual([500_000_000, 501_000_000]);
    expect(term(results[0]!).accumulated).toBe("399.999999930307099"); // 500 - 100 - 100 L_G
    const [back] = correct(clock, [501_000_000]);
    expect(back!.corrected.slice(11, 24)).toBe("00:01:40.9999"); // one second later by the clock, L_G fast
  });

  it("uncertainty: 30 ns and 40 ns of two past steps make 50 ns; one to come makes none", () => {
    const events = [
      { kind: "step", at: moment(10), stepNs: 5, sigmaNs: 30 },
      { kind: "rate", at: moment(20), fractionalChange: 0, sigmaNs: 40 },
      { kind: "step", at: moment(900), stepNs: 5, sigmaNs: 1000 },
    ];
    const [early, late] = predict({ ...microsecond, events }, [5, 100]);
    const of = (r: Body) => r.uncertainty.find(({ source }: Body) => source === "event");
    expect(of(early)).toBeUndefined();
    expect(of(late)).toEqual({ source: "event", type: "B", ns: 50, shared: "log" });
  });
});

describe("events before the anchor", () => {
  const clock = {
    ...millisecondClock(),
    anchor: { reading: 1_000_000, at: moment(0) },
    oscillator: { frequencyOffset: 1e-6 },
    events: [
      { kind: "step", at: moment(-100), stepNs: 2e9 },
      { kind: "rate", at: moment(-200), fractionalChange: 3e-6 },
    ],
  };

  it("are undone: 2 s less before the step; before the trim it ran 3e-6 slower, so 100 s earlier it showed 300 us more", () => {
    const [now, close, far] = predict(clock, [0, -50, -300]);
    expect(now!.reading).toBe(1_000_000);
    expect(term(now!).accumulated).toBe("0.000000000000000");
    expect(term(close!).accumulated).toBe("0.000000000000000");
    expect(term(far!).accumulated).toBe("-1.999699999999791"); // -2 + 100 (1 + L_G) x 3e-6
    expect(far!.reading).toBe(697_999); // 1000 - 300 - 2 s, 0.3 - 0.3 ms, and 300 L_G = 0.2 us less: 697.999 999 8 s
  });
});

describe("steps back and forth", () => {
  const back = { ...millisecondClock(), events: [{ kind: "step", at: moment(100), stepNs: -10e9 }] };
  const forth = { ...millisecondClock(), events: [{ kind: "step", at: moment(100), stepNs: 10e9 }] };

  it("are predicted across", () => {
    expect(predict(back, [99, 100, 105, 110]).map((r) => r.reading)).toEqual([99_000, 90_000, 95_000, 100_000]);
    expect(predict(forth, [99, 100, 105]).map((r) => r.reading)).toEqual([99_000, 110_000, 115_000]);
  });

  it("back: 95 000 was shown at 95 s and at 105 s; near or unwrap chooses, else it is refused", () => {
    const problem = caught(() => correct(back, [95_000]));
    expect(problem.code).toBe("ambiguous-reading");
    expect(problem.message).toMatch(/00:01:35.*00:01:45/);
    expect(problem.faults[0].place).toEqual(["readings", 0, "reading"]);
    const at = (more: Body) =>
      corrections(
        { ...still, clock: back, readings: [{ reading: 95_000, ...more.reading }], ...more.body },
        bench,
      ).results[0]!.corrected.slice(0, 22);
    expect(at({ reading: { near: moment(94) } })).toBe("2026-03-01T00:01:34.99");
    expect(at({ reading: { near: moment(106) } })).toBe("2026-03-01T00:01:44.99");
    expect(at({ body: { unwrap: "after" } })).toBe("2026-03-01T00:01:34.99");
    expect(at({ body: { unwrap: "nearest" } })).toBe("2026-03-01T00:01:34.99");
  });

  it("forth: 105 000 was never shown, and the event is named", () => {
    const problem = caught(() => correct(forth, [105_000]));
    expect(problem.code).toBe("reading-not-shown");
    expect(problem.message).toContain("events[0] (step)");
    expect(correct(forth, [99_000, 111_000]).map((r) => r.corrected.slice(11, 19))).toEqual(["00:01:38", "00:01:40"]);
  });

  it("a tick cut short by a step was shown, and is taken", () => {
    const coarse = { counter: { ticksPerSecond: 1, stands: "truncated" }, anchor: { reading: 0, at: moment(0) } };
    const [cut] = correct({ ...coarse, events: [{ kind: "step", at: moment(10.25), stepNs: 5e9 }] }, [10]);
    expect(cut!.corrected.slice(11, 21)).toBe("00:00:10.4"); // 10.5 s less L_G, within its tick
  });
});

describe("a clock that ends", () => {
  it.each(["reset", "oscillator"])("at a %s a new anchor is needed beyond it, on either side", (kind) => {
    const after = { ...millisecondClock(), events: [{ kind, at: moment(100) }] };
    expect(correct(after, [50_000])).toHaveLength(1);
    const late = caught(() => correct(after, [150_000]));
    expect([late.code, late.faults[0].place.join("/")]).toEqual(["anchor-needed", "readings/0/reading"]);
    expect(late.message).toContain(`events[0] (${kind}) at 2026-03-01T00:01:40`);
    expect(caught(() => predict(after, [100])).code).toBe("anchor-needed");
    const before = { ...millisecondClock(), events: [{ kind, at: moment(-100) }] };
    expect(correct(before, [50_000, -50_000])).toHaveLength(2);
    expect(caught(() => correct(before, [-150_000])).code).toBe("anchor-needed");
  });
});

describe("locked and free", () => {
  const clock = {
    ...microsecond,
    oscillator: { frequencyOffset: 1e-6, agingPerDay: 8.64e-6 }, // 1e-10 a second
    events: [
      { kind: "locked", at: moment(1000) },
      { kind: "free", at: moment(3000) },
    ],
  };

  it("nothing accumulates while locked; free starts the polynomial anew", () => {
    const [at1000, at2000, at4000] = predict(clock, [1000, 2000, 4000]);
    // Frequency: 1e-6 x 1000 s, then as much again. Ageing: 1e-10/2 x 1000^2 = 50 us, then 50 us again (not 4 times).
    expect(term(at1000!, "frequency").accumulatedNs).toBeCloseTo(1e6, 2);
    expect(term(at2000!, "frequency").accumulatedNs).toBeCloseTo(1e6, 2);
    expect(term(at4000!, "frequency").accumulatedNs).toBeCloseTo(2e6, 2);
    expect(term(at2000!, "aging").accumulatedNs).toBeCloseTo(50_000, 3);
    expect(term(at4000!, "aging").accumulatedNs).toBeCloseTo(100_000, 3);
    expect(term(at2000!, "reference-surface").accumulatedNs).toBeCloseTo(1000 * lg * 1e9, 6);
    expect(term(at4000!, "reference-surface").accumulatedNs).toBeCloseTo(2000 * lg * 1e9, 6);
    expect(at2000!.terms.map(({ rate }: Body) => rate)).toEqual([0, 0, 0, 0]);
    expect([at1000, at2000, at4000].map((r) => r!.flags)).toEqual([["locked"], ["locked"], ["holdover"]]);
    addsUp([at1000!, at2000!, at4000!]);
  });

  it("comes back to the reading, in orbit too", () => {
    const orbit = { trajectory: lowOrbit(), terms: undefined };
    const seconds = [-500, 500, 1500, 3500, 9000];
    const shown = predict(clock, seconds, orbit);
    const again = corrections(
      { clock, trajectory: lowOrbit(), readings: shown.map(({ reading }) => ({ reading })) },
      bench,
    ).results;
    for (const [i, result] of again.entries()) {
      expect(Math.abs(Date.parse(result.corrected) - Date.parse(moment(seconds[i]!)))).toBeLessThanOrEqual(1);
    }
    addsUp(again);
  });
});

describe("what lies over the anchor", () => {
  it("a slew of 1000 ns in 100 s begun 50 s before it: nothing at the anchor, half of it on either side", () => {
    const clock = { ...microsecond, events: [{ kind: "slew", at: moment(-50), stepNs: 1000, durationS: 100 }] };
    const results = predict(clock, [-60, -50, -25, 0, 10, 50, 90]);
    expect(results.map((r) => term(r).accumulatedNs)).toEqual([-500, -500, -250, 0, 100, 500, 500]);
    expect(results.map((r) => r.flags.includes("slewing"))).toEqual([false, true, true, true, true, false, false]);
  });

  it("a lock from 100 s before to 100 s after it: 1e-6 counts for what is outside", () => {
    const events = [
      { kind: "free", at: moment(100) },
      { kind: "locked", at: moment(-100) },
    ];
    const results = predict({ ...microsecond, oscillator: { frequencyOffset: 1e-6 }, events }, [-300, -50, 50, 400]);
    const parts = results.map((r) => term(r, "frequency").accumulatedNs);
    for (const [i, wanted] of [-200_000, 0, 0, 300_000].entries()) expect(parts[i]).toBeCloseTo(wanted, 2);
    expect(results.map((r) => r.flags)).toEqual([
      ["before-anchor"],
      ["before-anchor", "locked"],
      ["locked"],
      ["holdover"],
    ]);
    addsUp(results);
  });

  it("a lock holds back the growth of the uncertainty", () => {
    const events = [
      { kind: "locked", at: moment(100) },
      { kind: "free", at: moment(1000) },
    ];
    const results = predict({ ...microsecond, oscillator: { frequencySigma: 1e-9 }, events }, [100, 900, 1300]);
    const sigmas = results.map((r) => r.uncertainty.find(({ source }: Body) => source === "frequency").ns);
    expect(sigmas).toEqual([100, 100, 400]); // 1e-9 x 100 s, then 300 s more
  });
});

describe("an event known by its reading", () => {
  it("is at the instant at which the clock showed it, after the events before it", () => {
    const clock = {
      ...millisecondClock(),
      events: [
        { kind: "step", atReading: 30_000, stepNs: 7e9 }, // at 23 s, for the other has come first
        { kind: "step", at: moment(10), stepNs: 7e9 },
      ],
    };
    // 22 s: 29 s shown; 24 s: 24 + 14 = 38 s shown.
    expect(predict(clock, [22, 24]).map((r) => r.reading)).toEqual([29_000, 38_000]);
  });
});

describe("a stamp that holds its leap second and is stepped by hand", () => {
  it("2016-12-31: an hour after the leap second it is put back by one second (IERS Bulletin C 52)", () => {
    const clock = {
      timeStamp: { scale: "UTC", leapSeconds: { heldAt: 36 } },
      anchor: { reading: "2016-12-31T23:00:00Z", at: "2016-12-31T23:00:00Z" },
      events: [{ kind: "leap-second", at: "2017-01-01T01:00:00Z", stepNs: -1e9 }],
    };
    const ask = (reading: string, near?: string) =>
      corrections(
        { ...still, clock, readings: [{ reading, ...(near && { near }) }] },
        bench,
      ).results[0]!.corrected.slice(0, 21);
    // Held at 36 it shows a second too much after the leap second: 00:30:01 at 00:30:00. Stepped, it is right.
    expect(ask("2017-01-01T00:30:01.5Z")).toBe("2017-01-01T00:30:00.4"); // less L_G
    expect(ask("2017-01-01T02:00:00.5Z")).toBe("2017-01-01T02:00:00.4");
    // 01:00:00.5 was shown half a second before the step and half a second after it.
    expect(ask("2017-01-01T01:00:00.5Z", "2017-01-01T00:59:59Z")).toBe("2017-01-01T00:59:59.4");
    expect(ask("2017-01-01T01:00:00.5Z", "2017-01-01T01:00:02Z")).toBe("2017-01-01T01:00:00.4");
  });
});

describe("the list", () => {
  it("empty and absent give the same bytes except the request's digest", () => {
    const ask = (events?: Body[]) =>
      corrections(
        {
          clock: { ...millisecondClock(), ...(events && { events }) },
          trajectory: mountain(),
          readings: [{ reading: 5 }],
        },
        bench,
      );
    const [empty, none] = [ask([]), ask()];
    expect(empty.evidence.inputsSha256).not.toBe(none.evidence.inputsSha256);
    const without = (answer: Body) => JSON.stringify({ ...answer, evidence: { ...answer.evidence, inputsSha256: "" } });
    expect(without(empty)).toBe(without(none));
  });
});
