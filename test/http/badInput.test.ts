import { gzipSync } from "node:zlib";
import pino from "pino";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createHttpApp } from "../../src/http/index.ts";
import { type ProblemCode, problemCatalogue } from "../../src/problem/index.ts";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { documentAllows, holdAgainstDocument, holdProblem } from "../support/contract.ts";
import {
  altered,
  type Body,
  circleTable,
  correction,
  epoch,
  flight,
  highOrbit,
  lowOrbit,
  millisecondClock,
  moment,
  mountain,
  prediction,
} from "../support/requests.ts";
import { listenOnLoopback, type Service, send, startService } from "../support/service.ts";

/**
 * Hostile, broken and mistaken requests: each gets a 4xx of the catalogue with pointers and a sentence that helps, in
 * bounded time, and nothing of the service's insides.
 * Sources: RFC 9457 (problem details), RFC 6901 (pointers), RFC 8259 (JSON), RFC 9110 (405 with Allow, 415, 503).
 */

interface Case {
  readonly name: string;
  readonly method?: string;
  readonly path?: string;
  /** Text and bytes are sent as they stand, anything else as JSON; undefined: no body. */
  readonly body?: unknown;
  readonly headers?: Readonly<Record<string, string | null>>;
  readonly status: number;
  readonly code: ProblemCode;
  /** Pointer of a fault; undefined where no part of a body is at fault. */
  readonly pointer?: string;
  /** What detail or expectation must say to be of help. */
  readonly hint: RegExp;
}

const corrections = "/v1/corrections";
const predictions = "/v1/predicted-readings";
const megabytes = 1024 * 1024;

const good = JSON.stringify(correction());
const inText = (from: string, to: string): string => {
  if (!good.includes(from)) throw new Error(`the good request has no ${from}`);
  return good.replace(from, to);
};
const arrays = (depth: number): string => "[".repeat(depth) + "]".repeat(depth);
const objects = (depth: number): string => `${'{"a":'.repeat(depth)}1${"}".repeat(depth)}`;
const latin1 = (text: string): Buffer => Buffer.from(text, "latin1");

const json = (name: string, body: unknown, hint: RegExp, pointer = ""): Case => ({
  name,
  body,
  status: 400,
  code: "invalid-json",
  pointer,
  hint,
});

const unreadable: readonly Case[] = [
  json("an empty body", "", /JSON/),
  json("no body at all", undefined, /JSON/),
  json("white space only", " \n\t ", /JSON/),
  json("a truncated body", good.slice(0, -20), /JSON/),
  json("a trailing comma", inText('"heightOf":"geoid"', '"heightOf":"geoid",'), /JSON/),
  json("NaN", inText("2750", "NaN"), /JSON/),
  json("Infinity", inText("2750", "Infinity"), /JSON/),
  json("a comment", `/* heights in metres */${good}`, /JSON/),
  json("single quotes", good.replaceAll('"', "'"), /JSON/),
  json("two objects", good + good, /JSON/),
  json("a line feed in a string", inText('"geoid"', '"geo\nid"'), /JSON/),
  json("a leading zero", inText("2750", "02750"), /JSON/),
  json("a hexadecimal number", inText("2750", "0xABE"), /JSON/),
  json("a zero byte", "\0", /JSON/),
  json("arrays 33 deep", arrays(33), /32/, "/0".repeat(32)),
  json("objects 33 deep", objects(33), /32/, "/a".repeat(32)),
  json("arrays 10 000 deep", arrays(10_000), /32/, "/0".repeat(32)),
  json("objects 10 000 deep", objects(10_000), /32/, "/a".repeat(32)),
  json("arrays 1 000 000 deep and open", "[".repeat(1_000_000), /JSON/),
  json(
    "a field nested too deep",
    altered(correction(), "/clock/extra", JSON.parse(arrays(40))),
    /32/,
    `/clock/extra${"/0".repeat(30)}`,
  ),
  json("UTF-16", Buffer.from(good, "utf16le"), /JSON|UTF-8/),
  json("invalid UTF-8 outside a string", latin1(`\xff${good}`), /JSON|UTF-8/),
  json("invalid UTF-8 in a string", latin1(inText('"reading":3600000', '"id":"\xe9","reading":3600000')), /UTF-8/),
  json("an overlong UTF-8 sequence", latin1(inText('"reading":3600000', '"id":"\xc0\xaf","reading":3600000')), /UTF-8/),
  json("a UTF-8 surrogate", latin1(inText('"reading":3600000', '"id":"\xed\xa0\x80","reading":3600000')), /UTF-8/),
];

const surrogate = String.raw`\ud800`;

const transport: readonly Case[] = [
  ...[
    ["a form", "application/x-www-form-urlencoded"],
    ["plain text", "text/plain"],
    ["another JSON type", "application/merge-patch+json"],
    ["charset latin1", "application/json; charset=latin1"],
    ["charset UTF-16", 'application/json; charset="utf-16"'],
    ["nonsense", ";;;"],
  ].map(
    ([name, type]): Case => ({
      name: `Content-Type, ${name}`,
      body: good,
      headers: { "Content-Type": type! },
      status: 415,
      code: "unsupported-media-type",
      pointer: "",
      hint: /application\/json/,
    }),
  ),
  {
    name: "Content-Type missing",
    body: good,
    headers: { "Content-Type": null },
    status: 415,
    code: "unsupported-media-type",
    pointer: "",
    hint: /application\/json/,
  },
  {
    name: "Content-Encoding that nobody knows",
    body: good,
    headers: { "Content-Encoding": "bogus" },
    status: 415,
    code: "unsupported-media-type",
    pointer: "",
    hint: /gzip/,
  },
  { ...json("a corrupt gzip body", good, /gzip|decompress|header/), headers: { "Content-Encoding": "gzip" } },
  {
    ...json("a truncated gzip body", gzipSync(good).subarray(0, 60), /gzip|decompress|unexpected end/),
    headers: { "Content-Encoding": "gzip" },
  },
  {
    name: "a body over 16 MiB",
    body: `{"a":"${"x".repeat(16 * megabytes)}"}`,
    status: 413,
    code: "body-too-large",
    pointer: "",
    hint: /16 MiB/,
  },
  {
    name: "a small gzip body that inflates to 64 MiB",
    body: gzipSync(Buffer.alloc(64 * megabytes, " ")),
    headers: { "Content-Encoding": "gzip" },
    status: 413,
    code: "body-too-large",
    pointer: "",
    hint: /16 MiB/,
  },
];

