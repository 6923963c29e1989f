import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";
import { type Body, lowOrbit, moment, mountain } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");
const seed = 2903;
const decimal = Decimal.clone({ precision: 60 });

/** Multiples of a quarter second, so that some events share an instant; never where it matters which came first. */
const instants = fc.integer({ min: -8000, max: 8000 }).map((quarter) => quarter / 4);
const stepNs = fc.integer({ min: -30_000_000_000, max: 30_000_000_000 });

const single = fc.oneof(
  fc.record({ kind: fc.constantFrom("step", "leap-second"), t: instants, stepNs }),
  fc.record({
    kind: fc.constant("rate"),
    t: instants,
    fractionalChange: fc.double({ min: -1e-5, max: 1e-5, noNaN: true }),
  }),
);

/** Slews and locked stretches one after another; the rest anywhere. */
const lists = fc
  .record({
    singles: fc.uniqueArray(single, { maxLength: 6, selector: ({ t }) => t }),
    slews: fc.uniqueArray(fc.integer({ min: -20, max: 19 }), { maxLength: 3 }),
    locks: fc.uniqueArray(fc.integer({ min: -20, max: 19 }), { maxLength: 2 }),
    slewNs: fc.integer({ min: -20_000_000, max: 20_000_000 }),
    sets: fc.uniqueArray(fc.integer({ min: 1, max: 1900 }), { maxLength: 2 }),
  })
  .map(({ singles, slews, locks, slewNs, sets }) => [
    ...singles.map(({ t, ...event }) => ({ ...event, at: moment(t) })),
    ...slews.map((k) => ({ kind: "slew", at: moment(k * 100), stepNs: slewNs, durationS: 77 })),
    ...locks.flatMap((k) => [
      { kind: "locked", at: moment(k * 100 + 3) },
      { kind: "free", at: moment(k * 100 + 64) },
    ]),
    ...sets.map((t) => ({ kind: "set", at: moment(t + 0.125), to: t })),
  ]);

const oscillator = fc.record(
  {
    frequencyOffset: fc.double({ min: -1e-5, max: 1e-5, noNaN: true }),
    agingPerDay: fc.double({ min: -1e-7, max: 1e-7, noNaN: true }),
  },
  { requiredKeys: [] },
);
const times = fc.array(fc.double({ min: -2500, max: 2500, noNaN: true }), { minLength: 1, maxLength: 4 });

const kinds = fc.constantFrom("counter", "width", "stamp");

function clockOf(kind: string, events: Body[], free: Body): Body {
  const at = moment(0);
  const setTo = (t: number): Body =>
    kind === "stamp" ? moment(t + 1) : String(100_000_000_000 + t * 1_000_000 + 1_000_000);
  // A set before the anchor would end the model there; these come after it.
  const written = events.map(({ to, ...event }) => (to === undefined ? event : { ...event, toReading: setTo(to) }));
  const face =
    kind === "stamp"
      ? { timeStamp: { scale: "UTC" }, anchor: { reading: moment(0.5), at } }
      : {
          counter: { ticksPerSecond: 1_000_000, ...(kind === "width" && { widthBits: 40 }) },
          anchor: { reading: "100000000000", at },
        };
  return { ...face, oscillator: free, events: written };
}

const addsUp = (results: Body[]): void => {
  for (const { terms, clockMinusTt } of results) {
    const total = terms.reduce((sum: Decimal, { accumulated }: Body) => sum.plus(accumulated), new decimal(0));
    expect(total.equals(clockMinusTt)).toBe(true);
  }
};

/** Of a UTC text that ends in Z, since 1970. */
const picoseconds = (text: string): bigint =>
  BigInt(Date.parse(`${text.slice(0, 19)}Z`)) * 1_000_000_000n + BigInt(text.slice(20, -1).padEnd(12, "0"));
const apart = (a: string, b: string): number => Math.abs(Number(picoseconds(a) - picoseconds(b)));

describe("a clock with any events", () => {
  it("comes back: instant, reading, instant; terms add up; the list's order does not matter", () => {
    fc.assert(
      fc.property(lists, oscillator, times, kinds, fc.boolean(), (events, free, seconds, kind, aloft) => {
        const clock = clockOf(kind, events, free);
        const trajectory = aloft ? lowOrbit() : mountain();
        const asked = seconds.map(moment);
        const predicted = predictedReadings({ clock, trajectory, instants: asked }, bench);
        addsUp(predicted.results);
        const turned = predictedReadings(
          { clock: { ...clock, events: [...clock.events].reverse() }, trajectory, instants: asked },
          bench,
        );
        expect(JSON.stringify(turned.results)).toBe(JSON.stringify(predicted.results));
        const readings = predicted.results.map(({ reading }, i) => ({ reading, near: asked[i]! }));
        const answer = corrections({ clock, trajectory, readings }, bench);
        addsUp(answer.results);
        // A stamp comes back to the picosecond, an edge reading to within the tick that it began.
        const most = kind === "stamp" ? 1 : 1_100_000;
        for (const [i, { corrected }] of answer.results.entries()) {
          expect(apart(corrected, predicted.results[i]!.at)).toBeLessThanOrEqual(most);
        }
      }),
      { seed, numRuns: 300 },
    );
  });

  it("reading, instant, reading: the same reading, away from events", () => {
    fc.assert(
      fc.property(lists, oscillator, times, kinds, (events, free, seconds, kind) => {
        const clock = clockOf(kind, events, free);
        const shown = predictedReadings({ clock, trajectory: mountain(), instants: seconds.map(moment) }, bench);
        const readings = shown.results.map(({ reading }, i) => ({ reading, near: moment(seconds[i]!) }));
        const answer = corrections({ clock, trajectory: mountain(), readings }, bench);
        const whole = answer.results.filter(({ corrected }) => !events.some(({ at }) => apart(at, corrected) < 1e7));
        fc.pre(whole.length > 0);
        const again = predictedReadings(
          { clock, trajectory: mountain(), instants: whole.map(({ corrected }) => corrected) },
          bench,
        );
        for (const [i, { reading }] of again.results.entries()) {
          const wanted = whole[i]!.reading;
          if (kind === "stamp") expect(apart(String(reading), String(wanted))).toBeLessThanOrEqual(1);
          else expect(reading).toBe(wanted);
        }
      }),
      { seed, numRuns: 200 },
    );
  });
});
