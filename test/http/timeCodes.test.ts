import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { corrections, plainBench, predictedReadings } from "../../src/wire/index.ts";
import { type Body, mountain } from "../support/requests.ts";

const bench = plainBench(defaultLeapSeconds, "test");
const seaLevel = { ...mountain(), heightM: 0 };
const at = "2006-01-15T21:24:37.5Z";

/** Codes of one instant, from CCSDS 301.0-B-4's own layout; the figures are those of test/published. */
const codes: readonly (readonly [string, Body, string, string])[] = [
  ["CUC", { format: "CUC", coarseOctets: 4, fineOctets: 2, pField: true }, "1e5a5d1c368000", "1e5a5d1c378000"],
  [
    "CUC of another epoch",
    { format: "CUC", coarseOctets: 4, fineOctets: 3, pField: true, epoch: { at: "1980-01-06T00:00:00", scale: "GPS" } },
    "2f30f58023800000",
    "2f30f58024800000",
  ],
  ["CDS", { format: "CDS", dayOctets: 2, subMillisecondOctets: 0, pField: true }, "40448a04981bfc", "40448a04981fe4"],
  [
    "CCS",
    { format: "CCS", variant: "month-day", subsecondOctets: 1, pField: true },
    "512006011521243750",
    "512006011521243850",
  ],
];

describe("a clock that shows a time code", () => {
  it.each(codes)("%s: one second later, both ways", (_, timeCode, atAnchor, later) => {
    const clock = { timeCode, anchor: { reading: atAnchor, at } };
    const terms = ["reference-surface", "velocity", "earth-monopole", "earth-oblateness", "earth-higher"];
    const answer = corrections({ clock, trajectory: seaLevel, terms, readings: [{ reading: later }] }, bench);
    expect(answer.results[0]!.corrected).toBe("2006-01-15T21:24:38.500000000000Z");
    const back = predictedReadings({ clock, trajectory: seaLevel, terms, instants: ["2006-01-15T21:24:38.5Z"] }, bench);
    expect(back.results[0]!.reading).toBe(later);
  });

  it.each([
    ["a number", 5, /hexadecimal/],
    ["no hexadecimal", "xyz", /hexadecimal/],
    ["too short a code", "1e5a5d", /octets/],
    ["another P-field", "1f5a5d1c36800000", /P-field/],
  ])("refuses %s with the place of the reading", (_, reading, hint) => {
    const clock = { timeCode: codes[0]![1], anchor: { reading: codes[0]![2], at } };
    try {
      corrections({ clock, trajectory: seaLevel, readings: [{ reading }] }, bench);
      expect.unreachable();
    } catch (error) {
      const { faults, message } = error as { faults: { place: unknown[]; expected: string }[]; message: string };
      expect(faults[0]!.place).toEqual(["readings", 0, "reading"]);
      expect(`${message} ${faults[0]!.expected}`).toMatch(hint);
    }
  });
});
