import { readdirSync, readFileSync } from "node:fs";
import { isDeepStrictEqual } from "node:util";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  messageKind,
  ommFromJson,
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
import { Problem } from "../../src/problem/index.ts";
import { openData } from "../published/sharedFolder.ts";
import {
  inventedLine1,
  inventedLine2,
  inventedOem,
  inventedOmm,
  inventedOmmJson,
  inventedOpm,
} from "./inventedMessages.ts";
import { spoilt } from "./mutations.ts";

const runs = { seed: 20330304, numRuns: 10_000 };
const mostMilliseconds = 50;

/** What came of one text: read (and printed back to an equal record), or refused. */
function tried(read: () => boolean): "read" | "refused" {
  try {
    if (!read()) throw new Error("what was read is not printed back to an equal record");
    return "read";
  } catch (error) {
    if (error instanceof Problem && (error.code as string) === "invalid-message" && error.faults.length === 1)
      return "refused";
    throw error;
  }
}

/**
 * Holds the time of a piece of work under the limit. A machine that is busy with other things is no fault of the work: what
 * counts is the lesser of the time on the clock and that of the processor, and a slow piece is timed again.
 */
function timed<T>(work: () => T): T {
  for (let attempt = 1; ; attempt++) {
    const before = process.cpuUsage();
    const begin = performance.now();
    const result = work();
    const onClock = performance.now() - begin;
    if (onClock <= mostMilliseconds) return result;
    const { user, system } = process.cpuUsage(before);
    const took = Math.min(onClock, (user + system) / 1000);
    if (took <= mostMilliseconds) return result;
    if (attempt === 8) throw new Error(`took ${took} ms`);
  }
}

/** Runs the cases, and wants some of them read and some refused: otherwise nothing was tried. */
function fuzz(texts: readonly string[], read: (text: string) => boolean): void {
  const counts = { read: 0, refused: 0 };
  fc.assert(
    fc.property(spoilt(texts), (text) => {
      counts[timed(() => tried(() => read(text)))]++;
    }),
    runs,
  );
  expect(counts.read).toBeGreaterThan(50);
  expect(counts.refused).toBeGreaterThan(1000);
}

const form = (text: string): "kvn" | "xml" =>
  text
    .replace(/^\ufeff/, "")
    .trimStart()
    .startsWith("<")
    ? "xml"
    : "kvn";

/** Figures of the standard, when the open data are there, beside what was invented. */
const figures = openData("ccsds-ndm-samples/odm-standard-figures");
const figuresNamed = (start: string): string[] =>
  figures.absent === null
    ? readdirSync(figures.path)
        .filter((name) => name.startsWith(start))
        .map((name) => readFileSync(`${figures.path}/${name}`, "utf8"))
    : [];

const xml = {
  oem: writeOem(parseOem(inventedOem).message, "xml"),
  opm: writeOpm(parseOpm(inventedOpm).message, "xml"),
  omm: writeOmm(parseOmm(inventedOmm).message, "xml"),
};

