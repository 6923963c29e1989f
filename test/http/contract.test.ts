import { validate } from "@readme/openapi-parser";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { problemCatalogue } from "../../src/problem/index.ts";
import { physicalTermNames } from "../../src/relativity/index.ts";
import {
  document,
  documentAllows,
  holdAgainstDocument,
  holdGoodAnswer,
  holdProblem,
  operation,
} from "../support/contract.ts";
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
import { post, type Service, send, startService } from "../support/service.ts";

/** Every route and every option, each answer held against the interface document to the letter. */

let service: Service;
beforeAll(async () => {
  service = await startService();
});
afterAll(() => service.close());

const identity = (size: number, diagonal: number) =>
  Array.from({ length: size }, (_, i) => Array.from({ length: size }, (_, j) => (i === j ? diagonal : 0)));

const ecef = (): Body => ({
  ...lowOrbit(),
  frame: "ITRF",
  // Slower by the Earth's rotation at this radius, 0.503 km/s.
  velocityKmPerS: [0, 4.397, 5.8],
});

const trajectories: Readonly<Record<string, Body>> = {
  "state-vector": lowOrbit(),
  "state-vector, EME2000": { ...lowOrbit(), frame: "EME2000", center: "Earth" },
  "state-vector, ICRF": { ...lowOrbit(), frame: "ICRF", basis: "predicted" },
  "state-vector, ITRF": ecef(),
  "state-vector, hardly meant": { ...lowOrbit(), velocityKmPerS: [0, 4.2, 5] },
  "state-vector with sigmas": { ...lowOrbit(), positionSigmaKm: 0.02, velocitySigmaKmPerS: 0.00002 },
  "state-vector with the sigma of its axis": { ...lowOrbit(), semiMajorAxisSigmaKm: 0.001, basis: "reconstructed" },
  "state-vector with covariance": { ...lowOrbit(), covarianceRtn: identity(6, 1e-8) },
  "state-table with velocities": circleTable(40, 120, true),
  "state-table without velocities": circleTable(40, 120, false),
  "state-table, coarse": circleTable(4, 2000, true),
  "state-table of two states": circleTable(2, 4000, true),
  "surface above the geoid": mountain(),
  "surface above the ellipsoid": { ...mountain(), heightOf: "ellipsoid", heightM: 2801.5 },
  "track above the ellipsoid": flight(),
  "track above the geoid": { ...flight(), heightOf: "geoid" },
};

const oscillators: Readonly<Record<string, Body>> = {
  offsetNs: { offsetNs: -125.5 },
  presetFractional: { presetFractional: -4.5e-10 },
  frequencyOffset: { frequencyOffset: 3e-7 },
  agingPerDay: { agingPerDay: -2e-11 },
  nominalHz: { nominalHz: 1000 },
  frequencySigma: { frequencySigma: 1e-11 },
  agingSigmaPerDay: { agingSigmaPerDay: 1e-12 },
  covariance: {
    frequencyOffset: 1e-8,
    covariance: [
      [100, 1e-11, 0],
      [1e-11, 1e-22, 0],
      [0, 0, 1e-26],
    ],
  },
  "all single fields": {
    offsetNs: 1,
    presetFractional: 1e-10,
    frequencyOffset: -2e-9,
    agingPerDay: 1e-12,
    nominalHz: 1000,
    frequencySigma: 1e-12,
    agingSigmaPerDay: 1e-13,
  },
  empty: {},
};

