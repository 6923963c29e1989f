import { describe, expect, it } from "vitest";
import { Problem } from "../../src/problem/index.ts";
import { defaultLeapSeconds, formatInstant, parseInstant } from "../../src/time/index.ts";
import { parseAnyInstant } from "../../src/time/scales.ts";
import { seededNumbers } from "./measure.ts";

/** What a parser makes of a text: the instant, or all that the problem says. */
function outcome(parse: typeof parseInstant, text: string): string {
  try {
    return JSON.stringify(parse(text, "UTC", defaultLeapSeconds));
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    return JSON.stringify([error.code, error.message, error.faults]);
  }
}

describe("the short way of usual texts", () => {
  it("says what the long way says of 100 000 seeded texts, good and bad", () => {
    const next = seededNumbers(2026);
    const upTo = (n: number): number => Math.floor(next() * n);
    const pick = <T>(values: readonly T[]): T => values[upTo(values.length)]!;
    // From ten weeks before the years that are covered to more than a year after them.
    const first = 63_072_000 - 70 * 86_400;
    const letters = [..."0123456789-:.TZtz +,/;٣"];
    const seconds = defaultLeapSeconds.steps.map(({ day, offset }) => day * 86_400 + offset);
    let good = 0;
    for (let i = 0; i < 100_000; i++) {
      const moment = upTo(4) === 0 ? pick(seconds) + upTo(7) - 3 : first + Math.floor(next() * 130.5 * 365.25 * 86_400);
      const picoseconds = pick([0, 1, 999_999_999_999, upTo(1e12)]);
      let text = formatInstant({ seconds: moment, picoseconds }, "UTC", defaultLeapSeconds);
      const kind = upTo(10);
      // Fewer or more decimals, then single characters that are changed, lost or added, then parts out of range.
      if (kind >= 4)
        text = pick([`${text.slice(0, 19 + upTo(14))}Z`, text, `${text.slice(0, 19)}Z`, `${text.slice(0, -1)}7Z`]);
      if (kind === 7) text = text.slice(0, upTo(text.length)) + pick(letters) + text.slice(upTo(text.length));
      if (kind === 8) {
        const at = upTo(text.length);
        text = text.slice(0, at) + pick(["", pick(letters), pick(letters) + pick(letters)]) + text.slice(at + 1);
      }
      if (kind === 9) {
        const at = pick([5, 8, 11, 14, 17]);
        text = text.slice(0, at) + String(upTo(100)).padStart(2, "0") + text.slice(at + 2);
      }
      const said = outcome(parseInstant, text);
      if (said.startsWith("{")) good++;
      if (said !== outcome(parseAnyInstant, text))
        expect(`${text}: ${said}`).toBe(`${text}: ${outcome(parseAnyInstant, text)}`);
    }
    // Both sorts were there in numbers.
    expect(good).toBeGreaterThan(50_000);
    expect(good).toBeLessThan(95_000);
  });
});
