import { at, Problem } from "../problem/index.ts";
import type { LeapSecondTable, TimeCodeFormat } from "../time/index.ts";
import { type InstantIn, readInstant } from "./instants.ts";
import type { TimeCodeFormatIn } from "./timeCodeSchemas.ts";

/**
 * A time code's format as it stands in a request.
 * Errors: invalid-instant, instant-out-of-range, invalid-time-code (CDS counts from a midnight); all at "epoch".
 */
export function readTimeCodeFormat(given: TimeCodeFormatIn, leapSeconds: LeapSecondTable): TimeCodeFormat {
  const pField = "pField" in given && given.pField === true;
  switch (given.format) {
    case "CUC": {
      const { coarseOctets, fineOctets, epoch: own } = given;
      const epoch = own === undefined ? null : at(["epoch"], () => readInstant(own, leapSeconds));
      return { code: "CUC", coarseOctets, fineOctets, epoch, pField };
    }
    case "CDS": {
      const { dayOctets, subMillisecondOctets, epoch: own } = given;
      const epochDay = own === undefined ? null : at(["epoch"], () => readMidnight(own, leapSeconds));
      return { code: "CDS", dayOctets, subMillisecondOctets, epochDay, pField };
    }
    case "CCS":
      return { code: "CCS", variant: given.variant, subsecondOctets: given.subsecondOctets, pField };
    default:
      return { code: given.format, digits: given.digits ?? null, terminator: given.terminator ?? null };
  }
}

/** A UTC day since 1970-01-01 from the instant at which it begins. */
function readMidnight(value: InstantIn, leapSeconds: LeapSecondTable): number {
  const instant = readInstant(value, leapSeconds);
  const { day, second } = leapSeconds.utcLabel(instant.seconds);
  if (second === 0 && instant.picoseconds === 0) return day;
  throw new Problem("invalid-time-code", "CDS counts whole days: its epoch must be a midnight of UTC.", [
    { place: [], received: value, expected: "an instant at 00:00:00 UTC" },
  ]);
}
