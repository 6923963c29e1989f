import { describe, expect, it } from "vitest";
import { messageInstant, messageKind, parseOem, parseOmm, writeOem, writeOmm } from "../../src/formats/index.ts";
import { defaultLeapSeconds, parseInstant, scales } from "../../src/time/index.ts";
import {
  inventedLine1,
  inventedLine2,
  inventedOem,
  inventedOmm,
  inventedOmmJson,
  inventedOpm,
} from "./inventedMessages.ts";
import { expectRefusal, refusal } from "./refusal.ts";

describe("which message a text is", () => {
  const ommXml = writeOmm(parseOmm(inventedOmm).message, "xml");

  it.each([
    ["OEM", inventedOem, "oem", "kvn"],
    ["OEM in XML", writeOem(parseOem(inventedOem).message, "xml"), "oem", "xml"],
    ["OPM after a byte-order mark", `\ufeff\n${inventedOpm}`, "opm", "kvn"],
    ["OMM", inventedOmm, "omm", "kvn"],
    ["OMM in XML", ommXml, "omm", "xml"],
    ["combined message of one", `<ndm>${ommXml.slice(ommXml.indexOf("<omm"))}</ndm>`, "omm", "xml"],
    ["OMM in JSON", inventedOmmJson, "omm", "json"],
    ["two lines", `${inventedLine1}\r\n${inventedLine2}\r\n`, "tle", "lines"],
    ["three lines", `KITE 13\n${inventedLine1}\n${inventedLine2}\n`, "tle", "lines"],
    ["OEM with a comment before its version, which the parser refuses", `COMMENT no\n${inventedOem}`, "oem", "kvn"],
  ])("%s", (_, text, kind, form) => {
    expect(messageKind(text)).toEqual({ kind, form });
  });

  it.each([
    ["nothing", ""],
    ["a trajectory", '{"kind":"surface"}'],
    ["no JSON", "{"],
    ["a table", "a,b\n1,2\n"],
    ["numbers", "[1,2]"],
  ])("%s is no message", (_, text) => {
    expect(messageKind(text)).toBeNull();
  });

  it("refuses other kinds by name", () => {
    expectRefusal(() => messageKind("CCSDS_OCM_VERS = 3.0\n"), "orbit comprehensive message (OCM)", "not read here");
    expectRefusal(() => messageKind("CCSDS_TDM_VERS = 2.0\n"), "tracking data message");
    expectRefusal(() => messageKind('<?xml version="1.0"?><cdm/>'), "conjunction data message");
    expectRefusal(() => messageKind("<kite/>"), "KITE");
    expectRefusal(() => messageKind("<ndm><omm/><oem/></ndm>"), "omm, oem");
    expectRefusal(() => messageKind("<omm"), "well-formed XML");
  });
});

describe("the instant of an epoch", () => {
  const instant = (text: string, system: string) => messageInstant(text, system, defaultLeapSeconds);

  it("is read in every scale that the project has", () => {
    for (const scale of scales) {
      const suffix = scale === "UTC" ? "Z" : "";
      const expected = parseInstant(`2026-03-01T00:00:00.25${suffix}`, scale, defaultLeapSeconds);
      expect(instant("2026-03-01T00:00:00.25", scale)).toEqual(expected);
      expect(instant("2026-060T00:00:00.250", scale.toLowerCase())).toEqual(expected);
    }
  });

  it("may carry Z in UTC and nowhere else", () => {
    expect(instant("2026-03-01T00:00:00Z", "UTC")).toEqual(instant("2026-03-01T00:00:00", "UTC"));
    expect(refusal(() => instant("2026-03-01T00:00:00Z", "TAI")).code).toBe("invalid-instant");
  });

  it("knows leap seconds: 2016-12-31 had one, 2017-12-31 had none (IERS Bulletin C 52)", () => {
    expect(instant("2016-366T23:59:60.5", "UTC").picoseconds).toBe(5e11);
    expect(refusal(() => instant("2017-365T23:59:60.5", "UTC")).code).toBe("invalid-instant");
  });

  it("drops idle zeros beyond the twelfth decimal, and nothing else", () => {
    expect(instant("2026-03-01T00:00:00.1234567890120000", "TT")).toEqual(
      instant("2026-03-01T00:00:00.123456789012", "TT"),
    );
    expect(refusal(() => instant("2026-03-01T00:00:00.1234567890123", "TT")).code).toBe("invalid-instant");
  });

  it.each(["UT1", "MET", "MRT", "SCLK", "GMST", "ABCD", "", "__proto__"])(
    "is refused in %j, with the reason",
    (system) => {
      expectRefusal(() => instant("2026-03-01T00:00:00", system), "TIME_SYSTEM", "cannot be turned into UTC, as it ");
    },
  );
});