describe("spoilt messages are read or refused, never anything else", () => {
  it("OEM", () => {
    fuzz([inventedOem, xml.oem, ...figuresNamed("oem")], (text) => {
      const { message } = parseOem(text);
      return isDeepStrictEqual(parseOem(writeOem(message, form(text))).message, message);
    });
  });

  it("OPM", () => {
    fuzz([inventedOpm, xml.opm, ...figuresNamed("opm")], (text) => {
      const { message } = parseOpm(text);
      return isDeepStrictEqual(parseOpm(writeOpm(message, form(text))).message, message);
    });
  });

  it("OMM in lines and XML", () => {
    fuzz([inventedOmm, xml.omm, ...figuresNamed("omm")], (text) => {
      const { message } = parseOmm(text);
      const again = text.replace(/^\ufeff/, "").trimStart();
      const same = again.startsWith("{") || again.startsWith("[") ? "json" : form(text);
      return isDeepStrictEqual(parseOmm(writeOmm(message, same)).message, message);
    });
  });

  it("OMM in JSON", () => {
    const pretty = JSON.stringify(JSON.parse(inventedOmmJson), null, 1);
    fuzz([pretty, writeOmm(parseOmm(inventedOmm).message, "json")], (text) => {
      const { message } = parseOmm(text);
      return isDeepStrictEqual(parseOmm(writeOmm(message, "json")).message, message);
    });
  });

  it("OMM from any JSON value", () => {
    fc.assert(
      fc.property(fc.jsonValue(), fc.constantFrom("EPOCH", "MEAN_MOTION", "COMMENT", "OBJECT_NAME"), (value, key) => {
        tried(() => ommFromJson(value) !== undefined);
        tried(() => ommFromJson({ ...JSON.parse(inventedOmmJson)[0], [key]: value }) !== undefined);
      }),
      { ...runs, numRuns: 2000 },
    );
  });

  it("two-line elements", () => {
    fuzz([`${inventedLine1}\n${inventedLine2}`], (text) => {
      const [first = "", second = ""] = text.split("\n");
      const { message } = parseTle(first, second);
      const { line1, line2 } = writeTle(message);
      return isDeepStrictEqual(parseTle(line1, line2).message, message);
    });
  });

  it("texts of two-line elements", () => {
    fuzz([`${inventedLine1}\n${inventedLine2}\nKITE\n${inventedLine1}\n${inventedLine2}\n`], (text) => {
      return splitElementSets(text).every(({ line1, line2 }) => line1.startsWith("1 ") && line2.startsWith("2 "));
    });
  });

  it("any of them, whose kind is asked", () => {
    const texts = [inventedOem, inventedOpm, inventedOmm, inventedOmmJson, xml.oem, xml.opm, xml.omm];
    fc.assert(
      fc.property(spoilt(texts), (text) => {
        timed(() => tried(() => messageKind(text) !== undefined));
      }),
      runs,
    );
  });
});

describe("long texts take linear time", () => {
  const size = 100_000;
  const long = (piece: string): string => piece.repeat(Math.ceil(size / piece.length)).slice(0, size);
  const states = Array.from({ length: 1200 }, (_, i) => {
    const minute = String(i % 60).padStart(2, "0");
    return `2033-03-0${3 + Math.floor(i / 1440)}T${String(Math.floor(i / 60) % 24).padStart(2, "0")}:${minute}:00 7000.5 1 -2 0.25 7.5 -0.125`;
  });
  const oemHead = inventedOem.slice(0, inventedOem.indexOf("2033-03-03T00:00:00 7000.5"));
  const xmlHead = '<?xml version="1.0"?>\n<omm id="CCSDS_OMM_VERS" version="3.0">';

  it.each<readonly [string, string]>([
    ["blanks", long(" ")],
    ["line ends", long("\n\r")],
    ["one long line", `CCSDS_OMM_VERS = 3.0\nOBJECT_NAME = ${long("x ")}`],
    ["digits", `CCSDS_OMM_VERS = 3.0\nMEAN_MOTION = ${long("9")}`],
    ["an epoch of many decimals", `CCSDS_OMM_VERS = 3.0\nEPOCH = 2033-03-03T00:00:00.${long("0")}x`],
    ["comments", `CCSDS_OEM_VERS = 3.0\n${long("COMMENT x\n")}`],
    ["equals signs", `CCSDS_OPM_VERS = 3.0\n${long("=")}`],
    ["opening brackets", `CCSDS_OMM_VERS = 3.0\nMEAN_MOTION = ${long("[")}]`],
    ["unknown keywords", `CCSDS_OPM_VERS = 3.0\n${long("KITE = 1\n")}`],
    ["many states", `${oemHead}${states.join("\n")}\n`],
    ["states and a last line that is none", `${oemHead}${states.join("\n")}\n${long("1 ")}`],
    ["angle brackets", long("<")],
    ["open elements", `${xmlHead}${long("<a>")}`],
    ["empty elements", `${xmlHead}${long("<a/>")}</omm>`],
    ["open comments", `${xmlHead}${long("<!--")}`],
    ["ampersands", `${xmlHead}${long("&")}`],
    ["CDATA", `${xmlHead}${long("<![CDATA[")}`],
    ["brackets of JSON", long("[")],
    ["braces of JSON", long('{"a":')],
    ["a JSON key", `{"${long("A")}":1}`],
    ["line 1 for ever", long(`${inventedLine1}\n`)],
    ["pairs of lines", long(`${inventedLine1}\n${inventedLine2}\n`)],
  ])("%s", (_, text) => {
    for (const read of [parseOem, parseOpm, parseOmm, splitElementSets, messageKind]) {
      timed(() => tried(() => read(text) !== undefined));
    }
    timed(() => tried(() => parseTle(text, text) !== undefined));
  });
});