const nowhere = (name: string, path: string, method = "GET"): Case => ({
  name,
  path,
  method,
  status: 404,
  code: "unknown-path",
  hint: /nothing at/,
});
const wrongMethod = (method: string, path: string, allowed: RegExp): Case => ({
  name: `${method} ${path}`,
  method,
  path,
  status: 405,
  code: "method-not-allowed",
  hint: allowed,
});

const addresses: readonly Case[] = [
  nowhere("the root", "/"),
  nowhere("an unknown path", "/v1/astrology"),
  nowhere("an unknown path with POST", "/v2/corrections", "POST"),
  nowhere("a path with markup", "/<script>alert(1)</script>"),
  nowhere("a path with broken percent signs", "/%ff%"),
  nowhere("a path upwards", "/..%2f..%2fetc/passwd"),
  nowhere("a very long path", `/${"a".repeat(8000)}`),
  nowhere("a name of every object", "/constructor"),
  ...["GET", "PUT", "PATCH", "DELETE"].map((method) => wrongMethod(method, corrections, /takes POST/)),
  wrongMethod("GET", predictions, /takes POST/),
  wrongMethod("POST", "/healthz", /takes GET, HEAD/),
  wrongMethod("POST", "/readyz", /takes GET, HEAD/),
  wrongMethod("DELETE", "/openapi.json", /takes GET, HEAD/),
];

const shape = (name: string, body: unknown, pointer: string, hint: RegExp, path = corrections): Case => ({
  name,
  path,
  body,
  status: 400,
  code: "invalid-request",
  pointer,
  hint,
});
/** The good request with one value changed at `pointer`; the fault is expected there. */
const bent = (name: string, pointer: string, value: unknown, hint: RegExp, fault = pointer): Case =>
  shape(name, altered(correction({ clock: { ...millisecondClock(), oscillator: {} } }), pointer, value), fault, hint);
const orbit = (name: string, pointer: string, value: unknown, hint: RegExp): Case =>
  shape(name, altered(correction({ trajectory: lowOrbit() }), pointer, value), pointer, hint);

const tick = "/clock/counter/ticksPerSecond";
const reading = "/readings/0/reading";

