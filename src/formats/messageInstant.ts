import { type Instant, type LeapSecondTable, parseInstant, type Scale, scales } from "../time/index.ts";
import { broken } from "./message.ts";

/** Why a time system of the standard cannot be turned into an instant. */
const reasons: Readonly<Record<string, string>> = {
  UT1: "it follows the rotation of the Earth, which is measured and not computed",
  GMST: "it is an angle of the Earth, not a time",
  MET: "it counts from an event that the message names in words at most",
  MRT: "it counts from an event that the message names in words at most",
  SCLK: "it is the spacecraft's own clock, whose correction is what is sought",
};

/**
 * The instant that an epoch of a message means in its time system. Case of letters does not matter in the name.
 * Takes YYYY-MM-DDThh:mm:ss[.d...][Z] or YYYY-DDDThh:mm:ss[.d...][Z]; zeros beyond the twelfth decimal are dropped.
 * Errors: invalid-message for a time system that is none of src/time's scales (with the reason); invalid-instant and
 * instant-out-of-range as in src/time, among them a Z beside a time system other than UTC.
 * Source: CCSDS 502.0-B-3 sections 3.2.3.2, 7.5.10, 7.5.11.
 */
export function messageInstant(epoch: string, timeSystem: string, leapSeconds: LeapSecondTable): Instant {
  const name = timeSystem.toUpperCase();
  const scale = (scales as readonly string[]).includes(name) ? (name as Scale) : null;
  if (scale === null) {
    const why = Object.hasOwn(reasons, name) ? reasons[name]! : "it is not known here";
    throw broken(
      "TIME_SYSTEM",
      timeSystem,
      `one of ${scales.join(", ")}: this one cannot be turned into UTC, as ${why}`,
    );
  }
  const bare = withoutIdleZeros(epoch);
  return parseInstant(scale === "UTC" && !bare.endsWith("Z") ? `${bare}Z` : bare, scale, leapSeconds);
}

function withoutIdleZeros(epoch: string): string {
  const point = epoch.indexOf(".");
  if (point < 0) return epoch;
  const suffix = epoch.endsWith("Z") ? "Z" : "";
  const decimals = epoch.slice(point + 1, suffix === "" ? undefined : -1);
  let length = decimals.length;
  while (length > 12 && decimals[length - 1] === "0") length--;
  return `${epoch.slice(0, point + 1)}${decimals.slice(0, length)}${suffix}`;
}
