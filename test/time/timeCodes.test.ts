import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Problem } from "../../src/problem/index.ts";
import {
  compareInstants,
  coveredYears,
  defaultLeapSeconds,
  formatInstant,
  type Instant,
  parseInstant,
  readTimeCode,
  type TimeCodeFormat,
  writeTimeCode,
} from "../../src/time/index.ts";

/**
 * Time codes both ways, at their range ends and around leap seconds; layouts by hand.
 * Source: CCSDS 301.0-B-4, 3.2 (CUC), 3.3 (CDS), 3.4 (CCS), 3.5 (ASCII); published codes are rows C02 to C13.
 */

const table = defaultLeapSeconds;
const seed = 30_104;
const { first, last } = coveredYears(table);
const second = 1_000_000_000_000n;
const utc = (text: string): Instant => parseInstant(text, "UTC", table);
const shown = (instant: Instant): string => formatInstant(instant, "UTC", table);

const cuc = (
  coarseOctets: number,
  fineOctets: number,
  pField = false,
  epoch: Instant | null = null,
): TimeCodeFormat => ({
  code: "CUC",
  coarseOctets,
  fineOctets,
  epoch,
  pField,
});
const cds = (
  dayOctets: 2 | 3,
  subMillisecondOctets: 0 | 2 | 4,
  pField = false,
  epochDay: number | null = null,
): TimeCodeFormat => ({ code: "CDS", dayOctets, subMillisecondOctets, epochDay, pField });
const ccs = (variant: "month-day" | "day-of-year", subsecondOctets: number, pField = false): TimeCodeFormat => ({
  code: "CCS",
  variant,
  subsecondOctets,
  pField,
});
const ascii = (code: "ASCII-A" | "ASCII-B", digits: number | null = null, terminator: boolean | null = null) =>
  ({ code, digits, terminator }) as const;

const pField = fc.boolean();
const epoch = fc.constantFrom(null, utc("1980-01-06T00:00:00Z"), utc("1972-01-01T00:00:00.000000000001Z"));
const cucFormats = fc
  .tuple(fc.integer({ min: 4, max: 7 }), fc.integer({ min: 0, max: 10 }), pField, epoch)
  .map(([coarse, fine, p, e]) => cuc(coarse, fine, p, e));
const cdsFormats = fc
  .tuple(fc.constantFrom<2 | 3>(2, 3), fc.constantFrom<0 | 2 | 4>(0, 2, 4), pField, fc.constantFrom(null, 730, 3_652))
  .map(([days, below, p, e]) => cds(days, below, p, e));
const ccsFormats = fc
  .tuple(fc.constantFrom("month-day" as const, "day-of-year" as const), fc.integer({ min: 0, max: 6 }), pField)
  .map(([variant, octets, p]) => ccs(variant, octets, p));
const asciiFormats = fc
  .tuple(
    fc.constantFrom("ASCII-A" as const, "ASCII-B" as const),
    fc.option(fc.integer({ min: 0, max: 12 })),
    fc.option(fc.boolean()),
  )
  .map(([code, digits, terminator]) => ascii(code, digits, terminator));
const formats: fc.Arbitrary<TimeCodeFormat> = fc.oneof(cucFormats, cdsFormats, ccsFormats, asciiFormats);

/** From 1980 to what four octets of seconds since 1958 can count, half of them within a day of a leap second. */
const instants: fc.Arbitrary<Instant> = fc.record({
  seconds: fc.oneof(
    fc.integer({ min: utc("1980-01-06T00:00:00Z").seconds, max: utc("2094-01-01T00:00:00Z").seconds }),
    fc
      .tuple(fc.constantFrom(...table.steps.slice(10)), fc.integer({ min: -86_402, max: 86_402 }))
      .map(([{ day, offset }, shift]) => day * 86_400 + offset + shift),
    fc.constantFrom(...table.steps.slice(10)).map(({ day, offset }) => day * 86_400 + offset - 1),
  ),
  picoseconds: fc.oneof(
    fc.integer({ min: 0, max: 999_999_999_999 }),
    fc.constantFrom(0, 1, 999_999_999, 1_000_000_000, 500_000_000_000, 999_999_999_999),
  ),
});

const exact = ({ seconds, picoseconds }: Instant): bigint => BigInt(seconds) * second + BigInt(picoseconds);
const runs = { seed, numRuns: 6_000 };

