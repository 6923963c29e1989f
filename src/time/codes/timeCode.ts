import type { Instant } from "../instant.ts";
import type { LeapSecondTable } from "../leapSeconds.ts";
import { type AsciiFormat, readAscii, writeAscii } from "./ascii.ts";
import { type CcsFormat, readCcs, writeCcs } from "./ccs.ts";
import { type CdsFormat, readCds, writeCds } from "./cds.ts";
import { type CucFormat, readCuc, writeCuc } from "./cuc.ts";
import type { WrittenCode } from "./written.ts";

/** A time code of CCSDS 301.0-B-4 with all that must be known to read it. */
export type TimeCodeFormat = CucFormat | CdsFormat | CcsFormat | AsciiFormat;

/**
 * The instant that a time code shows: hexadecimal digits, or text for the ASCII codes.
 * Errors: invalid-time-code, instant-out-of-range; the place is the code itself.
 */
export function readTimeCode(text: string, format: TimeCodeFormat, leapSeconds: LeapSecondTable): Instant {
  switch (format.code) {
    case "CUC":
      return readCuc(text, format, leapSeconds);
    case "CDS":
      return readCds(text, format, leapSeconds);
    case "CCS":
      return readCcs(text, format, leapSeconds);
    default:
      return readAscii(text, format, leapSeconds);
  }
}

/**
 * An instant in a time code, truncated to what the code can show, and what was lost by it.
 * Errors: invalid-time-code when the code cannot show it.
 */
export function writeTimeCode(instant: Instant, format: TimeCodeFormat, leapSeconds: LeapSecondTable): WrittenCode {
  switch (format.code) {
    case "CUC":
      return writeCuc(instant, format, leapSeconds);
    case "CDS":
      return writeCds(instant, format, leapSeconds);
    case "CCS":
      return writeCcs(instant, format, leapSeconds);
    default:
      return writeAscii(instant, format, leapSeconds);
  }
}