/** Parts that both calls take. */
const shared: Readonly<Record<string, Body>> = {
  "nothing but what is needed": {},
  ...Object.fromEntries(["UTC", "TAI", "TT", "GPS"].map((scale) => [`scale ${scale}`, { scale }])),
  "one term": { terms: ["velocity"] },
  "every term": { terms: [...physicalTermNames] },
  "earthOrientation, whole": { earthOrientation: { ut1MinusUtcS: 0.1, xPoleArcsec: 0.05, yPoleArcsec: 0.4 } },
  "earthOrientation, in part": { earthOrientation: { ut1MinusUtcS: -0.2 } },
  "earthOrientation, empty": { earthOrientation: {} },
  "a clock 24 bits wide": {
    clock: { counter: { ticksPerSecond: 1000, widthBits: 24 }, anchor: { reading: 0, at: epoch, sigmaNs: 20 } },
    trajectory: flight(),
  },
  "a rational rate": {
    clock: { counter: { ticksPerSecond: "30000/1001" }, anchor: { reading: -5, at: epoch } },
  },
  "a reading of 100 digits at the anchor": {
    clock: { counter: { ticksPerSecond: 1e12 }, anchor: { reading: "9".repeat(100), at: epoch } },
  },
  ...Object.fromEntries(
    ["edge", "truncated", "rounded"].map((stands) => [
      `stands ${stands}`,
      { clock: altered(millisecondClock(), "/counter/stands", stands) },
    ]),
  ),
  ...Object.fromEntries(
    Object.entries(oscillators).map(([name, oscillator]) => [
      `oscillator, ${name}`,
      { clock: { ...millisecondClock(), oscillator } },
    ]),
  ),
  ...Object.fromEntries(Object.entries(trajectories).map(([name, trajectory]) => [name, { trajectory }])),
  "an anchor in TAI": {
    clock: altered(millisecondClock(), "/anchor/at", { at: "2026-03-01T00:00:37", scale: "TAI" }),
  },
  "an anchor by day of year": { clock: altered(millisecondClock(), "/anchor/at", "2026-060T00:00:00.000Z") },
  "a result after the leap-second table's expiry": {
    clock: altered(millisecondClock(), "/anchor/at", "2031-05-05T00:00:00Z"),
  },
};

const wide = (): Body => ({ counter: { ticksPerSecond: 1000, widthBits: 20 }, anchor: { reading: 1000, at: epoch } });

const corrections: Readonly<Record<string, Body>> = {
  ...shared,
  "readings with ids": { readings: [{ id: "first", reading: 1 }, { id: "", reading: "2" }, { reading: 3 }] },
  "readings before and after the anchor": { readings: [{ reading: -1000 }, { reading: 0 }, { reading: 1000 }] },
  "near as UTC": { clock: wide(), readings: [{ reading: 900, near: moment(1048) }] },
  "near in another scale": {
    clock: wide(),
    readings: [{ reading: 900, near: { at: "2026-03-01T00:18:05", scale: "TAI" } }],
  },
  "near in the middle of two meanings": { clock: wide(), readings: [{ reading: 1000, near: moment(524.288) }] },
  "unwrap after": { clock: wide(), readings: [{ reading: 900 }], unwrap: "after" },
  "unwrap before": { clock: wide(), readings: [{ reading: 1100 }], unwrap: "before" },
  "unwrap nearest": { clock: wide(), readings: [{ reading: 900 }], unwrap: "nearest" },
  "a reading in a leap second": {
    clock: altered(millisecondClock(), "/anchor/at", "2016-12-31T23:00:00Z"),
    readings: [{ reading: 3_600_500 }],
  },
};

const predictions: Readonly<Record<string, Body>> = {
  ...shared,
  "instants in several scales": {
    instants: [moment(1), { at: "2026-03-01T01:00:37.5", scale: "TAI" }, { at: "2026-060T01:01:09.184", scale: "TT" }],
  },
  "an instant before the anchor": { instants: [moment(-3600)] },
  "a reading past a rollover": { clock: wide(), instants: [moment(1100)] },
};

