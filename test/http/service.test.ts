import { createHash } from "node:crypto";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { LeapSecondTable } from "../../src/time/index.ts";
import { holdGoodAnswer } from "../support/contract.ts";
import {
  altered,
  type Body,
  circleTable,
  correction,
  epoch,
  flight,
  lowOrbit,
  millisecondClock,
  moment,
  mountain,
  prediction,
} from "../support/requests.ts";
import { post, type Service, send, startService } from "../support/service.ts";

/** The service as a whole: the same request, the same bytes; headers; leap-second tables; loads within its limits. */

const corrections = "/v1/corrections";
const predictions = "/v1/predicted-readings";

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

/** A service of its own for one piece of work. */
async function alone<T>(work: (service: Service) => Promise<T>, leapSeconds?: LeapSecondTable): Promise<T> {
  const own = await startService(leapSeconds === undefined ? {} : { leapSeconds });
  try {
    return await work(own);
  } finally {
    await own.close();
  }
}

async function bytesOf({ address }: Service, path: string, body: unknown): Promise<string> {
  const response = await post(address, path, body);
  expect(response.status, response.text.slice(0, 500)).toBe(200);
  return response.text;
}

describe("the request id", () => {
  const idOf = async (given: string | null): Promise<string> => {
    const headers = given === null ? {} : { "X-Request-Id": given };
    const response = await send(service.address, "/healthz", undefined, { method: "GET", headers });
    return response.headers["x-request-id"]!;
  };
  const generated = /^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/;

  it("that was given comes back", async () => {
    expect(await idOf("pass-417.b_2")).toBe("pass-417.b_2");
    expect(await idOf("a".repeat(64))).toBe("a".repeat(64));
  });

  it("is made when there is none, another each time (UUID version 4, RFC 9562)", async () => {
    const [one, two] = [await idOf(null), await idOf(null)];
    expect(one).toMatch(generated);
    expect(two).toMatch(generated);
    expect(one).not.toBe(two);
  });

  it.each([
    ["too long", "a".repeat(65)],
    ["markup", "<b>id</b>"],
    ["a quote that would end a log line", '","level":"fatal'],
    ["empty", ""],
    ["blanks", "two words"],
    ["a template", "%{x}"],
    ["a path", "../../etc/passwd"],
  ])("that is hostile is replaced: %s", async (_name, given) => {
    expect(await idOf(given)).toMatch(generated);
  });

  it("stands in a problem as its instance", async () => {
    const response = await send(service.address, corrections, "{", { headers: { "X-Request-Id": "mine" } });
    expect(JSON.parse(response.text).instance).toBe("mine");
  });
});

describe("headers", () => {
  it("say no more than they must and forbid what a browser could be talked into", async () => {
    for (const response of [
      await post(service.address, corrections, correction()),
      await post(service.address, corrections, {}),
      await send(service.address, "/healthz", undefined, { method: "GET" }),
      await send(service.address, "/nothing", undefined, { method: "GET" }),
    ]) {
      const { headers } = response;
      expect(headers["x-content-type-options"]).toBe("nosniff");
      expect(headers["content-security-policy"]).toContain("default-src 'self'");
      expect(headers["content-security-policy"]).not.toContain("upgrade-insecure-requests");
      expect(headers["x-frame-options"]).toBe("SAMEORIGIN");
      expect(headers["referrer-policy"]).toBe("no-referrer");
      expect(headers).not.toHaveProperty("x-powered-by");
      expect(headers).not.toHaveProperty("strict-transport-security");
      expect(headers).not.toHaveProperty("access-control-allow-origin");
    }
  });

  it("no ETag on the answer of a POST, and a condition does not turn it into 304", async () => {
    const first = await post(service.address, corrections, correction());
    expect(first.headers).not.toHaveProperty("etag");
    const again = await send(service.address, corrections, correction(), { headers: { "If-None-Match": "*" } });
    expect(again.status).toBe(200);
    expect(again.text).toBe(first.text);
  });

  it("JSON is declared as UTF-8 and its length is right", async () => {
    const body = correction({ readings: [{ id: "Überflug \u{1F6F0} 7", reading: 1 }] });
    const response = await post(service.address, corrections, body);
    expect(response.headers["content-type"]).toMatch(/^application\/json; charset=utf-8$/);
    expect(Number(response.headers["content-length"])).toBe(Buffer.byteLength(response.text));
    expect(JSON.parse(response.text).results[0].id).toBe("Überflug \u{1F6F0} 7");
  });

  it("HEAD on /healthz answers without a body", async () => {
    const response = await send(service.address, "/healthz", undefined, { method: "HEAD" });
    expect(response.status).toBe(200);
    expect(response.text ?? "").toBe("");
    expect(Number(response.headers["content-length"])).toBeGreaterThan(0);
  });
});