/** The resolution of a code, ps. */
function resolution(format: TimeCodeFormat): number {
  switch (format.code) {
    case "CUC":
      return 1e12 / 256 ** format.fineOctets;
    case "CDS":
      return { 0: 1e9, 2: 1e6, 4: 1 }[format.subMillisecondOctets];
    case "CCS":
      return 1e12 / 100 ** format.subsecondOctets;
    default:
      return 1e12 / 10 ** (format.digits ?? 12);
  }
}

describe("every code", () => {
  it("shows the time down to its resolution: what reads back is not later, and earlier by what is said to be lost", () => {
    fc.assert(
      fc.property(instants, formats, (instant, format) => {
        const { timeCode, lostPicoseconds } = writeTimeCode(instant, format, table);
        const back = readTimeCode(timeCode, format, table);
        expect(exact(instant) - exact(back)).toBe(BigInt(lostPicoseconds));
        expect(lostPicoseconds).toBeGreaterThanOrEqual(0);
        expect(lostPicoseconds).toBeLessThanOrEqual(Math.max(0, resolution(format)));
        if (resolution(format) <= 1) expect(lostPicoseconds).toBe(0);
      }),
      runs,
    );
  });

  it("that is written, read and written again is the same to the bit, in upper case as in lower", () => {
    fc.assert(
      fc.property(instants, formats, (instant, format) => {
        const { timeCode } = writeTimeCode(instant, format, table);
        if (format.code === "CUC" && format.fineOctets > 4) return; // finer than a picosecond: see below
        const again = writeTimeCode(readTimeCode(timeCode.toUpperCase(), format, table), format, table);
        expect(again).toEqual({ timeCode, lostPicoseconds: 0 });
      }),
      runs,
    );
  });

  it("keeps the order of time", () => {
    fc.assert(
      fc.property(instants, instants, formats, (a, b, format) => {
        const [x, y] = [a, b].map((instant) => writeTimeCode(instant, format, table).timeCode);
        const order = Math.sign(compareInstants(a, b));
        expect(x === y ? 0 : x! < y! ? -1 : 1).toBe(x === y ? 0 : order);
      }),
      runs,
    );
  });
});

describe("CUC", () => {
  it("any octets whose fractions are coarser than a picosecond come back to the bit", () => {
    const octets = fc.tuple(
      fc.integer({ min: 0x1a54c58a, max: 0xffffffff }),
      fc.integer({ min: 0, max: 4 }),
      fc.integer({ min: 0, max: 0xffffffff }),
      pField,
    );
    fc.assert(
      fc.property(octets, ([coarse, fine, fraction, p]) => {
        const format = cuc(4, fine, p);
        const head = p
          ? writeTimeCode(utc("2000-01-01T00:00:00Z"), format, table).timeCode.slice(0, fine > 3 ? 4 : 2)
          : "";
        const hexadecimal = (n: number) => n.toString(16).padStart(8, "0");
        const code = `${head}${hexadecimal(coarse)}${hexadecimal(fraction).slice(0, 2 * fine)}`;
        expect(writeTimeCode(readTimeCode(code, format, table), format, table).timeCode).toBe(code);
      }),
      runs,
    );
  });

  it("is read to the nearest picosecond: a fraction of 2^-16 s is 15 258 789.06 ps, 3 of them 45 776 367.19", () => {
    const at = (fraction: string) => readTimeCode(`5a5d1c36${fraction}`, cuc(4, 2), table).picoseconds;
    expect([at("0000"), at("0001"), at("0003"), at("8000"), at("ffff")]).toEqual([
      0, 15_258_789, 45_776_367, 500_000_000_000, 999_984_741_211,
    ]);
  });

  it("truncates: the last count reached is shown", () => {
    const write = (text: string) => writeTimeCode(utc(text), cuc(4, 1), table);
    // 1/256 s is 3 906 250 000 ps.
    expect(write("2006-01-15T21:24:37.503906249999Z")).toEqual({
      timeCode: "5a5d1c3680",
      lostPicoseconds: 3_906_249_999,
    });
    expect(write("2006-01-15T21:24:37.50390625Z")).toEqual({ timeCode: "5a5d1c3681", lostPicoseconds: 0 });
  });

  it("counts through leap seconds without a step", () => {
    const count = (text: string) => Number.parseInt(writeTimeCode(utc(text), cuc(4, 0), table).timeCode, 16);
    const from = count("2016-12-31T23:59:59Z");
    expect([count("2016-12-31T23:59:60Z") - from, count("2017-01-01T00:00:00Z") - from]).toEqual([1, 2]);
  });

  it.each([
    [1, 0, "1972-01-01T00:04:15Z", "1972-01-01T00:04:16Z"],
    [2, 1, "1972-01-01T18:12:15.999999999999Z", "1972-01-01T18:12:16Z"],
    [3, 0, "1972-07-13T04:20:14Z", "1972-07-13T04:20:15Z"],
  ])("%i coarse and %i fine octets from 1972 end where 256^n seconds are full", (coarse, fine, full, over) => {
    const format = cuc(coarse, fine, false, utc("1972-01-01T00:00:00Z"));
    expect(writeTimeCode(utc(full), format, table).timeCode).toBe("ff".repeat(coarse + fine));
    expect(() => writeTimeCode(utc(over), format, table)).toThrow(/cannot show/);
    expect(() =>
      writeTimeCode(utc("1972-01-01T00:00:00Z"), cuc(1, 0, false, utc("1972-01-01T00:00:01Z")), table),
    ).toThrow(/cannot show/);
  });

  it("four octets since 1958 end in 2094; five do not (2^32 s)", () => {
    const end = readTimeCode("ffffffff", cuc(4, 0), table);
    expect(formatInstant(end, "TAI", table)).toBe("2094-02-06T06:28:15.000000000000");
    const next = { seconds: end.seconds + 1, picoseconds: 0 };
    expect(() => writeTimeCode(next, cuc(4, 0), table)).toThrow(/cannot show/);
    expect(writeTimeCode(next, cuc(5, 0, true), table).timeCode).toBe("9c200100000000");
  });

  it("a P-field of two octets may part its octets otherwise than the one that is written", () => {
    // 2 + 2 coarse octets instead of 4, 1 + 1 fine ones instead of 2.
    const code = "95445a5d1c368000";
    expect(shown(readTimeCode(code, cuc(4, 2, true), table))).toBe("2006-01-15T21:24:37.500000000000Z");
  });
});