/** The result of a table whose clock starts elsewhere must be asked for there. */
function completed(base: Body, changes: Body): Body {
  const body = { ...base, ...changes };
  if (
    body.instants !== undefined &&
    changes.instants === undefined &&
    body.clock.anchor.at === "2031-05-05T00:00:00Z"
  ) {
    return { ...body, instants: ["2031-05-05T01:00:00Z"] };
  }
  if (body.readings !== undefined && changes.readings === undefined) {
    const { reading } = body.clock.anchor;
    return { ...body, readings: [{ reading: String(BigInt(reading) + 3_600n) }] };
  }
  return body;
}

describe.each([
  { path: "/v1/corrections", base: correction(), rows: corrections, list: "readings" },
  { path: "/v1/predicted-readings", base: prediction(), rows: predictions, list: "instants" },
])("POST $path", ({ path, base, rows, list }) => {
  it.each(Object.keys(rows))("%s", async (name) => {
    const body = completed(base, rows[name]);
    const answer = holdGoodAnswer(path, body, await post(service.address, path, body)) as Body;
    expect(answer.results).toHaveLength(body[list].length);
    for (const result of answer.results) {
      expect(result.scale).toBe(body.scale ?? "UTC");
      // Exact decimal strings: the terms add up to clock minus TT, digit for digit.
      const femtoseconds = (text: string): bigint => BigInt(text.replace(".", ""));
      const sum = result.terms.reduce((total: bigint, term: Body) => total + femtoseconds(term.accumulated), 0n);
      expect(sum).toBe(femtoseconds(result.clockMinusTt));
      expect(result.clockMinusTt).toMatch(/^-?\d+\.\d{15}$/);
      const instant: string = result.corrected ?? result.at;
      expect(instant).toMatch(result.scale === "UTC" ? /^\d{4}-\d\d-\d\dT[\d:]{8}\.\d{12}Z$/ : /\.\d{12}$/);
    }
  });
});

