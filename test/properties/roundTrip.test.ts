import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { version } from "../../src/config.ts";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { type CorrectionResponse, corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";

const bench = plainBench(defaultLeapSeconds, version);
const seed = 4711;

/** Anchors on and about a leap second (IERS Bulletin C 52) and on a plain day. */
const anchors = ["2016-12-31T23:59:59.5Z", "2016-12-31T23:59:60.25Z", "2017-01-01T00:00:00Z", "2026-03-01T12:00:00Z"];

const rates = fc.constantFrom<number | string>(
  1,
  32_768,
  65_536,
  1_000_000,
  10_230_000,
  "10230000/3",
  "1000000/7",
  0.1,
  4_294_967_296,
  50e6,
);

const oscillators = fc.record(
  {
    offsetNs: fc.double({ min: -1e6, max: 1e6, noNaN: true }),
    presetFractional: fc.double({ min: -1e-8, max: 1e-8, noNaN: true }),
    frequencyOffset: fc.double({ min: -2e-4, max: 2e-4, noNaN: true }),
    agingPerDay: fc.double({ min: -1e-8, max: 1e-8, noNaN: true }),
  },
  { requiredKeys: [] },
);

const clocks = fc.record({
  counter: fc.record(
    {
      ticksPerSecond: rates,
      widthBits: fc.constantFrom(24, 32, 40, 48),
      stands: fc.constantFrom("edge" as const, "rounded" as const),
    },
    { requiredKeys: ["ticksPerSecond"] },
  ),
  anchor: fc.record({ reading: fc.constantFrom(0, 12_345, 16_777_215), at: fc.constantFrom(...anchors) }),
  oscillator: oscillators,
});

const orbit = {
  kind: "state-vector",
  frame: "GCRF",
  positionKm: [6778, 0, 0],
  velocityKmPerS: [0, 4.7634, 6.0099],
} as const;

const ground = {
  kind: "surface",
  body: "Earth",
  latitudeDeg: 40,
  longitudeDeg: -105,
  heightM: 1650,
  heightOf: "geoid",
} as const;

/** Seconds, before or after the anchor. */
const moments = fc.array(fc.double({ min: -40_000, max: 200_000, noNaN: true }), { minLength: 1, maxLength: 4 });

const decimal = Decimal.clone({ precision: 60 });

describe("a reading corrected and predicted again", () => {
  it("is the same reading, over leap seconds and rollovers", () => {
    fc.assert(
      fc.property(clocks, moments, fc.boolean(), (clock, times, aloft) => {
        const trajectory = aloft ? { ...orbit, epoch: clock.anchor.at } : ground;
        const modulus = clock.counter.widthBits === undefined ? null : 2n ** BigInt(clock.counter.widthBits);
        const rate = Number(
          String(clock.counter.ticksPerSecond)
            .split("/")
            .reduce((a, b) => String(Number(a) / Number(b))),
        );
        const readings = times.map((t) => {
          const count = BigInt(clock.anchor.reading) + BigInt(Math.round(t * rate));
          return modulus === null ? String(count) : String(((count % modulus) + modulus) % modulus);
        });
        const near = times.map((t) => secondsAfter(clock.anchor.at, t));
        // A rough time settles rollovers only when it is nearer than half of one.
        const settled = modulus === null || Number(modulus) / rate > 400;
        fc.pre(settled);
        const answer = corrections(
          { clock, trajectory, readings: readings.map((reading, i) => ({ reading, near: near[i]! })) },
          bench,
        );
        const back = predictedReadings({ clock, trajectory, instants: answer.results.map((r) => r.corrected) }, bench);
        for (const [i, result] of back.results.entries()) {
          expect(String(result.reading)).toBe(readings[i]);
          expect(Math.abs(result.fraction) / rate).toBeLessThan(1.0000001e-12);
        }
        addsUp(answer);
      }),
      { seed, numRuns: 150 },
    );
  });

  it("comes back to the picosecond from the instant's side", () => {
    fc.assert(
      fc.property(clocks, moments, (clock, times) => {
        const free = { ...clock, counter: { ticksPerSecond: 1e12, stands: "edge" as const } };
        const instants = times.map((t) => secondsAfter(clock.anchor.at, t));
        const predicted = predictedReadings({ clock: free, trajectory: ground, instants }, bench);
        const answer = corrections(
          { clock: free, trajectory: ground, readings: predicted.results.map(({ reading }) => ({ reading })) },
          bench,
        );
        for (const [i, { corrected }] of answer.results.entries()) {
          expect(Math.abs(picosecondsBetween(predicted.results[i]!.at, corrected))).toBeLessThanOrEqual(1);
        }
      }),
      { seed, numRuns: 150 },
    );
  });
});

describe("a breakdown", () => {
  it("adds up and gives the corrected instant: anchor + counted time - (clock - TT), by exact decimals", () => {
    const answer = corrections(
      {
        clock: {
          counter: { ticksPerSecond: "1000000/7" },
          anchor: { reading: 5, at: { at: "2026-03-01T00:00:00", scale: "TAI" } },
          oscillator: { offsetNs: 12.5, presetFractional: -4.4647e-10, frequencyOffset: 1.23e-4, agingPerDay: 1e-9 },
        },
        trajectory: { ...orbit, epoch: "2026-03-01T00:00:00Z" },
        scale: "TAI",
        readings: [{ reading: 123_456_789_012 }],
      },
      bench,
    );
    addsUp(answer);
    const result = answer.results[0]!;
    const counted = new decimal(123_456_789_012 - 5).times(7).dividedBy(1_000_000);
    const exact = counted.minus(result.clockMinusTt);
    const whole = Date.UTC(2026, 2, 1) / 1000;
    const [date, fraction] = result.corrected.split(".");
    const printed = new decimal(Date.parse(`${date}Z`) / 1000 - whole).plus(`0.${fraction}`);
    expect(printed.minus(exact).abs().lessThanOrEqualTo("0.5005e-12")).toBe(true);
  });
});

function addsUp({ results }: CorrectionResponse): void {
  for (const { terms, clockMinusTt, clockMinusTtNs } of results) {
    const total = terms.reduce((sum, { accumulated }) => sum.plus(accumulated), new decimal(0));
    expect(total.equals(clockMinusTt)).toBe(true);
    const rounded = terms.reduce((sum, { accumulatedNs }) => sum + accumulatedNs, 0);
    const largest = Math.max(...terms.map(({ accumulatedNs }) => Math.abs(accumulatedNs)), Math.abs(clockMinusTtNs));
    expect(Math.abs(rounded - clockMinusTtNs)).toBeLessThanOrEqual(4 * 2 ** -52 * largest);
  }
}

function secondsAfter(anchor: string, t: number): string {
  const ground = { counter: { ticksPerSecond: 1000 }, anchor: { reading: 0, at: anchor } };
  const surface = { kind: "surface", body: "Earth", latitudeDeg: 0, longitudeDeg: 0, heightM: 0, heightOf: "geoid" };
  const answer = corrections(
    { clock: ground, trajectory: surface, terms: ["reference-surface"], readings: [{ reading: Math.round(t * 1000) }] },
    bench,
  );
  return answer.results[0]!.corrected;
}

/** Between two UTC texts within the same half minute. */
function picosecondsBetween(a: string, b: string): number {
  const part = (text: string) => BigInt(text.slice(17, 19)) * 1_000_000_000_000n + BigInt(text.slice(20, 32));
  return Number(part(b) - part(a));
}