describe("days that end in a leap second", () => {
  it.each([
    ["2016-12-31T23:59:59.999Z", "05265bff", "235959"],
    ["2016-12-31T23:59:60Z", "05265c00", "235960"],
    ["2016-12-31T23:59:60.999Z", "05265fe7", "235960"],
  ])("%s", (text, milliseconds, time) => {
    expect(writeTimeCode(utc(text), cds(2, 0), table).timeCode).toBe(`542d${milliseconds}`);
    expect(readTimeCode(`542d${milliseconds}`, cds(2, 0), table)).toEqual(utc(text));
    expect(writeTimeCode(utc(text), ccs("month-day", 0), table).timeCode).toBe(`20161231${time}`);
    expect(writeTimeCode(utc(text), ccs("day-of-year", 0), table).timeCode).toBe(`20160366${time}`);
    expect(writeTimeCode(utc(text), ascii("ASCII-B", 3), table).timeCode).toMatch(/^2016-366T23:59:(59|60)\.\d{3}Z$/);
  });
});

describe("refusals say what is wrong and what would be right", () => {
  const refused: readonly { name: string; text: string; format: TimeCodeFormat; says: RegExp; right: RegExp }[] = [
    { name: "nothing", text: "", format: cuc(4, 2), says: /empty/, right: /two an octet/ },
    { name: "0x", text: "0x5a5d1c368000", format: cuc(4, 2), says: /begins with 0x/, right: /nothing before/ },
    { name: "blanks", text: "5a 5d 1c 36", format: cuc(4, 0), says: /blanks/, right: /nothing before/ },
    { name: "a line feed", text: "5a5d1c36\n", format: cuc(4, 0), says: /blanks/, right: /after them/ },
    { name: "another letter", text: "5a5d1g36", format: cuc(4, 0), says: /"g" at character 6/, right: /hexadecimal/ },
    {
      name: "half an octet",
      text: "5a5d1c3",
      format: cuc(4, 0),
      says: /7 digits, an odd number/,
      right: /two an octet/,
    },
    {
      name: "an octet short",
      text: "5a5d1c",
      format: cuc(4, 0),
      says: /3 octets .* takes 4/,
      right: /4 of whole seconds/,
    },
    { name: "P-field left out", text: "5a5d1c36", format: cuc(4, 0, true), says: /identification 5|CCS/, right: /1c/ },
    {
      name: "P-field too many",
      text: "1c5a5d1c36",
      format: cuc(4, 0),
      says: /5 octets .* takes 4/,
      right: /no P-field/,
    },
    {
      name: "another level",
      text: "2c5a5d1c36",
      format: cuc(4, 0, true),
      says: /agency's own epoch; .*1958/,
      right: /1c/,
    },
    { name: "other octets", text: "1e5a5d1c36", format: cuc(4, 0, true), says: /4 coarse and 2 fine/, right: /1c/ },
    { name: "a code of days", text: "40448a04981bfc", format: cuc(4, 2, true), says: /40 says CDS/, right: /1e/ },
    { name: "no code at all", text: "705a5d1c36", format: cuc(4, 0, true), says: /identification 7/, right: /1c/ },
    {
      name: "a missing second octet",
      text: "9c",
      format: cuc(4, 0, true),
      says: /second octet, which is missing/,
      right: /1c/,
    },
    {
      name: "a third octet",
      text: `9fa4${"00".repeat(9)}`,
      format: cuc(5, 4, true),
      says: /third/,
      right: /9f24/,
    },
    { name: "reserved bits", text: `9f25${"00".repeat(9)}`, format: cuc(5, 4, true), says: /reserved/, right: /9f24/ },
    {
      name: "CDS with 24-bit days",
      text: "44448a04981bfc00",
      format: cds(2, 0, true),
      says: /44 says CDS with 3/,
      right: /40/,
    },
    { name: "CDS with bits 11", text: "43448a04981bfc", format: cds(2, 0, true), says: /reserved/, right: /40/ },
    { name: "CDS extended", text: "c0448a04981bfc", format: cds(2, 0, true), says: /second octet/, right: /40/ },
    { name: "CDS without its P-field", text: "", format: cds(2, 0, true), says: /empty/, right: /octet/ },
    {
      name: "millisecond 86 400 000",
      text: "448a05265c00",
      format: cds(2, 0),
      says: /86400000 .* ends with 86399999/,
      right: /leap second/,
    },
    {
      name: "millisecond 86 401 000",
      text: "542d05265fe8",
      format: cds(2, 0),
      says: /ends with 86400999/,
      right: /0 to 86400999/,
    },
    { name: "1000 microseconds", text: "448a04981bfc03e8", format: cds(2, 2), says: /only 1000/, right: /0 to 999/ },
    {
      name: "10^9 picoseconds",
      text: "448a04981bfc3b9aca00",
      format: cds(2, 4),
      says: /only 1000000000/,
      right: /999999999/,
    },
    {
      name: "a digit over 9",
      text: "2006011a212437",
      format: ccs("month-day", 0),
      says: /1a in its day/,
      right: /00 to 99/,
    },
    {
      name: "a decimal over 9",
      text: "20060115212437f0",
      format: ccs("month-day", 1),
      says: /f0 in its decimals/,
      right: /00 to 99/,
    },
    { name: "month 13", text: "20061315212437", format: ccs("month-day", 0), says: /month 13/, right: /1 to 12/ },
    { name: "29 February 2006", text: "20060229212437", format: ccs("month-day", 0), says: /day 29/, right: /1 to 28/ },
    {
      name: "day of year 366 in 2006",
      text: "20060366212437",
      format: ccs("day-of-year", 0),
      says: /day of year 366/,
      right: /365/,
    },
    {
      name: "a fourth digit of the day of year",
      text: "20061015212437",
      format: ccs("day-of-year", 0),
      says: /1015/,
      right: /365/,
    },
    { name: "hour 24", text: "20060115240000", format: ccs("month-day", 0), says: /hour 24/, right: /0 to 23/ },
    { name: "minute 60", text: "20060115006000", format: ccs("month-day", 0), says: /minute 60/, right: /0 to 59/ },
    {
      name: "second 60 without a leap second",
      text: "20060115235960",
      format: ccs("month-day", 0),
      says: /second 60/,
      right: /0 to 59/,
    },
    {
      name: "second 60 at another time",
      text: "20161231225960",
      format: ccs("month-day", 0),
      says: /second 60/,
      right: /0 to 59/,
    },
    {
      name: "another variant",
      text: "5820060015212437",
      format: ccs("month-day", 0, true),
      says: /58 says CCS by day of year/,
      right: /50/,
    },
    {
      name: "seven subsecond octets",
      text: "5720060115212437",
      format: ccs("month-day", 0, true),
      says: /reserved/,
      right: /50/,
    },
    {
      name: "code B for A",
      text: "2006-015T21:24:37Z",
      format: ascii("ASCII-A"),
      says: /no ASCII-A/,
      right: /2026-03-01T/,
    },
    {
      name: "code A for B",
      text: "2006-01-15T21:24:37Z",
      format: ascii("ASCII-B"),
      says: /no ASCII-B/,
      right: /2026-060T/,
    },
    {
      name: "other digits",
      text: "2006-015T21:24:37.5Z",
      format: ascii("ASCII-B", 3),
      says: /1 decimals .* takes 3/,
      right: /3 decimals/,
    },
    {
      name: "13 decimals",
      text: "2006-015T21:24:37.0000000000001Z",
      format: ascii("ASCII-B"),
      says: /12 decimals/,
      right: /12/,
    },
    {
      name: "Z where none is wanted",
      text: "2006-015T21:24:37Z",
      format: ascii("ASCII-B", null, false),
      says: /with Z/,
      right: /no Z/,
    },
    {
      name: "no Z where one is wanted",
      text: "2006-015T21:24:37",
      format: ascii("ASCII-B", null, true),
      says: /without Z/,
      right: /Z at the end/,
    },
    {
      name: "an offset",
      text: "2006-015T21:24:37+01:00",
      format: ascii("ASCII-B"),
      says: /cannot be read/,
      right: /./,
    },
    { name: "minute 75", text: "2006-015T21:75:37Z", format: ascii("ASCII-B"), says: /minute/, right: /00 to 59/ },
  ];
  it.each(refused)("$name", ({ text, format, says, right }) => {
    let problem: Problem | undefined;
    try {
      readTimeCode(text, format, table);
    } catch (error) {
      problem = error as Problem;
    }
    expect(problem?.code, problem?.message).toBe("invalid-time-code");
    expect(problem!.message).toMatch(says);
    expect(problem!.faults).toHaveLength(1);
    expect(problem!.faults[0]).toMatchObject({ place: [], received: text });
    expect(problem!.faults[0]!.expected).toMatch(right);
  });

  it.each([
    ["CUC", "1a54c589", cuc(4, 0)],
    ["CUC of seven octets", "ff".repeat(7), cuc(7, 0)],
    ["CDS", "000000000000", cds(2, 0)],
    ["CDS of three octets", "ffffff00000000", cds(3, 0)],
    ["CCS", "19711231235959", ccs("month-day", 0)],
    ["CCS of the year 9999", "99991231235959", ccs("month-day", 0)],
    ["ASCII A", "1958-01-01T00:00:00Z", ascii("ASCII-A")],
  ] as const)("%s outside 1972 to 2100 is out of range, not unreadable", (_name, text, format) => {
    expect(() => readTimeCode(text, format, table)).toThrow(/outside|lies outside/);
    try {
      readTimeCode(text, format, table);
    } catch (error) {
      expect((error as Problem).code).toBe("instant-out-of-range");
    }
  });

  it("an instant that a code cannot show is refused with the range that it can", () => {
    const write = (format: TimeCodeFormat) => () => writeTimeCode(utc("2026-03-01T00:00:00Z"), format, table);
    expect(write(cuc(2, 0))).toThrow(/2 coarse octets and the epoch 1958-01-01T00:00:00 TAI cannot show 2026-03-01/);
    expect(write(cuc(4, 0, false, utc("2026-03-01T00:00:00.000000000001Z")))).toThrow(/cannot show/);
    expect(write(cds(2, 0, false, 30_000))).toThrow(/day -\d+ from the epoch/);
    expect(write(cds(2, 0, false, -60_000))).toThrow(/day 80513 from the epoch/);
  });

  it("the ends of the covered years are shown by codes that are long enough", () => {
    for (const format of [cuc(5, 10, true), cds(2, 4, true), cds(3, 4), ccs("month-day", 6), ascii("ASCII-B")]) {
      for (const end of [first, last]) {
        const { timeCode, lostPicoseconds } = writeTimeCode(end, format, table);
        expect(lostPicoseconds).toBe(0);
        expect(readTimeCode(timeCode, format, table)).toEqual(end);
      }
    }
  });
});