const shapes: readonly Case[] = [
  shape("an array", [correction()], "", /object/),
  shape("null", "null", "", /object/),
  shape("a number", "42", "", /object/),
  shape("a string", '"correction"', "", /object/),
  shape("an empty object", {}, "/clock", /missing/),
  bent("an unknown field at the top", "/reading", 5, /no such field/),
  bent("an unknown field of the clock", "/clock/drift", 5, /no such field/),
  bent("an unknown field of the counter", "/clock/counter/bits", 5, /no such field/),
  bent("an unknown field of the anchor", "/clock/anchor/sigma", 5, /no such field/),
  bent("an unknown field of the oscillator", "/clock/oscillator/sigma", 5, /no such field/),
  bent("an unknown field of the trajectory", "/trajectory/altitudeM", 5, /no such field/),
  bent("an unknown field of a reading", "/readings/0/at", epoch, /no such field/),
  bent("an unknown field with a slash and a tilde", "/a~b", 1, /no such field/, "/a~0b"),
  shape("a field called __proto__", inText("{", '{"__proto__":{"clock":1},'), "/__proto__", /no such field/),
  bent("a field called constructor", "/constructor", {}, /no such field/),
  bent("no clock", "/clock", undefined, /missing/),
  bent("no counter", "/clock/counter", undefined, /exactly one/, "/clock"),
  bent("no tick rate", tick, undefined, /missing/),
  bent("no anchor", "/clock/anchor", undefined, /missing/),
  bent("no instant of the anchor", "/clock/anchor/at", undefined, /missing/),
  bent("no reading of the anchor", "/clock/anchor/reading", undefined, /missing/),
  bent("no trajectory", "/trajectory", undefined, /missing/),
  bent("no kind of trajectory", "/trajectory/kind", undefined, /state-vector.*state-table.*surface.*track/),
  bent("an unknown kind of trajectory", "/trajectory/kind", "ellipse", /state-vector.*state-table.*surface.*track/),
  bent("no heightOf", "/trajectory/heightOf", undefined, /ellipsoid.*geoid/),
  bent("no readings", "/readings", undefined, /missing/),
  bent("no value in a reading", reading, undefined, /missing/),
  bent("a string for a number", "/trajectory/heightM", "2750", /number/),
  bent("null for a number", "/trajectory/heightM", null, /number/),
  bent("null for an object", "/clock/oscillator", null, /object/),
  bent("null for an optional field", "/unwrap", null, /after.*before.*nearest/),
  bent("an object for a list", "/readings", { 0: { reading: 1 } }, /array/),
  bent("a number for a reading's object", "/readings/0", 5, /object/),
  shape("1e400", inText("2750", "1e400"), "/trajectory/heightM", /finite|range|1\.8e308|double/),
  shape("a counter value of 1e400", inText("3600000", "1e400"), reading, /2\^53|decimal string/),
  bent("latitude 91", "/trajectory/latitudeDeg", 91, /at most 90/),
  bent("latitude -90.001", "/trajectory/latitudeDeg", -90.001, /at least -90/),
  bent("longitude 361", "/trajectory/longitudeDeg", 361, /at most 360/),
  bent("a height in orbit", "/trajectory/heightM", 400_000, /at most 100000/),
  bent("a body that is not the Earth", "/trajectory/body", "Ceres", /Earth/),
  bent("a width of no bits", "/clock/counter/widthBits", 0, /1/),
  bent("a width of 129 bits", "/clock/counter/widthBits", 129, /128/),
  bent("a width of half bits", "/clock/counter/widthBits", 31.5, /whole number/),
  bent("an unknown stand", "/clock/counter/stands", "middle", /edge.*truncated.*rounded/),
  bent("a negative sigma", "/clock/anchor/sigmaNs", -1, /at least 0/),
  bent("a counter integer of 2^53", reading, 2 ** 53, /2\^53 - 1.*string/),
  bent("a counter integer far beyond 2^53", reading, 1e21, /2\^53 - 1.*string/),
  bent("a counter integer with a fraction", reading, 1.5, /whole number/),
  bent("a counter value of null", reading, null, /whole number|integer/),
  bent("a counter value of true", reading, true, /whole number|integer/),
  ...[
    ["with a plus sign", "+5"],
    ["with two minus signs", "--5"],
    ["with a space", " 5"],
    ["with digits in groups", "1 000"],
    ["with a decimal point", "5.0"],
    ["with an exponent", "1e3"],
    ["in hexadecimal", "0x1F"],
    ["that is empty", ""],
    ["in other digits than ASCII", "\u0665"],
    ["with a line feed", "5\n"],
  ].map(([name, value]) => bent(`a counter string ${name}`, reading, value, /digits|decimal|integer/)),
  bent("a counter string of 121 digits", reading, "9".repeat(121), /120/),
  bent("ticksPerSecond 0", tick, 0, /more than 0/),
  bent("ticksPerSecond negative", tick, -32_768, /more than 0/),
  bent("ticksPerSecond a/b", tick, "a/b", /num\/den|numerator|whole numbers/),
  bent("ticksPerSecond -1/5", tick, "-1/5", /num\/den|numerator|whole numbers/),
  bent("ticksPerSecond as text", tick, "32768", /num\/den|numerator|whole numbers/),
  bent("ticksPerSecond null", tick, null, /number/),
  bent("a preset beyond limits", "/clock/oscillator/presetFractional", 0.6, /less than 0\.\d+/),
  bent("ageing that runs away", "/clock/oscillator/agingPerDay", 0.009, /less than 0\.00001/),
  orbit("a position beyond every number", "/trajectory/positionKm/0", 1e306, /at most 1000000000000/),
  orbit("a speed beyond every number", "/trajectory/velocityKmPerS/1", 1e306, /at most 1000000000000/),
  bent("a frequency offset beyond limits", "/clock/oscillator/frequencyOffset", -0.6, /more than -0\.\d+/),
  bent("ageing beyond limits", "/clock/oscillator/agingPerDay", 0.1, /less than 0\.\d+/),
  bent("a nominal frequency of zero", "/clock/oscillator/nominalHz", 0, /more than 0/),
  bent("a negative sigma of frequency", "/clock/oscillator/frequencySigma", -1e-12, /at least 0/),
  bent(
    "a covariance of two rows",
    "/clock/oscillator/covariance",
    [
      [1, 0, 0],
      [0, 1, 0],
    ],
    /3/,
  ),
  bent(
    "a covariance with a short row",
    "/clock/oscillator/covariance",
    [
      [1, 0],
      [0, 1, 0],
      [0, 0, 1],
    ],
    /3/,
    "/clock/oscillator/covariance/0",
  ),
  orbit("an unknown frame", "/trajectory/frame", "MARS2000", /GCRF.*EME2000.*ICRF.*ITRF/),
  orbit("no frame", "/trajectory/frame", undefined, /GCRF.*missing/),
  orbit("the centre Mars", "/trajectory/center", "Mars", /Earth/),
  orbit("a position of two components", "/trajectory/positionKm", [7000, 0], /3/),
  orbit("a position of four components", "/trajectory/positionKm", [7000, 0, 0, 0], /3/),
  orbit("a position as text", "/trajectory/positionKm/1", "0", /number/),
  orbit(
    "a covariance of five rows",
    "/trajectory/covarianceRtn",
    Array.from({ length: 5 }, () => [0, 0, 0, 0, 0, 0]),
    /6/,
  ),
  shape(
    "a table of one state",
    correction({ trajectory: circleTable(1, 60, true) }),
    "/trajectory/states",
    /at least 2/,
  ),
  shape(
    "a track of one point",
    correction({ trajectory: { ...flight(), points: flight().points.slice(0, 1) } }),
    "/trajectory/points",
    /at least 2/,
  ),
  bent("no readings in the list", "/readings", [], /at least 1/),
  bent(
    "10 001 readings",
    "/readings",
    Array.from({ length: 10_001 }, (_, i) => ({ reading: i })),
    /at most 10000/,
  ),
  bent("an id that is no text", "/readings/0/id", 7, /text/),
  bent("an id of 201 characters", "/readings/0/id", "x".repeat(201), /200/),
  shape("no instants in the list", prediction({ instants: [] }), "/instants", /at least 1/, predictions),
  shape(
    "10 001 instants",
    prediction({ instants: Array.from({ length: 10_001 }, () => epoch) }),
    "/instants",
    /at most 10000/,
    predictions,
  ),
  shape("readings where instants belong", { ...correction() }, "/readings", /no such field/, predictions),
  shape("unwrap in a prediction", prediction({ unwrap: "after" }), "/unwrap", /no such field/, predictions),
  bent("unknown terms", "/terms", ["velocity", "ether-wind"], /earth-monopole/, "/terms/1"),
  bent("no terms", "/terms", [], /at least 1/),
  bent("terms as text", "/terms", "velocity", /array/),
  bent("an unknown unwrap", "/unwrap", "sideways", /after.*before.*nearest/),
  bent("an unknown scale", "/scale", "CET", /UTC.*TAI.*TT.*GPS/),
  bent(
    "a UT1 - UTC of two seconds",
    "/earthOrientation",
    { ut1MinusUtcS: 2 },
    /at most 1/,
    "/earthOrientation/ut1MinusUtcS",
  ),
  bent("a pole in degrees", "/earthOrientation", { xPoleArcsec: 5 }, /at most 2/, "/earthOrientation/xPoleArcsec"),
  bent("an instant as an epoch number", "/clock/anchor/at", 1_772_323_200, /ISO 8601|Z|text/),
  bent("an instant as null", "/clock/anchor/at", null, /ISO 8601|Z|text/),
  bent(
    "an instant in an unknown scale",
    "/clock/anchor/at",
    { at: "2026-03-01T00:00:00", scale: "CET" },
    /UTC.*TAI.*TT.*GPS/,
    "/clock/anchor/at/scale",
  ),
  bent(
    "an instant without its scale",
    "/clock/anchor/at",
    { at: "2026-03-01T00:00:00" },
    /UTC.*TAI.*TT.*GPS/,
    "/clock/anchor/at/scale",
  ),
  bent(
    "an instant with a zone",
    "/clock/anchor/at",
    { at: epoch, scale: "UTC", zone: "+00" },
    /no such field/,
    "/clock/anchor/at/zone",
  ),
  bent("an instant of 61 characters", "/clock/anchor/at", "2".repeat(61), /60/),
  {
    ...shape(
      "a lone surrogate in an id",
      inText('"reading":3600000', `"id":"${surrogate}","reading":3600000`),
      "/readings/0/id",
      /Unicode|surrogate/,
    ),
  },
];