describe("what an option does", () => {
  const terms = (answer: Body): string[] => answer.results[0].terms.map(({ term }: Body) => term);
  const notices = (answer: Body): string[] => answer.notices.map(({ code }: Body) => code);
  const correct = async (changes: Body): Promise<Body> => {
    const body = completed(correction(), changes);
    return holdGoodAnswer("/v1/corrections", body, await post(service.address, "/v1/corrections", body));
  };

  it("terms are exactly those asked for, and a notice names the rest", async () => {
    const answer = await correct({ terms: ["reference-surface", "velocity"] });
    expect(terms(answer)).toEqual(["velocity", "reference-surface"]);
    const left = answer.notices.find(({ code }: Body) => code === "terms-left-out");
    for (const name of physicalTermNames) {
      if (!terms(answer).includes(name)) expect(left.text).toContain(name);
    }
    expect(notices(await correct({}))).not.toContain("terms-left-out");
  });

  it("clock terms are listed when their input was given, and only then", async () => {
    const given = await correct({ clock: { ...millisecondClock(), oscillator: oscillators["all single fields"] } });
    expect(terms(given).slice(0, 4)).toEqual(["offset", "preset", "frequency", "aging"]);
    const none = await correct({});
    expect(terms(none)).toEqual([...physicalTermNames]);
  });

  it("truncated readings have a latch term of minus half a tick and the uncertainty of a tick", async () => {
    const answer = await correct({ clock: altered(millisecondClock(), "/counter/stands", "truncated") });
    const latch = answer.results[0].terms.find(({ term }: Body) => term === "latch");
    expect(latch.accumulated).toBe("-0.000500000000000");
    const tick = answer.results[0].uncertainty.find(({ source }: Body) => source === "tick");
    // A rectangular distribution one tick wide: width / sqrt(12). Source: JCGM 100:2008, 4.3.7.
    expect(tick.ns).toBeCloseTo(1e6 / Math.sqrt(12), 6);
    expect(tick.shared).toBe("row");
  });

  it("a missing orbit uncertainty, orientation or velocity is said in a notice", async () => {
    expect(notices(await correct({ trajectory: lowOrbit() }))).toEqual(
      expect.arrayContaining(["orbit-uncertainty-not-given", "earth-orientation-not-given"]),
    );
    const known = await correct({
      trajectory: trajectories["state-vector with covariance"],
      ...shared["earthOrientation, whole"],
    });
    expect(notices(known)).toEqual(["anchor-uncertainty-not-given", "oscillator-uncertainty-not-given"]);
    expect(known.results[0].uncertainty.map(({ source }: Body) => source)).toContain("orbit");
    expect(notices(await correct({ trajectory: circleTable(40, 120, false) }))).toContain("velocities-derived");
  });

  it("an orbit that is hardly meant and a coarse table are flagged and noticed", async () => {
    const implausible = await correct({ trajectory: trajectories["state-vector, hardly meant"] });
    expect(implausible.results[0].flags).toContain("implausible-orbit");
    expect(notices(implausible)).toContain("implausible-orbit");
    const coarse = await correct({ trajectory: trajectories["state-table, coarse"] });
    expect(coarse.results[0].flags).toContain("coarse-ephemeris");
    expect(notices(coarse)).toContain("coarse-ephemeris");
  });

  it("a reading in the leap second of 2016-12-31 shows second 60 (IERS Bulletin C 52)", async () => {
    const answer = await correct(corrections["a reading in a leap second"]);
    expect(answer.results[0].corrected).toMatch(/^2016-12-31T23:59:60\.(499999|500000)/);
    expect(answer.results[0].flags).toContain("leap-second");
  });

  it("near and unwrap settle rollovers and flag them", async () => {
    const turn = 2 ** 20 / 1000;
    const secondsOf = (answer: Body): number => (Date.parse(answer.results[0].corrected) - Date.parse(epoch)) / 1000;
    const later = await correct(corrections["unwrap after"]);
    expect(secondsOf(later)).toBeCloseTo(turn - 0.1, 2);
    expect(later.results[0].flags).toEqual(["rollover"]);
    const earlier = await correct(corrections["unwrap before"]);
    expect(secondsOf(earlier)).toBeCloseTo(0.1 - turn, 2);
    expect(earlier.results[0].flags).toEqual(["rollover", "before-anchor"]);
    const nearest = await correct(corrections["unwrap nearest"]);
    expect(secondsOf(nearest)).toBeCloseTo(-0.1, 2);
    expect(nearest.results[0].flags).toEqual(["before-anchor"]);
    const rough = await correct(corrections["near in another scale"]);
    expect(secondsOf(rough)).toBeCloseTo(turn - 0.1, 2);
    const undecided = await correct(corrections["near in the middle of two meanings"]);
    expect(undecided.results[0].flags).toContain("ambiguous-rollover");
  });

  it("a predicted reading corrects back to its instant within a tick", async () => {
    const body = prediction({ instants: ["2026-03-01T00:20:34.5678Z"], scale: "TT" });
    const { results } = (await post(service.address, "/v1/predicted-readings", body)).body;
    const back = await correct({ readings: [{ reading: results[0].reading }], scale: "TT" });
    const difference = Date.parse(`${results[0].at}Z`) - Date.parse(`${back.results[0].corrected}Z`);
    expect(difference).toBeGreaterThanOrEqual(0);
    expect(difference).toBeLessThanOrEqual(1);
    // 34.5678 s at 1000 ticks a second: 0.8 of a tick beyond; relativity adds less than 1e-6 of one in 20 minutes.
    expect(results[0].fraction).toBeCloseTo(0.8, 3);
  });

  it.each([
    { kind: "state-vector", trajectory: highOrbit(), ends: ["2025-01-25T00:00:00Z", "2027-04-05T00:00:00Z"] },
    { kind: "state-table", trajectory: circleTable(65, 60, true), ends: [epoch, moment(3840)] },
    { kind: "state-table without velocities", trajectory: circleTable(33, 60, false), ends: [epoch, moment(1920)] },
    { kind: "track", trajectory: flight(), ends: [epoch, moment(14_400)] },
    { kind: "surface", trajectory: mountain(), ends: ["1972-01-01T00:00:00Z"], anchor: "1972-01-02T00:00:00Z" },
    {
      kind: "surface, at the other end",
      trajectory: mountain(),
      ends: ["2100-12-31T23:59:59.999999999999Z"],
      anchor: "2100-12-31T00:00:00Z",
    },
  ])("the very ends of the span of a $kind are answered", async ({ trajectory, ends, anchor }) => {
    const clock = altered(millisecondClock(), "/anchor/at", anchor ?? epoch);
    const body = prediction({ clock, trajectory, instants: ends });
    const response = await post(service.address, "/v1/predicted-readings", body);
    const { results } = holdGoodAnswer("/v1/predicted-readings", body, response) as Body;
    expect(results.map(({ at }: Body) => at.slice(0, 19))).toEqual(ends.map((end) => end.slice(0, 19)));
  });

  it("ids come back where they were given and nowhere else", async () => {
    const { results } = await correct(corrections["readings with ids"]);
    expect(results.map((result: Body) => ("id" in result ? result.id : null))).toEqual(["first", "", null]);
  });

  it("a UTC instant of an answer can be sent back as it is", async () => {
    const { results } = await correct({});
    const body = prediction({ instants: [results[0].corrected] });
    const answer = holdGoodAnswer(
      "/v1/predicted-readings",
      body,
      await post(service.address, "/v1/predicted-readings", body),
    ) as Body;
    expect(answer.results[0].at).toBe(results[0].corrected);
  });
});

