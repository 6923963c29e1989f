import { describe, expect, it } from "vitest";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { readTle } from "../../src/wire/messages.ts";
import {
  alteredSatellites,
  loosest,
  misfitOf,
  readTestSatellites,
  testSatellitesAbsent,
  toleranceOf,
} from "./testSatellites.ts";

// Source: AIAA 2006-6753, its test satellites and the states that its program printed for them.
describe.skipIf(testSatellitesAbsent !== null)(
  `the test satellites of mean elements ${testSatellitesAbsent ?? ""}`,
  () => {
    const satellites = testSatellitesAbsent === null ? readTestSatellites() : [];

    it("are all there", () => {
      expect(satellites).toHaveLength(33);
      expect(satellites.reduce((sum, { states }) => sum + states.length, 0)).toBeGreaterThan(600);
    });

    it.each(satellites.filter(({ satellite }) => !alteredSatellites.includes(satellite)))(
      "$satellite: every printed state, to a centimetre where nothing else is said",
      (satellite) => {
        const { position, velocity } = misfitOf(satellite);
        const [km, kmPerS] = toleranceOf(satellite.satellite);
        expect(position).toBeLessThanOrEqual(km);
        expect(velocity).toBeLessThanOrEqual(kmPerS);
      },
    );

    it.each(alteredSatellites)("%s, altered without a new checksum, is refused with both digits", (name) => {
      const { line1, line2 } = satellites.find(({ satellite }) => satellite === name)!;
      expect(() => readTle(line1, line2, defaultLeapSeconds)).toThrow(
        /column 69: found "\d", expected the checksum \d/,
      );
    });

    it("holds one satellite less well, and needs to", () => {
      const { position } = misfitOf(satellites.find(({ satellite }) => satellite === loosest.satellite)!);
      expect(position, "the wider tolerance is no longer needed").toBeGreaterThan(1e-5);
    });
  },
);