const anchorAt = "/clock/anchor/at";
const instant = (name: string, value: unknown, hint: RegExp, code: ProblemCode = "invalid-instant"): Case => ({
  name: `instant, ${name}`,
  body: altered(correction(), anchorAt, value),
  status: problemCatalogue[code].status,
  code,
  pointer: typeof value === "string" ? anchorAt : `${anchorAt}/at`,
  hint,
});
const inScale = (scale: string, at: string) => ({ at, scale });
const beyond = "instant-out-of-range";

const instants: readonly Case[] = [
  instant("without Z", "2026-03-01T00:00:00", /Z at the end/),
  instant("with an offset", "2026-03-01T01:00:00+01:00", /UTC, ending in Z.*offset/),
  instant("with an offset of zero", "2026-03-01T00:00:00+00:00", /UTC, ending in Z.*offset/),
  instant("in lower case", "2026-03-01t00:00:00z", /capital/),
  instant("with 13 decimals", "2026-03-01T00:00:00.1234567890123Z", /12 decimals/),
  instant("with a point and no decimals", "2026-03-01T00:00:00.Z", /decimals/),
  instant("a leap second that never was", "2026-02-28T23:59:60Z", /no leap second/),
  instant("a leap second at another hour", "2016-12-31T22:59:60Z", /no leap second/),
  instant("second 61", "2016-12-31T23:59:61Z", /second from 00 to/),
  instant("24:00:00", "2026-03-01T24:00:00Z", /hour from 00 to 23/),
  instant("minute 60", "2026-03-01T00:60:00Z", /minute from 00 to 59/),
  instant("30 February", "2026-02-30T00:00:00Z", /01 to 28/),
  instant("29 February of a common year", "2100-02-29T00:00:00Z", /01 to 28/),
  instant("day 0", "2026-03-00T00:00:00Z", /01 to 31/),
  instant("day of year 366 in a common year", "2026-366T00:00:00Z", /001 to 365/),
  instant("day of year 0", "2026-000T00:00:00Z", /001 to 365/),
  instant("month 13", "2026-13-01T00:00:00Z", /month from 01 to 12/),
  instant("month 0", "2026-00-01T00:00:00Z", /month from 01 to 12/),
  instant("with a comma", "2026-03-01T00:00:00,5Z", /decimal point/),
  instant("with a space", "2026-03-01 00:00:00Z", /letter "T"/),
  instant("a date only", "2026-03-01", /time of day/),
  instant("without seconds", "2026-03-01T12:00Z", /seconds as well/),
  instant("local time in words", "1 March 2026 at noon", /ISO 8601/),
  instant("now", "now", /ISO 8601/),
  instant("empty", "", /ISO 8601/),
  instant("in basic format", "20260301T000000Z", /ISO 8601/),
  instant("of a five-digit year", "+12026-03-01T00:00:00Z", /ISO 8601/),
  instant("with blanks around", ` ${epoch} `, /ISO 8601/),
  instant("with other digits", "\u0662026-03-01T00:00:00Z", /ISO 8601/),
  instant("with Z in TAI", inScale("TAI", "2026-03-01T00:00:37Z"), /no Z.*TAI/),
  instant("without Z in UTC, in an object", inScale("UTC", "2026-03-01T00:00:37"), /Z at the end/),
  instant("second 60 in TT", inScale("TT", "2016-12-31T23:59:60"), /no leap seconds/),
  instant("1971", "1971-12-31T23:59:59Z", /1972-01-01 to 2100-12-31/, beyond),
  instant("2101", "2101-01-01T00:00:00Z", /1972-01-01 to 2100-12-31/, beyond),
  instant("year 0000", "0000-01-01T00:00:00Z", /1972-01-01 to 2100-12-31/, beyond),
  // TAI - UTC was 10 s then (IERS, leap-seconds.list): this is 1971-12-31T23:59:50 UTC.
  instant("TAI before UTC began", inScale("TAI", "1972-01-01T00:00:00"), /1972-01-01/, beyond),
  {
    name: "instant, of a state vector",
    body: altered(correction({ trajectory: lowOrbit() }), "/trajectory/epoch", "yesterday"),
    status: 400,
    code: "invalid-instant",
    pointer: "/trajectory/epoch",
    hint: /ISO 8601/,
  },
  {
    name: "instant, of a state in a table",
    body: altered(correction({ trajectory: circleTable(9, 60, true) }), "/trajectory/states/4/epoch", "2026-03-01"),
    status: 400,
    code: "invalid-instant",
    pointer: "/trajectory/states/4/epoch",
    hint: /time of day/,
  },
  {
    name: "instant, of a point of a track",
    body: altered(correction({ trajectory: flight() }), "/trajectory/points/1/at", {
      at: "2026-13-01T00:00:00",
      scale: "GPS",
    }),
    status: 400,
    code: "invalid-instant",
    pointer: "/trajectory/points/1/at/at",
    hint: /month/,
  },
  {
    name: "instant, near",
    body: correction({ readings: [{ reading: 5 }, { reading: 6, near: "about noon" }] }),
    status: 400,
    code: "invalid-instant",
    pointer: "/readings/1/near",
    hint: /ISO 8601/,
  },
  {
    name: "instant, to predict for",
    path: predictions,
    body: prediction({ instants: [moment(1), "2026-03-01T00:00:00"] }),
    status: 400,
    code: "invalid-instant",
    pointer: "/instants/1",
    hint: /Z at the end/,
  },
];

const senseless =
  (code: ProblemCode) =>
  (name: string, body: unknown, pointer: string, hint: RegExp, path = corrections): Case => ({
    name,
    path,
    body,
    status: 422,
    code,
    pointer,
    hint,
  });
const clockCase = senseless("impossible-clock");
const widthCase = senseless("reading-beyond-width");
const stateCase = senseless("impossible-state");
const tableCase = senseless("impossible-table");
const spanCase = senseless("outside-span");
const ambiguous = senseless("ambiguous-rollover");

