import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { ProblemCode } from "../../src/problem/index.ts";
import { defaultLeapSeconds, scales } from "../../src/time/index.ts";
import { documentAllows, holdGoodAnswer, holdProblem } from "../support/contract.ts";
import type { Body } from "../support/requests.ts";
import { post, type Service, send, startService } from "../support/service.ts";

/**
 * POST /v1/time-conversions. Numbers: rows T01 to T21 and C01 to C13 of test/published, and the sources beside the checks.
 * The mission is invented.
 */

const path = "/v1/time-conversions";
let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

const cuc = { format: "CUC", coarseOctets: 4, fineOctets: 2, pField: true };
const cds = { format: "CDS", dayOctets: 2, subMillisecondOctets: 0, pField: true };
const ccs = { format: "CCS", variant: "month-day", subsecondOctets: 1, pField: true };
const moment = "2006-01-15T21:24:37.5Z";

const convert = async (body: Body): Promise<Body> =>
  holdGoodAnswer(path, body, await post(service.address, path, body));
const single = async (value: Body, target: Body): Promise<string> => {
  const [{ values }] = (await convert({ values: [value], to: [target] })).results;
  return values[0].at ?? values[0].timeCode;
};
const notices = (answer: Body): string[] => answer.notices.map(({ code }: Body) => code);

describe("scales", () => {
  it("one instant in all of them, in the order asked for", async () => {
    const answer = await convert({ values: [moment], to: scales });
    const [{ input, values, flags }] = answer.results;
    expect(input).toBe(moment);
    expect(flags).toEqual([]);
    expect(values.map(({ scale }: Body) => scale)).toEqual(scales);
    const by = Object.fromEntries(values.map(({ scale, at }: Body) => [scale, at]));
    // SOFA Time Scale and Calendar Tools, "Examples": TAI, TT, TCG; the others by their rules.
    expect(by).toMatchObject({
      UTC: "2006-01-15T21:24:37.500000000000Z",
      TAI: "2006-01-15T21:25:10.500000000000",
      TT: "2006-01-15T21:25:42.684000000000",
      GPS: "2006-01-15T21:24:51.500000000000",
      GST: "2006-01-15T21:24:51.500000000000",
      BDT: "2006-01-15T21:24:37.500000000000",
      GLONASS: "2006-01-16T00:24:37.500000000000",
    });
    expect(by.TCG).toMatch(/^2006-01-15T21:25:43\.322690/);
    expect(by.TDB).toMatch(/^2006-01-15T21:25:42\.68437/);
    expect(by.TCB).toMatch(/^2006-01-15T21:25:56\.89395/);
  });

  it.each(scales)("%s and back to UTC is the same picosecond, from the form in which it was given", async (scale) => {
    const text = "2031-07-08T09:10:11.123456789012Z";
    const at = await single(text, scale);
    expect(await single({ at, scale }, "UTC")).toBe(text);
    if (scale === "UTC") expect(await single(at, "UTC")).toBe(text);
  });

  it("day of year, calendar date and scale come to the same", async () => {
    const values = ["2026-060T00:00:00Z", "2026-03-01T00:00:00Z", { at: "2026-060T00:00:37", scale: "TAI" }];
    const { results } = await convert({ values, to: ["TT"] });
    for (const { values: out } of results) expect(out[0].at).toBe("2026-03-01T00:01:09.184000000000");
  });

  it("a leap second is flagged, and is 02:59:60 in GLONASS time (GLONASS ICD 5.1, from memory)", async () => {
    const answer = await convert({
      values: ["2016-12-31T23:59:60.5Z", "2017-01-01T00:00:00Z"],
      to: ["GLONASS", "TAI"],
    });
    expect(answer.results.map(({ flags }: Body) => flags)).toEqual([["leap-second"], []]);
    expect(answer.results[0].values[0].at).toBe("2017-01-01T02:59:60.500000000000");
    expect(answer.results[0].values[1].at).toBe("2017-01-01T00:00:36.500000000000");
  });
});

