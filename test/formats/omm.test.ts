import { describe, expect, it } from "vitest";
import { ommFromJson, parseOmm, writeOmm } from "../../src/formats/index.ts";
import { changed, inventedOmm, inventedOmmJson } from "./inventedMessages.ts";
import { expectRefusal, refusal } from "./refusal.ts";

const read = (what: string, by: string) => parseOmm(changed(inventedOmm, what, by));
const json = (change: Record<string, unknown>) => ({ ...JSON.parse(inventedOmmJson)[0], ...change });

describe("an OMM", () => {
  const { message, remarks } = parseOmm(inventedOmm);

  it("is read whole", () => {
    expect(remarks).toEqual([]);
    expect(message.elements).toEqual({
      comments: ["On a long string"],
      epoch: { text: "2033-03-03T12:00:00.5", timeSystem: "UTC" },
      semiMajorAxisKm: null,
      meanMotionRevPerDay: 14.25,
      eccentricity: 0.0025,
      inclinationDeg: 77.7,
      ascendingNodeDeg: 10,
      pericentreArgumentDeg: 20,
      meanAnomalyDeg: 30,
      gmKm3PerS2: 398600.8,
    });
    expect(message.tle!.bstarPerEarthRadius).toBe(-0.125e-4);
    expect(message.tle!.catalogueNumber).toBe(123456789);
    expect(message.tle!.elementSetNumber).toBe(7);
  });

  it("is printed back to an equal record, in lines and in XML; in JSON but for the place of comments", () => {
    expect(parseOmm(writeOmm(message)).message).toEqual(message);
    expect(parseOmm(writeOmm(message, "xml")).message).toEqual(message);
    const again = parseOmm(writeOmm(message, "json")).message;
    expect(again).toEqual({
      ...message,
      header: { ...message.header, comments: ["On a long string"] },
      elements: { ...message.elements, comments: [] },
    });
    expect(parseOmm(writeOmm(again, "json")).message).toEqual(again);
  });

  it("reads the only OMM of a combined message", () => {
    const single = writeOmm(message, "xml").replace('<?xml version="1.0" encoding="UTF-8"?>', "");
    const combined = `<?xml version="1.0"?>\n<ndm>\n<COMMENT>one</COMMENT>\n${single}</ndm>`;
    expect(parseOmm(combined).message).toEqual(message);
    expectRefusal(() => parseOmm(`<ndm>${single}${single}</ndm>`), "one OMM", "there are 2");
  });
});

describe("an OMM in JSON", () => {
  it("may be an object or an array of one, with numbers or numeric texts", () => {
    const { message, remarks } = parseOmm(inventedOmmJson);
    expect(message.elements.meanMotionRevPerDay).toBe(14.25);
    expect(message.tle!.catalogueNumber).toBe(77777);
    expect(message.metadata).toMatchObject({ centerName: "EARTH", refFrame: "TEME", timeSystem: "UTC" });
    expect(message.metadata.meanElementTheory).toBe("SGP4");
    expect(message.header.creationDate).toBeNull();
    expect(remarks).toHaveLength(1);
    expect(remarks[0]).toContain("REF_FRAME TEME");
    expect(ommFromJson(json({})).message).toEqual(message);
    for (const form of ["json", "kvn", "xml"] as const) {
      expect(parseOmm(writeOmm(message, form)).message).toEqual(message);
    }
  });

  it("names the keys that it did not read", () => {
    const { remarks } = ommFromJson(json({ PERIOD: 101, TLE_LINE1: "1 ...", DECAY_DATE: null }));
    expect(remarks[0]).toContain("PERIOD, TLE_LINE1");
    expect(remarks[0]).not.toContain("DECAY_DATE");
  });

  it("is refused with a place in the value", () => {
    const problem = refusal(() => ommFromJson([json({ MEAN_MOTION: "fast" })]));
    expect(problem.faults).toEqual([
      { place: [0, "MEAN_MOTION"], received: "fast", expected: expect.stringContaining("rev/day") },
    ]);
    expect(refusal(() => ommFromJson(json({ ECCENTRICITY: true }))).faults[0]!.place).toEqual(["ECCENTRICITY"]);
    expect(refusal(() => ommFromJson(json({ INCLINATION: { deg: 1 } }))).faults[0]!.place).toEqual(["INCLINATION"]);
    expect(refusal(() => ommFromJson(json({ COMMENT: 7 }))).faults[0]!.place).toEqual(["COMMENT"]);
    expect(refusal(() => ommFromJson(json({ CCSDS_OMM_VERS: 7 }))).faults[0]!.place).toEqual(["CCSDS_OMM_VERS"]);
  });

  it.each([[], [[1, 2]], [null], ["text"], [7], [[[]]]].map((one) => [one[0]]))("is no OMM: %j", (value) => {
    expectRefusal(() => ommFromJson(value));
  });

  it("says why a text is no JSON", () => {
    expectRefusal(() => parseOmm('{"EPOCH": '), "JSON");
    expectRefusal(() => ommFromJson([json({}), json({})]), "the array holds 2");
  });
});

describe("an OMM that is broken", () => {
  const rows: readonly (readonly [what: string, by: string, parts: readonly string[]])[] = [
    ["CCSDS_OMM_VERS = 3.0", "CCSDS_OMM_VERS = 1.0", ['"2.0", "3.0"']],
    ["MEAN_MOTION = 14.25 [rev/day]", "MEAN_MOTION = 14.25 [rad/s]", ["line 14, MEAN_MOTION", "[rev/day]"]],
    ["MEAN_MOTION = 14.25 [rev/day]", "SEMI_MAJOR_AXIS = 7200", ["MEAN_MOTION", "this theory"]],
    ["MEAN_MOTION = 14.25 [rev/day]", "MEAN_MOTION = 14.25\nSEMI_MAJOR_AXIS = 7200", ["there are both"]],
    ["MEAN_MOTION = 14.25 [rev/day]\n", "", ["there are neither"]],
    ["MEAN_MOTION = 14.25", "MEAN_MOTION = 0", ["above 0"]],
    ["ECCENTRICITY = .0025", "ECCENTRICITY = 1", ["below 1"]],
    ["INCLINATION = 77.7", "INCLINATION = 181", ["0 to 180"]],
    ["BSTAR = -.125E-4 [1/ER]\n", "", ["line 10, MEAN_ELEMENT_THEORY", "BSTAR"]],
    ["NORAD_CAT_ID = 123456789\n", "", ["NORAD_CAT_ID"]],
    ["NORAD_CAT_ID = 123456789", "NORAD_CAT_ID = 1234567890", ["nine digits"]],
    ["MEAN_MOTION_DDOT = 0 [rev/day**3]", "MEAN_MOTION_DDOT = 0\nAGOM = 0.01", ["MEAN_MOTION_DDOT and AGOM"]],
    ["CLASSIFICATION_TYPE = U", "CLASSIFICATION_TYPE = UU", ["one letter"]],
    ["REV_AT_EPOCH = 42", "REV_AT_EPOCH = 42.5", ["REV_AT_EPOCH", "a whole number"]],
    ["EPOCH = 2033-03-03T12:00:00.5", "EPOCH = 2033-03-03 12:00:00.5", ["line 13, EPOCH", "an epoch such as"]],
    ["TIME_SYSTEM = UTC", "TIME_SYSTEM UTC", ["line 9", "no equals sign"]],
    ["TIME_SYSTEM = UTC", "= UTC", ["line 9", "a keyword before"]],
  ];

  it.each(rows)("%j as %j", (what, by, parts) => {
    expectRefusal(() => read(what, by), ...parts);
  });
});