const withClock = (pointer: string, value: unknown, changes: Body = {}): Body =>
  altered(correction({ clock: { ...millisecondClock(), oscillator: {} }, ...changes }), pointer, value);
const covariance = "/clock/oscillator/covariance";

const clocks: readonly Case[] = [
  clockCase("ticksPerSecond 1/0", withClock(tick, "1/0"), tick, /above zero/),
  clockCase("ticksPerSecond 0/5", withClock(tick, "0/5"), tick, /above zero/),
  clockCase("ticksPerSecond 1e13", withClock(tick, 1e13), tick, /1e-6 to 1e12/),
  clockCase("ticksPerSecond 1e-7", withClock(tick, 1e-7), tick, /1e-6 to 1e12/),
  clockCase("ticksPerSecond 5e-324", withClock(tick, 5e-324), tick, /1e-6 to 1e12/),
  clockCase("ticksPerSecond of 59 nines over 1", withClock(tick, `${"9".repeat(59)}/1`), tick, /1e-6 to 1e12/),
  clockCase(
    "a covariance that is not symmetric",
    withClock(covariance, [
      [1, 0.1, 0],
      [0.2, 1, 0],
      [0, 0, 1],
    ]),
    `${covariance}/0/1`,
    /symmetric|diagonal/,
  ),
  clockCase(
    "a negative variance",
    withClock(covariance, [
      [1, 0, 0],
      [0, -1, 0],
      [0, 0, 1],
    ]),
    `${covariance}/1/1`,
    /zero or more/,
  ),
  clockCase(
    "a correlation beyond 1",
    withClock(covariance, [
      [1, 2, 0],
      [2, 1, 0],
      [0, 0, 1],
    ]),
    `${covariance}/0/1`,
    /correlation beyond 1/,
  ),
  clockCase(
    "a covariance with a negative eigenvalue",
    // Pairwise sound, yet x = (1, -1, -1) has x C x = 3 - 2 * 3 * 0.9 < 0.
    withClock(covariance, [
      [1, 0.9, 0.9],
      [0.9, 1, -0.9],
      [0.9, -0.9, 1],
    ]),
    covariance,
    /positive|semidefinite|eigenvalue/,
  ),
  clockCase(
    "both covariance and sigmas",
    withClock("/clock/oscillator", {
      frequencySigma: 1e-12,
      covariance: [
        [1, 0, 0],
        [0, 1, 0],
        [0, 0, 1],
      ],
    }),
    covariance,
    /either covariance/,
  ),
  widthCase("a reading beyond the width", withClock("/clock/counter/widthBits", 16), reading, /2\^16 - 1 = 65535/),
  widthCase(
    "a negative reading with a width",
    withClock("/clock/counter/widthBits", 16, { readings: [{ reading: -1 }] }),
    reading,
    /0 to 2\^16/,
  ),
  widthCase(
    "an anchor beyond the width",
    withClock("/clock/counter/widthBits", 16, {
      clock: { ...millisecondClock(), anchor: { reading: 65_536, at: epoch } },
    }),
    "/clock/anchor/reading",
    /65535/,
  ),
  widthCase(
    "a negative anchor with a width",
    withClock("/clock/counter/widthBits", 16, {
      clock: { ...millisecondClock(), anchor: { reading: "-3", at: epoch } },
    }),
    "/clock/anchor/reading",
    /65535/,
  ),
  widthCase(
    "a reading of 128 bits and one",
    withClock("/clock/counter/widthBits", 128, { readings: [{ reading: String(2n ** 128n) }] }),
    reading,
    /340282366920938463463374607431768211455/,
  ),
  ambiguous(
    "a rollover with two meanings",
    withClock("/clock/counter/widthBits", 24, { readings: [{ reading: 1000 }] }),
    reading,
    // 2^24 ms = 16 777.216 s = 04:39:37.216.
    /2026-03-01T00:00:01\.0{12}Z or .*(?:2026-03-01T04:39:38\.216|2026-02-28T19:20:23\.784)/,
  ),
  ambiguous(
    "a rollover with many meanings, all of them after the anchor",
    // 2^20 ms = 1048.576 s; the flight lasts 14 400 s. Turn 0 lies before it, turns 1 to 13 inside.
    correction({
      clock: { counter: { ticksPerSecond: 1000, widthBits: 20 }, anchor: { reading: 1000, at: epoch } },
      trajectory: flight(),
      readings: [{ reading: 900 }],
    }),
    reading,
    /2026-03-01T00:17:28\.476/,
  ),
  ambiguous(
    "a rollover with two meanings far from the anchor's side",
    // An anchor in the middle of the span and a turn of a third of it.
    correction({
      clock: { counter: { ticksPerSecond: 1000, widthBits: 22 }, anchor: { reading: 0, at: moment(7200) } },
      trajectory: flight(),
      readings: [{ reading: 2_097_152 }],
    }),
    reading,
    /2026-03-01T0[0-3]:/,
  ),
  spanCase(
    "a reading that falls into no turn of the span",
    withClock("/clock/counter/widthBits", 32, { trajectory: flight(), readings: [{ reading: 2 ** 31 }] }),
    reading,
    /2026-03-01T00:00:00.*2026-03-01T04:00:00/,
  ),
  spanCase(
    "near outside the span",
    withClock("/clock/counter/widthBits", 24, {
      trajectory: flight(),
      readings: [{ reading: 1000, near: moment(20_000) }],
    }),
    "/readings/0/near",
    /2026-03-01T00:00:00.*2026-03-01T04:00:00/,
  ),
];

const withOrbit = (pointer: string, value: unknown): Body =>
  altered(correction({ trajectory: lowOrbit() }), pointer, value);
const position = "/trajectory/positionKm";
const velocity = "/trajectory/velocityKmPerS";
const rtn = "/trajectory/covarianceRtn";
const unit = (changes: readonly (readonly [number, number, number])[]): number[][] => {
  const matrix = Array.from({ length: 6 }, (_, i) => Array.from({ length: 6 }, (_, j): number => (i === j ? 1 : 0)));
  for (const [i, j, value] of changes) matrix[i]![j] = value;
  return matrix;
};
const table = (pointer: string, value: unknown, count = 30): Body =>
  altered(correction({ trajectory: circleTable(count, 60, true) }), pointer, value);