describe("GET", () => {
  it.each(["/healthz", "/readyz", "/openapi.json"])("%s, and HEAD", async (path) => {
    const got = await send(service.address, path, undefined, { method: "GET" });
    expect(got.status).toBe(200);
    holdAgainstDocument("GET", path, got);
    const head = await send(service.address, path, undefined, { method: "HEAD" });
    expect(head.status).toBe(200);
    holdAgainstDocument("HEAD", path, head);
    expect(head.headers["content-length"]).toBe(got.headers["content-length"]);
  });

  it.each([
    { path: "/docs", at: "/docs" },
    { path: "/problems", at: "/problems" },
    { path: "/problems/{code}", at: "/problems/outside-span" },
  ])("$at as a page, and HEAD", async ({ path, at }) => {
    const got = await send(service.address, at, undefined, { method: "GET", headers: { Accept: "text/html" } });
    expect(got.status).toBe(200);
    expect(got.text).toMatch(/^<!doctype html>/);
    // To the document a page is a string; the check reads JSON.
    holdAgainstDocument("GET", path, { ...got, headers: got.headers, text: JSON.stringify(got.text) } as typeof got);
    const head = await send(service.address, at, undefined, { method: "HEAD" });
    expect(head.headers["content-length"]).toBe(got.headers["content-length"]);
    holdAgainstDocument("HEAD", path, head);
  });

  it("/problems as JSON is the catalogue, and the type of each problem resolves", async () => {
    const json = { method: "GET", headers: { Accept: "application/json" } };
    const list = await send(service.address, "/problems", undefined, json);
    holdAgainstDocument("GET", "/problems", list);
    const { problems } = JSON.parse(list.text) as { problems: { type: string }[] };
    expect(problems.map(({ type }) => type)).toEqual(Object.keys(problemCatalogue).map((code) => `/problems/${code}`));
    for (const problem of problems) {
      const one = await send(service.address, problem.type, undefined, json);
      holdAgainstDocument("GET", "/problems/{code}", one);
      expect(JSON.parse(one.text)).toEqual(problem);
    }
  });

  it.each(["/problems/no-such-code", "/problems/constructor", "/problems/", "/problems/%zz", "/docs/"])(
    "%s is an unknown path",
    async (path) => {
      const documented = path === "/docs/" ? path : "/problems/{code}";
      holdProblem("GET", documented, await send(service.address, path, undefined, { method: "GET" }), "unknown-path");
    },
  );

  it("another method at a page is refused with those that it takes", async () => {
    for (const path of ["/docs", "/problems", "/problems/outside-span"]) {
      const response = await send(service.address, path, {});
      holdProblem("POST", path, response, "method-not-allowed");
      expect(response.headers.allow).toBe("GET, HEAD");
    }
  });

  it("/readyz names the leap-second table and its expiry", async () => {
    const { body } = await send(service.address, "/readyz", undefined, { method: "GET" });
    expect(body.status).toBe("ready");
    expect(body.leapSeconds.source).toMatch(/sha1 [0-9a-f]{40}$/);
    const days = (Date.parse(body.leapSeconds.expires) - Date.now()) / 86_400_000;
    expect(Math.abs(body.leapSeconds.daysLeft - days)).toBeLessThanOrEqual(1);
  });

  it("/openapi.json is the interface document", async () => {
    const { body } = await send(service.address, "/openapi.json", undefined, { method: "GET" });
    expect(body).toEqual(JSON.parse(JSON.stringify(document)));
  });
});