describe("ways of sending", () => {
  it.each(["application/json", "application/json; charset=utf-8", 'Application/JSON;Charset="UTF-8"'])(
    "Content-Type %s",
    async (type) => {
      const response = await send(service.address, corrections, correction(), { headers: { "Content-Type": type } });
      expect(response.status).toBe(200);
    },
  );

  it("a gzip body gives the same answer", async () => {
    const body = correction();
    const plain = await bytesOf(service, corrections, body);
    const response = await send(service.address, corrections, gzipSync(JSON.stringify(body)), {
      headers: { "Content-Encoding": "gzip" },
    });
    expect(response.status).toBe(200);
    expect(response.text).toBe(plain);
  });

  it("white space and escapes in the JSON change nothing", async () => {
    const body = correction({ readings: [{ id: "é", reading: 3_600_000 }] });
    const plain = await bytesOf(service, corrections, body);
    const spaced = JSON.stringify(body, null, 4).replace("é", String.raw`\u00e9`).replace("3600000", "3600000.0");
    expect((await send(service.address, corrections, spaced)).text).toBe(plain);
  });

  it("a body just below the limit of 16 MiB is read", async () => {
    const text = JSON.stringify(correction());
    const padded = text + " ".repeat(16 * 1024 * 1024 - text.length);
    expect((await send(service.address, corrections, padded)).status).toBe(200);
  });
});

/** Requests of every kind of trajectory that take in a good deal of their span. */
const various: Readonly<Record<string, Body>> = {
  "state-vector": correction({
    trajectory: { ...lowOrbit(), positionSigmaKm: 0.01 },
    readings: [{ id: "a", reading: 5_000_000 }, { reading: -7_000_000 }, { reading: "40000000" }],
  }),
  "state-vector, eccentric": correction({
    trajectory: { ...lowOrbit(), velocityKmPerS: [0, 6.1, 7.4] },
    readings: [{ reading: 9_000_000 }, { reading: -9_000_000 }],
  }),
  "state-table": correction({ trajectory: circleTable(100, 60, true), readings: [{ reading: 5_000_000 }] }),
  "state-table without velocities": correction({
    trajectory: circleTable(100, 60, false),
    readings: [{ reading: 5_000_000 }],
  }),
  surface: correction({ readings: [{ reading: 86_400_000 }, { reading: -86_400_000 }] }),
  track: correction({ trajectory: flight(), readings: [{ reading: 14_000_000 }] }),
};

/** The same value with the fields of every object in the opposite order; lists keep theirs. */
function reordered(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(reordered);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .reverse()
      .map(([key, inner]) => [key, reordered(inner)]),
  );
}