const bare = (count: number): Body => correction({ trajectory: circleTable(count, 60, false) });
const track = (pointer: string, value: unknown): Body => altered(correction({ trajectory: flight() }), pointer, value);

const trajectories: readonly Case[] = [
  stateCase("the speed of light", withOrbit(velocity, [0, 299_792.458, 0]), velocity, /below/),
  stateCase("m/s instead of km/s", withOrbit(velocity, [0, 4900, 5_800_000]), velocity, /below that of light/),
  stateCase("a position inside the Earth", withOrbit(position, [3000, 0, 0]), position, /inside the Earth/),
  stateCase("thousands of kilometres", withOrbit(position, [6.9, 0, 0]), position, /inside the Earth/),
  stateCase("metres instead of km", withOrbit(position, [6_901_000, 0, 0]), position, /[Mm]etres/),
  stateCase("a zero vector", withOrbit(position, [0, 0, 0]), position, /inside the Earth/),
  stateCase("a state about the Moon", withOrbit("/trajectory/center", "Moon"), "/trajectory/center", /state-table/),
  stateCase(
    "Earth-fixed axes about the Moon",
    altered(table("/trajectory/center", "Moon"), "/trajectory/frame", "ITRF"),
    "/trajectory/frame",
    /ICRF/,
  ),
  stateCase("a path that falls into the Earth", withOrbit(velocity, [0, 0, 0]), velocity, /inside of the Earth/),
  stateCase("a path that leaves the Earth", withOrbit(velocity, [0, 5000, 0]), velocity, /1 500 000 km|surroundings/),
  stateCase(
    "a state in a table inside the Earth",
    table("/trajectory/states/7/positionKm", [100, 0, 0]),
    "/trajectory/states/7/positionKm",
    /inside the Earth/,
  ),
  stateCase(
    "a state in a table at twice the speed of light",
    table("/trajectory/states/7/velocityKmPerS", [600_000, 0, 0]),
    "/trajectory/states/7/velocityKmPerS",
    /light/,
  ),
  stateCase(
    "a covariance that is not symmetric",
    withOrbit(rtn, unit([[0, 1, 0.5]])),
    `${rtn}/0/1`,
    /symmetric|diagonal/,
  ),
  stateCase("a negative variance", withOrbit(rtn, unit([[3, 3, -1]])), `${rtn}/3/3`, /zero or more/),
  stateCase(
    "a correlation beyond 1",
    withOrbit(
      rtn,
      unit([
        [4, 5, 2],
        [5, 4, 2],
      ]),
    ),
    `${rtn}/4/5`,
    /correlation beyond 1/,
  ),
  stateCase(
    "a covariance with a negative eigenvalue",
    withOrbit(
      rtn,
      unit([
        [0, 1, 0.9],
        [1, 0, 0.9],
        [0, 2, 0.9],
        [2, 0, 0.9],
        [1, 2, -0.9],
        [2, 1, -0.9],
      ]),
    ),
    rtn,
    /positive|semidefinite|eigenvalue/,
  ),
  stateCase(
    "both covariance and sigmas",
    altered(withOrbit(rtn, unit([])), "/trajectory/positionSigmaKm", 1),
    rtn,
    /either covarianceRtn/,
  ),
  tableCase(
    "states out of order",
    table("/trajectory/states/5/epoch", moment(10_000)),
    "/trajectory/states/6/epoch",
    /rise/,
  ),
  tableCase(
    "two states of one epoch",
    table("/trajectory/states/5/epoch", moment(240)),
    "/trajectory/states/5/epoch",
    /same instant/,
  ),
  tableCase(
    "one state without a velocity",
    table("/trajectory/states/5/velocityKmPerS", undefined),
    "/trajectory/states/5",
    /velocity/,
  ),
  tableCase(
    "one state with a velocity",
    altered(bare(9), "/trajectory/states/5/velocityKmPerS", [0, 1, 2]),
    "/trajectory/states/5",
    /velocity/,
  ),
  tableCase("four states without velocities", bare(4), "/trajectory/states", /at least 5/),
  tableCase(
    "two states between which the path would cross the Earth's centre",
    correction({
      trajectory: {
        kind: "state-table",
        frame: "GCRF",
        states: [
          { epoch, positionKm: [9200, 0, 0], velocityKmPerS: [0, 6.5, 0] },
          { epoch: "2027-03-01T00:00:00Z", positionKm: [-9200, 0, 0], velocityKmPerS: [0, 6.5, 0] },
        ],
      },
      readings: [{ reading: 100_000_000 }],
    }),
    "/trajectory/states",
    /closer|coarse|apart|inside the Earth/,
  ),
  tableCase(
    "two states a millisecond and 18 000 km apart",
    altered(
      altered(
        table("/trajectory/states/1/epoch", "2026-03-01T00:00:00.001Z", 2),
        "/trajectory/states/1/positionKm",
        [-9200, 0, 0],
      ),
      "/readings",
      [{ reading: 0 }, { reading: 1 }],
    ),
    "/trajectory/states",
    /closer|light/,
  ),
  tableCase("points out of order", track("/trajectory/points/1/at", moment(99_999)), "/trajectory/points/2/at", /rise/),
  tableCase(
    "two points of one instant",
    track("/trajectory/points/1/at", epoch),
    "/trajectory/points/1/at",
    /same instant/,
  ),
  tableCase(
    "antipodes",
    correction({
      trajectory: {
        ...flight(),
        points: [
          { at: epoch, latitudeDeg: 0, longitudeDeg: 0, heightM: 0 },
          { at: moment(80_000), latitudeDeg: 0, longitudeDeg: 180, heightM: 0 },
        ],
      },
    }),
    "/trajectory/points/1",
    /antipodes/,
  ),
  tableCase(
    "a track that is too fast",
    track("/trajectory/points/1/at", moment(60)),
    "/trajectory/points/1",
    /12 km\/s/,
  ),
  tableCase(
    "a track that climbs too fast",
    {
      ...track("/trajectory/points", [
        { at: epoch, latitudeDeg: 0, longitudeDeg: 0, heightM: 0 },
        { at: "2026-03-01T00:00:00.001Z", latitudeDeg: 0, longitudeDeg: 0, heightM: 90_000 },
      ]),
      readings: [{ reading: 0 }],
    },
    "/trajectory/points/1",
    /km\/s/,
  ),
];

