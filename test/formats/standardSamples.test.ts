import { readdirSync, readFileSync, statSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import {
  messageKind,
  parseOem,
  parseOmm,
  parseOpm,
  parseTle,
  splitElementSets,
  writeOem,
  writeOmm,
  writeOpm,
  writeTle,
} from "../../src/formats/index.ts";
import { openData } from "../published/sharedFolder.ts";
import { expectRefusal } from "./refusal.ts";
import { noMessage, realOmms, refused, remarked, staleChecksums } from "./standardSamples.data.ts";

const messages = openData("ccsds-ndm-samples");
const verification = openData("sgp4-verification");
const catalogue = openData("tle-catalogue/catalogue_20220810_subset.tle");

/** Files below a folder, with paths from there. */
function filesBelow(folder: string, path = ""): string[] {
  return readdirSync(`${folder}/${path}`).flatMap((name) => {
    const inside = path === "" ? name : `${path}/${name}`;
    return statSync(`${folder}/${inside}`).isDirectory() ? filesBelow(folder, inside) : [inside];
  });
}

const present = [
  ...(messages.absent === null ? filesBelow(messages.path).map((file) => [file, `${messages.path}/${file}`]) : []),
  ...(verification.absent === null
    ? filesBelow(verification.path).map((file) => [`sgp4-verification/${file}`, `${verification.path}/${file}`])
    : []),
].filter(([file]) => !file!.endsWith(".md") && !file!.endsWith(".TLE")) as [string, string][];

/** Reads a text by its kind, and again what is printed of it in every form. */
function readAndPrint(text: string): {
  kind: string;
  remarks: readonly string[];
  message: unknown;
  printed: unknown[];
} {
  const kind = messageKind(text);
  if (kind?.kind === "oem") {
    const { message, remarks } = parseOem(text);
    const printed = (["kvn", "xml"] as const).map((form) => parseOem(writeOem(message, form)).message);
    return { kind: kind.kind, remarks, message, printed };
  }
  if (kind?.kind === "opm") {
    const { message, remarks } = parseOpm(text);
    const printed = (["kvn", "xml"] as const).map((form) => parseOpm(writeOpm(message, form)).message);
    return { kind: kind.kind, remarks, message, printed };
  }
  if (kind?.kind === "omm") {
    const { message, remarks } = parseOmm(text);
    const forms = kind.form === "json" ? (["kvn", "xml", "json"] as const) : (["kvn", "xml"] as const);
    const printed = forms.map((form) => parseOmm(writeOmm(message, form)).message);
    return { kind: kind.kind, remarks, message, printed };
  }
  throw new Error(`no OEM, OPM or OMM but ${JSON.stringify(kind)}`);
}

describe.skipIf(messages.absent !== null || verification.absent !== null)(
  `every file of ccsds-ndm-samples and sgp4-verification ${messages.absent ?? ""}`,
  () => {
    it("is expected to be refused, remarked on, read or no message, and every expectation has its file", () => {
      const names = new Set(present.map(([file]) => file));
      for (const [file] of [...refused, ...remarked]) expect(names).toContain(file);
    });

    it.each(present)("%s", (file, path) => {
      if (noMessage.test(file)) {
        expect(messageKind(readFileSync(path, "utf8"))).toBeNull();
        if (!file.endsWith(".gz")) return;
      }
      if (file.endsWith("25544.txt")) {
        expect(messageKind(readFileSync(path, "utf8"))).toEqual({ kind: "tle", form: "lines" });
        return;
      }
      const text = file.endsWith(".gz") ? gunzipSync(readFileSync(path)).toString() : readFileSync(path, "utf8");
      const broken = refused.find(([name]) => name === file);
      if (broken !== undefined) {
        expectRefusal(() => readAndPrint(text), ...broken.slice(2));
        return;
      }
      const { message, remarks, printed } = readAndPrint(text);
      for (const again of printed) expect(again).toEqual(message);
      const words = file.startsWith(realOmms)
        ? ["CREATION_DATE is empty", "ORIGINATOR is empty"]
        : (remarked.find(([name]) => name === file)?.slice(2) ?? []);
      for (const word of words) expect(remarks.join(" ")).toContain(word);
      if (words.length === 0) expect(remarks).toEqual([]);
    });

    it("holds figure G-4 of the standard, value by value", () => {
      const { message } = parseOpm(
        readFileSync(`${messages.path}/odm-standard-figures/opm_g4_keplerian_covariance.kvn`, "utf8"),
      );
      // CCSDS 502.0-B-3, figure G-4.
      expect(message.state.xKm).toBe(6655.9942);
      expect(message.keplerian!.trueAnomalyDeg).toBe(41.922339);
      expect(message.covariance!.frame).toBe("RTN");
      expect(message.covariance!.lowerTriangle[20]).toBe(6.2244443386355e-10);
      expect(message.userDefined!.parameters).toEqual([{ name: "EARTH_MODEL", value: "WGS-84" }]);
    });

    it("gives the same elements from the two forms of each real message", () => {
      const folder = `${messages.path}/${realOmms}`;
      for (const name of readdirSync(`${folder}kvn`)) {
        const lines = parseOmm(readFileSync(`${folder}kvn/${name}`, "utf8")).message;
        const xml = parseOmm(readFileSync(`${folder}xml/${name.replace(".omm", ".xml")}`, "utf8")).message;
        expect(xml.elements).toEqual(lines.elements);
        expect(xml.tle).toEqual(lines.tle);
      }
    });

    it("gives the same elements from a two-line set and the OMM beside it, within the digits of the lines", () => {
      const folder = `${messages.path}/odm-standard-figures`;
      const { message: omm } = parseOmm(readFileSync(`${folder}/omm_celestrak_iss_25544.kvn`, "utf8"));
      const [set] = splitElementSets(readFileSync(`${folder}/tle_celestrak_iss_25544.txt`, "utf8"));
      const { message: tle } = parseTle(set!.line1, set!.line2);
      expect(set!.name).toBe(omm.metadata.objectName);
      expect(tle.epoch.text).toBe("2026-202T04:27:10.178208");
      expect(omm.elements.epoch.text).toBe("2026-07-21T04:27:10.178208");
      expect(tle.inclinationDeg.value).toBe(omm.elements.inclinationDeg);
      expect(tle.meanMotionRevPerDay.value).toBe(omm.elements.meanMotionRevPerDay);
      expect(tle.meanMotionDotRevPerDay2.value).toBe(omm.tle!.meanMotionDotRevPerDay2);
      expect(tle.eccentricity.value).toBeCloseTo(omm.elements.eccentricity, 7);
      expect(tle.bstarPerEarthRadius.value).toBeCloseTo(omm.tle!.bstarPerEarthRadius!, 8);
      expect(tle.revolutionAtEpoch.value).toBe(omm.tle!.revolutionAtEpoch);
    });
  },
);

describe.skipIf(verification.absent !== null)(`the SGP4 test satellites ${verification.absent ?? ""}`, () => {
  it("are read but for stale checksums; the run times behind column 69 are no part of a line", () => {
    const sets = splitElementSets(readFileSync(`${verification.path}/SGP4-VER.TLE`, "utf8"));
    expect(sets).toHaveLength(33);
    for (const { line1, line2 } of sets) {
      const cut = line2.slice(0, 69);
      if (line2.length > 69) expectRefusal(() => parseTle(line1, line2));
      if (staleChecksums.includes(line1.slice(2, 7))) {
        expectRefusal(() => parseTle(line1, cut), "column 69", "checksum");
        continue;
      }
      const { message } = parseTle(line1, cut);
      expect(writeTle(message)).toEqual({ line1, line2: cut });
    }
  });
});

describe.skipIf(catalogue.absent !== null)(`the catalogue of two-line elements ${catalogue.absent ?? ""}`, () => {
  it("is read whole, blank-padded numbers included, and printed back character by character", () => {
    const sets = splitElementSets(readFileSync(catalogue.path, "utf8"));
    expect(sets).toHaveLength(284);
    for (const { line1, line2 } of sets) {
      const { message, remarks } = parseTle(line1, line2);
      expect(remarks).toEqual([]);
      expect(writeTle(message)).toEqual({ line1, line2 });
    }
    expect(sets.filter(({ line1 }) => line1[2] === " ").length).toBeGreaterThan(0);
  });
});