describe("time codes (CCSDS 301.0-B-4)", () => {
  it.each([
    [cuc, "1e5a5d1c368000", 0],
    [{ ...cuc, coarseOctets: 5, fineOctets: 4 }, "9f24005a5d1c3680000000", 0],
    [{ ...cuc, fineOctets: 3, epoch: "1980-01-06T00:00:00Z" }, "2f30f58023800000", 0],
    [{ format: "CUC", coarseOctets: 4, fineOctets: 0 }, "5a5d1c36", 500_000_000_000],
    [cds, "40448a04981bfc", 0],
    [{ ...cds, epoch: "2000-01-01T00:00:00Z", dayOctets: 3 }, "4c00089e04981bfc", 0],
    [ccs, "512006011521243750", 0],
    [{ format: "CCS", variant: "day-of-year", subsecondOctets: 0, pField: true }, "5820060015212437", 500_000_000_000],
    [{ format: "ASCII-A", digits: 1 }, "2006-01-15T21:24:37.5Z", 0],
    [{ format: "ASCII-B", digits: 0, terminator: false }, "2006-015T21:24:37", 500_000_000_000],
    [{ format: "ASCII-B" }, "2006-015T21:24:37.500000000000Z", 0],
  ])("%j writes %s, losing %i ps, and reads it", async (format, timeCode, lostPs) => {
    const { results } = await convert({ values: [moment, { timeCode, format }], to: [format, "UTC"] });
    expect(results[0].values[0]).toEqual({ format, timeCode, lostPs });
    expect(results[1].values[0]).toEqual({ format, timeCode, lostPs: 0 });
    const shown = lostPs === 0 ? "2006-01-15T21:24:37.500000000000Z" : "2006-01-15T21:24:37.000000000000Z";
    expect(results[1].values[1].at).toBe(shown);
  });

  it("one code to another, upper case in, lower case out", async () => {
    expect(await single({ timeCode: "1E5A5D1C368000", format: cuc }, cds)).toBe("40448a04981bfc");
    expect(await single({ timeCode: "40448A04981BFC", format: cds }, cuc)).toBe("1e5a5d1c368000");
  });
});

describe("notices and evidence", () => {
  it("says what the answer rests on: leap-second table with expiry, constants, version, digest", async () => {
    const { evidence, notices: none } = await convert({ values: [moment], to: ["TAI"] });
    expect(none).toEqual([]);
    expect(evidence.leapSeconds.source).toBe(defaultLeapSeconds.source);
    expect(evidence.leapSeconds.expires).toMatch(/^\d{4}-\d\d-\d\dT00:00:00\.000000000000Z$/);
    // IAU 2000 Resolution B1.9; IAU 2006 Resolution B3.
    expect(evidence.constants).toEqual({ lG: 6.969290134e-10, lB: 1.550519768e-8, tdb0: -6.55e-5 });
    expect(evidence.inputsSha256).toMatch(/^[0-9a-f]{64}$/);
  });

  it("realised scales are named, wherever they stand; TDB and TCB are limited by their model", async () => {
    const given = await convert({ values: [{ at: "2026-03-01T00:00:00", scale: "BDT" }], to: ["UTC"] });
    expect(notices(given)).toEqual(["realised-scale"]);
    expect(given.notices[0].text).toMatch(/BeiDou/);
    expect(given.notices[0].text).not.toMatch(/GPS/);
    const asked = await convert({ values: [moment], to: ["GPS", "GST", "BDT", "GLONASS", "TCB"] });
    expect(notices(asked)).toEqual(["realised-scale", "model-limited"]);
    for (const word of ["GPS", "Galileo", "BeiDou", "GLONASS"]) expect(asked.notices[0].text).toContain(word);
    expect(notices(await convert({ values: [{ at: "2026-03-01T00:00:00", scale: "TDB" }], to: ["TT"] }))).toEqual([
      "model-limited",
    ]);
  });

  it("instants at and after the expiry of the leap-second table are flagged and counted", async () => {
    const { evidence } = await convert({ values: [moment], to: ["TAI"] });
    const { expires } = evidence.leapSeconds;
    const before = new Date(Date.parse(expires) - 1).toISOString();
    const answer = await convert({ values: [before, expires, "2100-12-31T23:59:59.999999999999Z"], to: ["TAI"] });
    expect(answer.results.map(({ flags }: Body) => flags)).toEqual([
      [],
      ["leap-table-expired"],
      ["leap-table-expired"],
    ]);
    expect(notices(answer)).toEqual(["leap-table-expired"]);
    expect(answer.notices[0].text).toContain("2 of 3");
  });

  it("takes 10 000 values", async () => {
    const values = Array.from({ length: 10_000 }, (_, i) => new Date(Date.UTC(2000, 0, 1) + i * 3e7).toISOString());
    const { results } = await convert({ values, to: ["TDB", cuc] });
    expect(results).toHaveLength(10_000);
    expect(results.map(({ input }: Body) => input)).toEqual(values);
  });
});

