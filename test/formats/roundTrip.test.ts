import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  parseOem,
  parseOmm,
  parseOpm,
  parseTle,
  writeOem,
  writeOmm,
  writeOpm,
  writeTle,
} from "../../src/formats/index.ts";
import { elementLines, oems, omms, opms, tles } from "./generators.ts";

const runs = { seed: 20330303, numRuns: 300 };

/** What JSON keeps of an OMM: one list of comments, at the head. */
function gathered(omm: ReturnType<typeof parseOmm>["message"]): typeof omm {
  const blocks = [omm.header, omm.metadata, omm.elements, omm.spacecraft, omm.tle, omm.covariance, omm.userDefined];
  const comments = blocks.flatMap((block) => block?.comments ?? []);
  const bare = <T extends object | null>(block: T): T => (block === null ? block : { ...block, comments: [] });
  return {
    ...omm,
    header: { ...omm.header, comments },
    metadata: bare(omm.metadata),
    elements: bare(omm.elements),
    spacecraft: bare(omm.spacecraft),
    tle: bare(omm.tle),
    covariance: bare(omm.covariance),
    userDefined: bare(omm.userDefined),
  };
}

describe("a record that is printed and read again is equal", () => {
  it.each(["kvn", "xml"] as const)("OEM (%s)", (form) => {
    fc.assert(
      fc.property(oems, (oem) => {
        expect(parseOem(writeOem(oem, form)).message).toEqual(oem);
      }),
      { ...runs, numRuns: 150 },
    );
  });

  it.each(["kvn", "xml"] as const)("OPM (%s)", (form) => {
    fc.assert(
      fc.property(opms, (opm) => {
        expect(parseOpm(writeOpm(opm, form)).message).toEqual(opm);
      }),
      runs,
    );
  });

  it.each(["kvn", "xml"] as const)("OMM (%s)", (form) => {
    fc.assert(
      fc.property(omms, (omm) => {
        expect(parseOmm(writeOmm(omm, form)).message).toEqual(omm);
      }),
      runs,
    );
  });

  it("OMM (json), its comments gathered at the head", () => {
    fc.assert(
      fc.property(omms, (omm) => {
        expect(parseOmm(writeOmm(omm, "json")).message).toEqual(gathered(omm));
      }),
      runs,
    );
  });

  it("two-line elements, character by character", () => {
    fc.assert(
      fc.property(elementLines, ({ line1, line2 }) => {
        expect(writeTle(parseTle(line1, line2).message)).toEqual({ line1, line2 });
      }),
      runs,
    );
    fc.assert(
      fc.property(tles, (tle) => {
        const { line1, line2 } = writeTle(tle);
        expect(parseTle(line1, line2).message).toEqual(tle);
      }),
      runs,
    );
  });
});