describe.each(Object.keys(various))("the same request gives the same bytes: %s", (name) => {
  const body = various[name]!;

  it("twice, and on two instances", async () => {
    const first = await bytesOf(service, corrections, body);
    expect(await bytesOf(service, corrections, body)).toBe(first);
    expect(await alone((own) => bytesOf(own, corrections, body))).toBe(first);
  });

  it("whatever the order of the fields (RFC 8785: they are no part of the value)", async () => {
    const first = await bytesOf(service, corrections, body);
    const other = reordered(body);
    expect(JSON.stringify(other)).not.toBe(JSON.stringify(body));
    expect(await bytesOf(service, corrections, other)).toBe(first);
    expect(await alone((own) => bytesOf(own, corrections, other))).toBe(first);
  });

  it("whatever was asked of the same path before", async () => {
    const fresh = await alone((own) => bytesOf(own, corrections, body));
    const farther = {
      ...body,
      readings: body.readings.map((r: Body) => ({ reading: String(BigInt(r.reading) * 12n) })),
    };
    const nearer = { ...body, readings: [{ reading: 1 }, { reading: 1_000_000 }] };
    const inside = name.startsWith("state-table") || name === "track" ? [nearer] : [nearer, farther];
    await alone(async (own) => {
      for (const before of inside) await bytesOf(own, corrections, before);
      expect(await bytesOf(own, corrections, body)).toBe(fresh);
    });
  });

  it("each result whatever the order of the readings", async () => {
    const readings = [...body.readings, { reading: 1_000_000 }, { reading: 2_000_000 }];
    const resultsOf = async (list: readonly Body[]): Promise<Body[]> =>
      alone(async (own) => JSON.parse(await bytesOf(own, corrections, { ...body, readings: list })).results);
    const forward = await resultsOf(readings);
    const backward = await resultsOf(readings.toReversed());
    expect(backward.toReversed()).toEqual(forward);
  });
});

describe("the evidence", () => {
  const evidenceOf = async (body: Body): Promise<Body> =>
    JSON.parse(await bytesOf(service, corrections, body)).evidence;

  it("carries the SHA-256 of the canonical JSON of the request (RFC 8785)", async () => {
    // Names in the order of UTF-16 units, no white space; these numbers are integers and print as such.
    const canonical =
      '{"clock":{"anchor":{"at":"2026-03-01T00:00:00Z","reading":0},"counter":{"ticksPerSecond":1000}},' +
      '"readings":[{"reading":3600000}],' +
      '"trajectory":{"body":"Earth","heightM":2750,"heightOf":"geoid","kind":"surface","latitudeDeg":46.5,"longitudeDeg":11.25}}';
    const { inputsSha256 } = await evidenceOf(correction());
    expect(inputsSha256).toBe(createHash("sha256").update(canonical).digest("hex"));
  });

  it("changes with any input, and names the Sun's and the Moon's source only where they count", async () => {
    const one = await evidenceOf(correction());
    const two = await evidenceOf(altered(correction(), "/trajectory/heightM", 2750.001));
    expect(two.inputsSha256).not.toBe(one.inputsSha256);
    expect(one.ephemeris).toEqual(expect.any(String));
    expect((await evidenceOf(correction({ terms: ["velocity"] }))).ephemeris).toBeNull();
  });

  it("names the constants, of which two are defined exactly", async () => {
    const { constants } = await evidenceOf(correction());
    // SI: c = 299 792 458 m/s; IAU 2000 Resolution B1.9: L_G = 6.969290134e-10.
    expect(Object.values(constants)).toEqual(expect.arrayContaining([299_792_458, 6.969290134e-10]));
  });
});

describe("many at once", () => {
  it("twenty requests at the same time get the answers they would get alone", async () => {
    const bodies = Array.from({ length: 20 }, (_, i) =>
      correction({ trajectory: i % 2 === 0 ? lowOrbit() : mountain(), readings: [{ reading: 60_000 * (i + 1) }] }),
    );
    const together = await alone((own) => Promise.all(bodies.map((body) => bytesOf(own, corrections, body))));
    for (const [i, body] of bodies.entries()) expect(together[i]).toBe(await bytesOf(service, corrections, body));
  });

  it("more paths than are kept, and the first is still right", async () => {
    const body = (i: number): Body => altered(correction(), "/trajectory/heightM", i);
    await alone(async (own) => {
      const first = await bytesOf(own, corrections, body(0));
      for (let i = 1; i <= 40; i++) await bytesOf(own, corrections, body(i));
      expect(await bytesOf(own, corrections, body(0))).toBe(first);
    });
  });

  it("10 000 readings over a day of a low orbit, in their order and in bounded time", { timeout: 20_000 }, async () => {
    const readings = Array.from({ length: 10_000 }, (_, i) => ({ id: `row ${i}`, reading: 8640 * i }));
    const body = correction({ trajectory: lowOrbit(), readings });
    const answer = holdGoodAnswer(corrections, body, await post(service.address, corrections, body)) as Body;
    expect(answer.results.map(({ id }: Body) => id)).toEqual(readings.map(({ id }) => id));
    const instants: string[] = answer.results.map(({ corrected }: Body) => corrected);
    expect(instants.every((at, i) => i === 0 || at > instants[i - 1]!)).toBe(true);
  });

  it("10 000 instants of a clock on a mountain", { timeout: 20_000 }, async () => {
    const body = prediction({ instants: Array.from({ length: 10_000 }, (_, i) => moment(i)) });
    const answer = holdGoodAnswer(predictions, body, await post(service.address, predictions, body)) as Body;
    expect(answer.results).toHaveLength(10_000);
    expect(answer.results.map(({ reading }: Body) => reading)).toEqual(
      Array.from({ length: 10_000 }, (_, i) => 1000 * i),
    );
  });
});

