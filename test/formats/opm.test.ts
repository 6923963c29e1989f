import { describe, expect, it } from "vitest";
import { parseOpm, writeOpm } from "../../src/formats/index.ts";
import { changed, inventedOpm } from "./inventedMessages.ts";
import { expectRefusal } from "./refusal.ts";

const read = (what: string, by: string) => parseOpm(changed(inventedOpm, what, by));

describe("an OPM", () => {
  const { message, remarks } = parseOpm(inventedOpm);

  it("is read whole: state, elements, spacecraft, covariance, manoeuvres, user-defined", () => {
    expect(remarks).toEqual([]);
    expect(message.metadata.refFrameEpoch).toEqual({ text: "2033-01-01T00:00:00", timeSystem: "GPS" });
    expect(message.state).toEqual({
      comments: ["Where it was"],
      epoch: { text: "2033-03-03T00:00:00.123456789012", timeSystem: "GPS" },
      xKm: 8000.5,
      yKm: -10,
      zKm: 20.25,
      xKmPerS: 0.5,
      yKmPerS: 7,
      zKmPerS: -1,
    });
    expect(message.keplerian!.meanAnomalyDeg).toBe(66.6);
    expect(message.keplerian!.trueAnomalyDeg).toBeNull();
    expect(message.spacecraft!.massKg).toBe(0.75);
    expect(message.spacecraft!.dragCoefficient).toBeNull();
    expect(message.covariance!.frame).toBe("RTN");
    expect(message.covariance!.lowerTriangle).toEqual(Array.from({ length: 21 }, (_, i) => i + 1));
    expect(message.manoeuvres.map(({ durationS, comments }) => [durationS, comments])).toEqual([
      [0, ["A kick"]],
      [12.5, ["Another one"]],
    ]);
    expect(message.userDefined!.parameters).toEqual([
      { name: "CORK", value: "TIGHT" },
      { name: "LETTERS", value: "3" },
    ]);
  });

  it("is printed back to an equal record, in lines and in XML", () => {
    expect(parseOpm(writeOpm(message)).message).toEqual(message);
    expect(parseOpm(writeOpm(message, "xml")).message).toEqual(message);
  });

  it("keeps texts that XML must escape", () => {
    const odd = read("= TIGHT", '= <"A" & B> [km]').message;
    expect(odd.userDefined!.parameters[0]!.value).toBe('<"A" & B> [km]');
    expect(parseOpm(writeOpm(odd, "xml")).message).toEqual(odd);
    expect(parseOpm(writeOpm(odd)).message).toEqual(odd);
  });

  it("keeps minus zero and numbers of many digits", () => {
    const odd = read("X = 8000.5", "X = -0.0").message;
    expect(Object.is(parseOpm(writeOpm(odd)).message.state.xKm, -0)).toBe(true);
    expect(read("X = 8000.5", "X = 687754.36358524448").message.state.xKm).toBe(Number("687754.36358524448"));
  });
});

describe("an OPM that is broken", () => {
  const rows: readonly (readonly [what: string, by: string, parts: readonly string[]])[] = [
    ["X = 8000.5 [km]", "X = 8000500 [m]", ["line 15, X", "[m]", "[km]"]],
    ["ECCENTRICITY = 0.0125", "ECCENTRICITY = 0.0125 [deg]", ["ECCENTRICITY", "no unit"]],
    ["Y = -10 [km]", "Y =", ["line 16, Y", "a number"]],
    ["Z_DOT = -1 [km/s]\n", "", ["Z_DOT", "must be given"]],
    ["MEAN_ANOMALY = 66.6 [deg]", "MEAN_ANOMALY = 66.6\nTRUE_ANOMALY = 67", ["one of TRUE_ANOMALY and MEAN_ANOMALY"]],
    ["MEAN_ANOMALY = 66.6 [deg]\n", "", ["one of TRUE_ANOMALY and MEAN_ANOMALY"]],
    ["GM = 398600.4415 [km**3/s**2]\n", "", ["GM", "must be given"]],
    ["CZ_DOT_Z = 18\n", "", ["all 21", "CZ_DOT_Z"]],
    ["CX_X = 1", "CX_X = 1 [m**2]", ["[km**2]"]],
    ["MAN_DV_2 = 0\n", "", ["MAN_DV_2"]],
    ["MAN_DURATION = 12.5", "MAN_DURATION = -1", ["at least 0"]],
    ["USER_DEFINED_CORK = TIGHT", "USER_DEFINED_ = TIGHT", ['"USER_DEFINED_"', "a keyword of an OPM"]],
    ["USER_DEFINED_CORK = TIGHT", "TIME_SYSTEM = UTC", ["TIME_SYSTEM", "before"]],
    ["MASS = 0.75", "MAS = 0.75", ["perhaps MASS was meant"]],
    ["OBJECT_NAME =", "object_name =", ["perhaps OBJECT_NAME was meant"]],
    ["CCSDS_OPM_VERS = 2.0", "CCSDS_OPM_VERS = 1.0", ["REF_FRAME_EPOCH", "came with 2.0"]],
  ];

  it.each(rows)("%j as %j", (what, by, parts) => {
    expectRefusal(() => read(what, by), ...parts);
  });

  it("is refused as an OMM", () => {
    expectRefusal(() => parseOpm(changed(inventedOpm, "CCSDS_OPM_VERS", "CCSDS_OMM_VERS")), "another kind of message");
  });
});