/** For each kind: what lies outside and what the span is. */
const spans: readonly {
  kind: string;
  trajectory: Body;
  reading: number | string;
  span: RegExp;
  anchor: string;
  late: string;
}[] = [
  {
    kind: "state-vector",
    trajectory: highOrbit(),
    reading: 401 * 86_400_000,
    // The epoch and 400 days either way.
    span: /2025-01-25T00:00:00\.0+Z to 2027-04-05T00:00:00\.0+Z/,
    anchor: "2024-12-01T00:00:00Z",
    late: "2027-04-05T00:00:00.000001Z",
  },
  {
    kind: "state-table",
    trajectory: circleTable(30, 60, true),
    reading: 1_740_001,
    span: /2026-03-01T00:00:00\.0+Z to 2026-03-01T00:29:00\.0+Z/,
    anchor: "2026-02-28T23:59:59.999999999999Z",
    late: "2026-03-01T00:29:00.000000000001Z",
  },
  {
    kind: "track",
    trajectory: flight(),
    reading: -1,
    span: /2026-03-01T00:00:00\.0+Z to 2026-03-01T04:00:00\.0+Z/,
    anchor: moment(14_401),
    late: moment(14_400.001),
  },
  {
    kind: "surface",
    trajectory: mountain(),
    reading: "9".repeat(120),
    span: /1972-01-01.*2100-12-31/,
    anchor: "",
    late: "",
  },
];

const outside: readonly Case[] = spans.flatMap(({ kind, trajectory, reading: value, span, anchor, late }) => [
  spanCase(
    `a reading outside a ${kind}`,
    correction({ trajectory, readings: [{ reading: 0 }, { reading: value }] }),
    "/readings/1/reading",
    span,
  ),
  ...(anchor === ""
    ? []
    : [
        spanCase(`an anchor outside a ${kind}`, altered(correction({ trajectory }), anchorAt, anchor), anchorAt, span),
        spanCase(
          `an instant outside a ${kind}`,
          prediction({ trajectory, instants: [epoch, late] }),
          "/instants/1",
          span,
          predictions,
        ),
      ]),
]);

/** The table of conversions.test.ts has the rest. */
const conversions: readonly Case[] = [
  {
    name: "time code, half an octet",
    path: "/v1/time-conversions",
    body: { values: [{ timeCode: "1e5", format: { format: "CUC", coarseOctets: 1, fineOctets: 0 } }], to: ["UTC"] },
    status: 400,
    code: "invalid-time-code",
    pointer: "/values/0/timeCode",
    hint: /two an octet/,
  },
];

const cases: readonly Case[] = [
  ...unreadable,
  ...transport,
  ...addresses,
  ...shapes,
  ...instants,
  ...clocks,
  ...trajectories,
  ...outside,
  ...conversions,
];

/** Longest that a refusal may take, ms; a sixty-fourth of it is usual. */
const patience = 8_000;

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