interface Case {
  readonly name: string;
  readonly body: Body;
  readonly code: ProblemCode;
  readonly pointer: string;
  readonly hint: RegExp;
}

const value = (name: string, given: Body, code: ProblemCode, pointer: string, hint: RegExp): Case => ({
  name,
  body: { values: [moment, given], to: ["TAI"] },
  code,
  pointer: `/values/1${pointer}`,
  hint,
});
const coded = (name: string, timeCode: string, format: Body, hint: RegExp, pointer = "/timeCode"): Case =>
  value(name, { timeCode, format }, "invalid-time-code", pointer, hint);
const target = (
  name: string,
  given: Body,
  pointer: string,
  hint: RegExp,
  code: ProblemCode = "invalid-request",
): Case => ({
  name,
  body: { values: [moment], to: ["TAI", given] },
  code,
  pointer: `/to/1${pointer}`,
  hint,
});
const whole = (name: string, body: Body, pointer: string, hint: RegExp): Case => ({
  name,
  body,
  code: "invalid-request",
  pointer,
  hint,
});

const wrong: readonly Case[] = [
  whole("no values", { to: ["TAI"] }, "/values", /missing/),
  whole("an empty list of values", { values: [], to: ["TAI"] }, "/values", /at least 1/),
  whole("10 001 values", { values: Array(10_001).fill(moment), to: ["TAI"] }, "/values", /10000/),
  whole("no targets", { values: [moment] }, "/to", /missing/),
  whole("an empty list of targets", { values: [moment], to: [] }, "/to", /at least 1/),
  whole("21 targets", { values: [moment], to: Array(21).fill("TAI") }, "/to", /20/),
  whole("one target, not in a list", { values: [moment], to: "TAI" }, "/to", /array/),
  whole("a field too many", { values: [moment], to: ["TAI"], from: "UTC" }, "/from", /no such field/),
  whole("a list", [], "", /object/),
  value("a number", 1_141_171_237, "invalid-request", "", /instant .* or a time code/),
  value("null", null, "invalid-request", "", /instant .* or a time code/),
  value("an empty object", {}, "invalid-request", "", /instant .* or a time code/),
  value("an unknown scale", { at: "2026-03-01T00:00:00", scale: "CET" }, "invalid-request", "/scale", /GLONASS/),
  value("a scale and no time", { scale: "TAI" }, "invalid-request", "/at", /missing/),
  value("a time and no scale", { at: "2026-03-01T00:00:00" }, "invalid-request", "/scale", /missing/),
  value("a code without a format", { timeCode: "00" }, "invalid-request", "/format", /missing/),
  value("a format without a code", { format: cuc }, "invalid-request", "/timeCode", /missing/),
  value("an empty code", { timeCode: "", format: cuc }, "invalid-request", "/timeCode", /at least 1/),
  value("a code as a number", { timeCode: 5, format: cuc }, "invalid-request", "/timeCode", /text/),
  value(
    "an unknown format",
    { timeCode: "00", format: { format: "CUD" } },
    "invalid-request",
    "/format/format",
    /"CUC"/,
  ),
  value(
    "eight octets",
    { timeCode: "00", format: { ...cuc, coarseOctets: 8 } },
    "invalid-request",
    "/format/coarseOctets",
    /7/,
  ),
  value("a local time", "2026-03-01T00:00:00+01:00", "invalid-instant", "", /UTC, ending in Z/),
  value("no Z", "2026-03-01T00:00:00", "invalid-instant", "", /Z at the end/),
  value("a leap second that never was", "2025-12-31T23:59:60Z", "invalid-instant", "", /no leap second/),
  value("a leap second in TDB", { at: "2016-12-31T23:59:60", scale: "TDB" }, "invalid-instant", "/at", /TDB has no/),
  value(
    "UTC's leap second in GLONASS time",
    { at: "2016-12-31T23:59:60", scale: "GLONASS" },
    "invalid-instant",
    "/at",
    /02:59:60/,
  ),
  value("Z in TCB", { at: "2026-03-01T00:00:00Z", scale: "TCB" }, "invalid-instant", "/at", /no Z/),
  value("1971", { at: "1971-03-01T00:00:00", scale: "TCG" }, "instant-out-of-range", "/at", /1972/),
  value("2101", { at: "2101-03-01T00:00:00", scale: "GST" }, "instant-out-of-range", "/at", /2100/),
  value(
    "a code of 1960",
    { timeCode: "1960010100000000", format: { ...ccs, pField: false } },
    "instant-out-of-range",
    "/timeCode",
    /1972/,
  ),
  coded("0x in front", "0x1e5a5d1c368000", cuc, /0x/),
  coded("blanks", "1e 5a5d1c36 8000", cuc, /blanks/),
  coded("no hexadecimal", "1e5a5d1c36800g", cuc, /"g"/),
  coded("half an octet", "1e5a5d1c36800", cuc, /odd/),
  coded("an octet too many", "1e5a5d1c36800000", cuc, /8 octets .* takes 7/),
  coded("a P-field of other octets", "1f5a5d1c368000", cuc, /4 coarse and 3 fine/),
  coded("a P-field of level 2 without an epoch", "2e5a5d1c368000", cuc, /agency's own epoch/),
  coded("a P-field of level 1 with an epoch", "1e5a5d1c368000", { ...cuc, epoch: "1980-01-06T00:00:00Z" }, /1958/),
  coded("milliseconds beyond the day", "40448a05265c00", cds, /86399999/),
  coded("a digit over nine", "51200601152124375a", ccs, /5a/),
  coded("31 June", "512006063121243750", ccs, /1 to 30/),
  coded("code A where B is said", "2006-01-15T21:24:37.5Z", { format: "ASCII-B" }, /ASCII-B/),
  value(
    "an unreadable epoch",
    { timeCode: "00000000", format: { format: "CUC", coarseOctets: 4, fineOctets: 0, epoch: "1980" } },
    "invalid-instant",
    "/format/epoch",
    /ISO 8601/,
  ),
  coded(
    "a CDS epoch at noon",
    "000000000000",
    { format: "CDS", dayOctets: 2, subMillisecondOctets: 0, epoch: "2000-01-01T12:00:00Z" },
    /midnight/,
    "/format/epoch",
  ),
  target("an unknown scale", "UT1", "", /time scale/),
  target("a scale in lower case", "tai", "", /time scale/),
  target("a format by its name alone", "CUC", "", /time scale .* or a time code/),
  target("half a format", { format: "CUC", coarseOctets: 4 }, "/fineOctets", /missing/),
  target("four octets of days", { ...cds, dayOctets: 4 }, "/dayOctets", /2 or 3/),
  target("one octet below the millisecond", { ...cds, subMillisecondOctets: 1 }, "/subMillisecondOctets", /0, 2 or 4/),
  target("thirteen digits", { format: "ASCII-A", digits: 13 }, "/digits", /12/),
  target("an epoch for CCS", { ...ccs, epoch: moment }, "/epoch", /no such field/),
  target("an epoch before 1972", { ...cuc, epoch: "1970-01-01T00:00:00Z" }, "/epoch", /1972/, "instant-out-of-range"),
  {
    name: "an instant before the epoch of the code asked for",
    body: { values: [moment], to: [{ ...cuc, epoch: "2020-01-01T00:00:00Z" }] },
    code: "invalid-time-code",
    pointer: "/values/0",
    hint: /cannot show 2006-01-15T21:25:10/,
  },
];

describe("a bad request is refused whole, with a pointer and a sentence that helps (RFC 9457, RFC 6901)", () => {
  it.each(wrong)("$name", async ({ body, code, pointer, hint }) => {
    const response = await post(service.address, path, body);
    const problem = holdProblem("POST", path, response, code);
    const fault = problem.faults?.find((one) => one.pointer === pointer);
    expect(fault, JSON.stringify(problem.faults)).toBeDefined();
    expect(`${problem.detail} ${fault!.expected}`).toMatch(hint);
    if (code === "invalid-request") expect(documentAllows(path, body)).toBe(false);
  });

  it("every bad value is pointed to, up to a hundred", async () => {
    const values = Array.from({ length: 150 }, (_, i) => (i % 2 === 0 ? moment : { timeCode: "zz", format: cuc }));
    const problem = holdProblem(
      "POST",
      path,
      await post(service.address, path, { values, to: ["TAI"] }),
      "invalid-time-code",
    );
    expect(problem.faults).toHaveLength(75);
    expect(problem.faults![1]!.pointer).toBe("/values/3/timeCode");
    const many = { values: Array(300).fill("yesterday"), to: ["TAI"] };
    expect(holdProblem("POST", path, await post(service.address, path, many), "invalid-instant").faults).toHaveLength(
      100,
    );
  });

  it("GET is not how it is asked", async () => {
    const response = await send(service.address, path, undefined, { method: "GET" });
    holdProblem("GET", path, response, "method-not-allowed");
    expect(response.headers.allow).toContain("POST");
  });
});