/** NTP seconds of a UTC midnight: seconds since 1900-01-01. Source: RFC 5905, 6; 1970 is 2 208 988 800 there. */
const ntp = (date: string): number => Date.parse(`${date}T00:00:00Z`) / 1000 + 2_208_988_800;

/**
 * A leap-second list in the published format, invented from 1972 on. The digest is the SHA-1 of all numbers without
 * white space: update, expiry, then each line. Source: the description inside the IERS file leap-seconds.list.
 */
function leapSecondList(updated: string, expires: string, steps: readonly (readonly [string, number])[]): string {
  const numbers = [ntp(updated), ntp(expires), ...steps.flatMap(([date, offset]) => [ntp(date), offset])];
  const digest = createHash("sha1").update(numbers.join("")).digest("hex");
  return [
    `#$ ${ntp(updated)}`,
    `#@ ${ntp(expires)}`,
    ...steps.map(([date, offset]) => `${ntp(date)} ${offset} # from ${date}`),
    `#h ${digest.match(/.{8}/g)!.join(" ")}`,
    "",
  ].join("\n");
}

describe("another leap-second table", () => {
  const old = leapSecondList("2015-07-01", "2016-06-28", [
    ["1972-01-01", 10],
    ["2015-07-01", 11],
  ]);
  const table = LeapSecondTable.parse(old, "an invented list");

  it("is named in the evidence and in /readyz", async () => {
    await alone(async (own) => {
      const digest = createHash("sha1")
        .update(old.replace(/#h.*|# from.*|[^\d\n]|\n/g, ""))
        .digest("hex");
      const { evidence } = JSON.parse(await bytesOf(own, corrections, correction()));
      expect(evidence.leapSeconds.source).toContain(digest);
      expect(evidence.leapSeconds.expires).toBe("2016-06-28T00:00:00.000000000000Z");
      const ready = await send(own.address, "/readyz", undefined, { method: "GET" });
      expect(ready.body.leapSeconds).toMatchObject(evidence.leapSeconds);
      expect(ready.body.leapSeconds.daysLeft).toBeLessThan(0);
    }, table);
  });

  it("that has expired is flagged row by row, by the corrected instant, and noticed once", async () => {
    await alone(async (own) => {
      const clock = altered(millisecondClock(), "/anchor/at", "2016-06-27T23:00:00Z");
      const body = correction({
        clock,
        readings: [{ reading: 0 }, { reading: 3_599_000 }, { reading: 3_601_000 }, { reading: 90_000_000 }],
      });
      const answer = holdGoodAnswer(corrections, body, await post(own.address, corrections, body)) as Body;
      expect(answer.results.map(({ flags }: Body) => flags.includes("leap-table-expired"))).toEqual([
        false,
        false,
        true,
        true,
      ]);
      const notices = answer.notices.filter(({ code }: Body) => code === "leap-table-expired");
      expect(notices).toHaveLength(1);
      expect(notices[0].text).toContain("2016-06-28");
      const before = correction({ clock, readings: [{ reading: 1 }] });
      expect(JSON.parse(await bytesOf(own, corrections, before)).notices.map(({ code }: Body) => code)).not.toContain(
        "leap-table-expired",
      );
    }, table);
  });

  it("never depends on today: the shipped table flags a reading of 2040 and none of 2026", async () => {
    const flagsAt = async (at: string): Promise<string[]> =>
      JSON.parse(await bytesOf(service, corrections, altered(correction(), "/clock/anchor/at", at))).results[0].flags;
    expect(await flagsAt("2040-01-01T00:00:00Z")).toContain("leap-table-expired");
    expect(await flagsAt(epoch)).toEqual([]);
  });

  it("with a negative leap second: the second that is left out is not there, and time goes on", async () => {
    // Invented: 2027-12-31 ends at 23:59:58, TAI - UTC falls from 11 s to 10 s. ITU-R TF.460-6 allows for it.
    const negative = LeapSecondTable.parse(
      leapSecondList("2027-07-01", "2028-06-28", [
        ["1972-01-01", 10],
        ["2015-07-01", 11],
        ["2028-01-01", 10],
      ]),
      "an invented list",
    );
    await alone(async (own) => {
      const clock = altered(millisecondClock(), "/anchor/at", "2027-12-31T23:59:50Z");
      const terms = ["reference-surface"];
      const body = correction({ clock, terms, readings: [{ reading: 8500 }, { reading: 9500 }, { reading: 10_500 }] });
      const { results } = JSON.parse(await bytesOf(own, corrections, body));
      // Less than 1e-9 of the elapsed seconds is relativity: the first seven decimals are the counter's.
      expect(results.map(({ corrected }: Body) => Number(corrected.slice(17, -1)).toFixed(6))).toEqual([
        "58.500000",
        "0.500000",
        "1.500000",
      ]);
      expect(results.map(({ corrected }: Body) => corrected.slice(0, 16))).toEqual([
        "2027-12-31T23:59",
        "2028-01-01T00:00",
        "2028-01-01T00:00",
      ]);
      const gone = await post(own.address, predictions, prediction({ clock, instants: ["2027-12-31T23:59:59Z"] }));
      expect(gone.status).toBe(400);
      expect(gone.body.faults[0]).toMatchObject({ pointer: "/instants/0", received: "2027-12-31T23:59:59Z" });
      expect(gone.body.detail).toContain("negative leap second");
      const across = prediction({ clock, instants: ["2027-12-31T23:59:58Z", "2028-01-01T00:00:00Z"] });
      const shown = JSON.parse(await bytesOf(own, predictions, across)).results;
      expect(shown[1].reading - shown[0].reading).toBe(1000);
      // The same two moments in TAI: 11 s and 10 s ahead.
      const even = prediction({
        clock,
        scale: "TAI",
        instants: ["2028-01-01T00:00:09", "2028-01-01T00:00:10"].map((at) => ({ at, scale: "TAI" })),
      });
      const evenly = JSON.parse(await bytesOf(own, predictions, even)).results;
      expect(evenly.map(({ reading }: Body) => reading)).toEqual(shown.map(({ reading }: Body) => reading));
    }, negative);
  });

  it.each([
    ["a changed number", old.replace("11 # from", "12 # from"), /step must be one second|digest/],
    [
      "a digest that does not match",
      old.replace(/#h (.)/, (_, c) => `#h ${c === "0" ? "1" : "0"}`),
      /digest does not match/,
    ],
    ["no digest", old.replace(/#h.*/, ""), /digest line/],
    ["no expiry", old.replace(/#@.*/, ""), /expiry/],
    ["no update", old.replace(/#\$.*/, ""), /last update/],
    ["a step within a day", old.replace(`${ntp("2015-07-01")} 11`, `${ntp("2015-07-01") + 1} 11`), /midnight|whole/],
    ["text", "leap seconds are announced by letter\n", /line 1/],
    ["nothing", "", /first step/],
  ])("is refused when it is damaged: %s", (_name, text, reason) => {
    expect(() => LeapSecondTable.parse(text, "a damaged list")).toThrow(reason);
  });
});