describe("a bad request is refused with a sentence that helps", () => {
  it.each(cases)(
    "$name",
    async ({ method = "POST", path = corrections, body, headers, status, code, pointer, hint }) => {
      const withType =
        body === undefined && method === "POST" ? { "Content-Type": "application/json", ...headers } : headers;
      const response = await send(service.address, path, body, { method, headers: withType ?? {} });
      expect(response.status, response.text.slice(0, 500)).toBe(status);
      const problem = holdProblem(method, path, response, code);
      const faults = problem.faults ?? [];
      if (pointer === undefined) expect(faults).toEqual([]);
      else expect(faults.map((fault) => fault.pointer)).toContain(pointer);
      for (const { expected } of faults) expect(expected).toMatch(/[a-z0-9]{2}/i);
      const sentences = [problem.detail, ...faults.map(({ expected }) => expected)].join("\n");
      expect(sentences).toMatch(hint);
      expect(sentences).not.toMatch(/undefined|\[object|Infinity km|NaN km|\^-\?|\\d/);
      expect(response.text.length).toBeLessThan(40_000);
      if (code === "method-not-allowed") {
        expect(response.headers.allow).toBe(path.startsWith("/v1/") ? "POST" : "GET, HEAD");
      }
    },
    patience,
  );

  it("a service that has seen all of this still works", async () => {
    const response = await send(service.address, corrections, correction());
    expect(response.status).toBe(200);
    holdAgainstDocument("POST", corrections, response);
  });

  it("at least sixty cases, no two alike", () => {
    expect(cases.length).toBeGreaterThanOrEqual(60);
    const keys = cases.map(({ name, code }) => `${code}: ${name}`);
    expect(keys.filter((key, i) => keys.indexOf(key) !== i)).toEqual([]);
  });
});

describe("the interface document refuses what the service finds misshapen", () => {
  const misshapen = shapes.filter(
    // What JSON Schema does not tell: numbers that overflow only when parsed, characters, what the clock's face reads.
    ({ name }) => !/1e400|surrogate|a counter string (with|in|that) |no counter|no heightOf/.test(name),
  );
  it.each(misshapen)("$name", ({ path = corrections, body }) => {
    expect(documentAllows(path, typeof body === "string" ? JSON.parse(body) : body)).toBe(false);
  });
});

describe("several bad items", () => {
  const pointersOf = (response: { text: string }): string[] =>
    JSON.parse(response.text).faults.map(({ pointer }: { pointer: string }) => pointer);

  it("misshapen readings: a pointer each", async () => {
    const body = correction({ readings: [{ reading: [] }, { reading: 1 }, { reading: 2.5 }, {}] });
    const response = await send(service.address, corrections, body);
    holdProblem("POST", corrections, response, "invalid-request");
    expect(pointersOf(response)).toEqual(["/readings/0/reading", "/readings/2/reading", "/readings/3/reading"]);
  });

  it("faults in different parts: all of them at once", async () => {
    let body = altered(correction(), tick, 0);
    body = altered(body, "/trajectory/latitudeDeg", 95);
    body = altered(body, "/scale", "CET");
    const response = await send(service.address, corrections, body);
    const problem = holdProblem("POST", corrections, response, "invalid-request");
    expect(pointersOf(response).sort()).toEqual([tick, "/scale", "/trajectory/latitudeDeg"]);
    expect(problem.detail).toContain("3 faults");
  });

  it("readings outside the span: a pointer each, and the span", async () => {
    const body = correction({
      trajectory: flight(),
      readings: [-5, 1000, 20_000_000, 2000].map((value) => ({ reading: value })),
    });
    const response = await send(service.address, corrections, body);
    const problem = holdProblem("POST", corrections, response, "outside-span");
    expect(pointersOf(response)).toEqual(["/readings/0/reading", "/readings/2/reading"]);
    expect(problem.detail).toContain("2026-03-01T04:00:00");
  });

  it("unreadable instants: a pointer each", async () => {
    const body = prediction({ instants: ["2026-02-30T00:00:00Z", epoch, "2026-03-01"] });
    const response = await send(service.address, predictions, body);
    holdProblem("POST", predictions, response, "invalid-instant");
    expect(pointersOf(response)).toEqual(["/instants/0", "/instants/2"]);
  });

  it.each([
    { what: "misshapen", code: "invalid-request" as const, trajectory: mountain(), value: (i: number) => `${i}.5` },
    { what: "out of the span", code: "outside-span" as const, trajectory: flight(), value: (i: number) => -1 - i },
  ])("10 000 $what: the first hundred, in order", async ({ code, trajectory, value }) => {
    const readings = Array.from({ length: 10_000 }, (_, i) => ({ reading: value(i) }));
    const response = await send(service.address, corrections, correction({ trajectory, readings }));
    holdProblem("POST", corrections, response, code);
    expect(pointersOf(response)).toEqual(Array.from({ length: 100 }, (_, i) => `/readings/${i}/reading`));
  });

  it("one bad reading among good ones refuses the request: all or nothing", async () => {
    const readings = [{ reading: 1 }, { reading: "1.0" }, { reading: 3 }];
    const response = await send(service.address, corrections, correction({ readings }));
    holdProblem("POST", corrections, response, "invalid-request");
    expect(JSON.parse(response.text)).not.toHaveProperty("results");
  });
});

/** Numbers at the edge of what a double holds: refused, or answered as documented; null or "1e+30" in an answer is neither. */
describe("enormous numbers never spoil an answer", () => {
  const rows: readonly [string, string, Body][] = [
    ["sigma of the anchor", corrections, withClock("/clock/anchor/sigmaNs", 1e308)],
    ["offset", corrections, withClock("/clock/oscillator/offsetNs", 1e308)],
    [
      "offset, predicted",
      predictions,
      altered(prediction({ clock: { ...millisecondClock(), oscillator: {} } }), "/clock/oscillator/offsetNs", 1e31),
    ],
    ["sigma of frequency", corrections, withClock("/clock/oscillator/frequencySigma", 1e308)],
    ["sigma of ageing", corrections, withClock("/clock/oscillator/agingSigmaPerDay", 1e308)],
    [
      "covariance",
      corrections,
      withClock(covariance, [
        [1e308, 0, 0],
        [0, 1e308, 0],
        [0, 0, 1e308],
      ]),
    ],
    ["sigma of position", corrections, withOrbit("/trajectory/positionSigmaKm", 1e307)],
    ["sigma of velocity", corrections, withOrbit("/trajectory/velocitySigmaKmPerS", 1e307)],
    ["sigma of the axis", corrections, withOrbit("/trajectory/semiMajorAxisSigmaKm", 1e307)],
    [
      "covariance of the state",
      corrections,
      withOrbit(
        rtn,
        unit([
          [0, 0, 1e307],
          [3, 3, 1e307],
        ]),
      ),
    ],
  ];
  it.each(rows)("%s", async (_name, path, body) => {
    const response = await send(service.address, path, body);
    expect([200, 400, 422]).toContain(response.status);
    holdAgainstDocument("POST", path, response);
    expect(response.text).not.toMatch(/"\d+e\+/);
  });
});

describe("failures that are not the request's", () => {
  it("internal-error: problem details with the request id, the reason only in the log", async () => {
    const lines: string[] = [];
    const app = createHttpApp({
      bench: {
        leapSeconds: defaultLeapSeconds,
        version: "0.0.0",
        properTime: () => {
          throw new Error("the gearbox is full of sand");
        },
      },
      logger: pino({ level: "error" }, { write: (line: string) => void lines.push(line) }),
      isStopping: () => false,
    });
    const listener = await listenOnLoopback(app);
    try {
      const response = await send(listener.address, corrections, correction(), {
        headers: { "X-Request-Id": "sand-1" },
      });
      expect(response.status).toBe(500);
      const problem = holdProblem("POST", corrections, response, "internal-error");
      expect(problem.instance).toBe("sand-1");
      expect(response.text).not.toMatch(/gearbox|sand is|Error:/);
      expect(lines.join("")).toContain("the gearbox is full of sand");
      expect(lines.every((line) => JSON.parse(line).req.id === "sand-1")).toBe(true);
    } finally {
      await listener.close();
    }
  });

  it("unavailable: a stopping service begins no new work, says when to come back, and is still alive", async () => {
    const stopping = await startService();
    try {
      stopping.stop();
      for (const [method, path, body] of [
        ["POST", corrections, correction()],
        ["POST", predictions, prediction()],
        ["GET", "/readyz", undefined],
      ] as const) {
        const response = await send(stopping.address, path, body, { method });
        holdProblem(method, path, response, "unavailable");
        expect(response.headers["retry-after"]).toMatch(/^[1-9]\d*$/);
      }
      expect((await send(stopping.address, "/healthz", undefined, { method: "GET" })).status).toBe(200);
    } finally {
      await stopping.close();
    }
  });

  it("every code of the catalogue is produced by a case here or in the file of its call", () => {
    // Calls with test files of their own: budgets, conversions, messages, clock events.
    const elsewhere = [
      "horizon-too-long",
      "invalid-time-code",
      "invalid-message",
      "unusable-message",
      "ambiguous-reading",
      "reading-not-shown",
      "anchor-needed",
    ].filter((code) => code in problemCatalogue);
    const produced = new Set<string>([...cases.map(({ code }) => code), "internal-error", "unavailable", ...elsewhere]);
    expect([...produced].sort()).toEqual(Object.keys(problemCatalogue).sort());
    for (const { code, status } of cases) expect(status).toBe(problemCatalogue[code].status);
  });
});