describe("the interface document", () => {
  it("is valid OpenAPI 3.1 (OpenAPI Specification 3.1.0)", async () => {
    const result = await validate(structuredClone(document) as never);
    expect(result.valid ? [] : result.errors).toEqual([]);
    expect(document.openapi).toBe("3.1.0");
  });

  it("documents exactly the addresses that this test visits", () => {
    expect(Object.keys(document.paths).sort()).toEqual([
      "/docs",
      "/healthz",
      "/openapi.json",
      "/problems",
      "/problems/{code}",
      "/readyz",
      "/v1/corrections",
      "/v1/drift-budgets",
      "/v1/predicted-readings",
      "/v1/time-conversions",
    ]);
  });

  it("has an example for each call, and each of them is answered", async () => {
    for (const [path, { post: call }] of Object.entries(document.paths)) {
      if (call === undefined) continue;
      const { example } = call.requestBody!.content["application/json"] as { example?: object };
      expect(example, path).toBeDefined();
      holdGoodAnswer(path, example, await post(service.address, path, example));
    }
  });

  it("shows the caution and the catalogue of problems", () => {
    const text = JSON.stringify(document);
    expect(text).toContain("not qualified for flight safety");
    for (const code of ["outside-span", "invalid-json", "ambiguous-rollover"]) expect(text).toContain(code);
  });

  it("refuses what it does not document: this very check can fail", () => {
    expect(documentAllows("/v1/corrections", correction())).toBe(true);
    expect(documentAllows("/v1/corrections", correction({ readings: [] }))).toBe(false);
    expect(documentAllows("/v1/corrections", correction({ unasked: 1 }))).toBe(false);
    expect(documentAllows("/v1/corrections", altered(correction(), "/trajectory/unasked", 1))).toBe(false);
    expect(documentAllows("/v1/corrections", altered(correction(), "/clock/counter/unasked", 1))).toBe(false);
  });

  it("holds answers strictly: an extra field, another status or another type does not pass", async () => {
    const response = await post(service.address, "/v1/corrections", correction());
    const changed = (change: Body): Body => ({
      status: response.status,
      headers: response.headers,
      text: response.text,
      ...change,
    });
    const hold = (change: Body) => () => holdAgainstDocument("POST", "/v1/corrections", changed(change));
    expect(hold({})).not.toThrow();
    expect(hold({ text: response.text.replace('{"results"', '{"extra":1,"results"') })).toThrow();
    expect(hold({ status: 202 })).toThrow();
    expect(hold({ headers: { "content-type": "text/plain" } })).toThrow();
    expect(operation("DELETE", "/v1/corrections")).toBeUndefined();
  });
});
