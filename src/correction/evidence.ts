import { createHash } from "node:crypto";
import canonicalize from "canonicalize";
import { invariant } from "../problem/index.ts";
import { formatInstant } from "../time/index.ts";
import { constants } from "../units/index.ts";
import { ephemerisUsed, type Footing } from "./setting.ts";

/** What makes a result repeatable. */
export interface Evidence {
  readonly inputsSha256: string;
  readonly constants: Readonly<Record<string, number>>;
  readonly leapSeconds: { readonly source: string; readonly expires: string };
  readonly ephemeris: string | null;
  readonly version: string;
}

/** SHA-256 of the RFC 8785 canonical JSON of a value, hexadecimal. */
export function canonicalDigest(value: unknown): string {
  const text = canonicalize(value);
  invariant(text !== undefined, "only JSON values are digested");
  return createHash("sha256").update(text).digest("hex");
}

const constantSet: Readonly<Record<string, number>> = Object.fromEntries(
  Object.entries(constants).map(([name, { value }]) => [name, value]),
);

export function makeEvidence(request: unknown, setting: Footing, version: string): Evidence {
  const { leapSeconds } = setting;
  return {
    inputsSha256: canonicalDigest(request),
    constants: constantSet,
    leapSeconds: { source: leapSeconds.source, expires: formatInstant(leapSeconds.expires, "UTC", leapSeconds) },
    ephemeris: ephemerisUsed(setting),
    version,
  };
}
