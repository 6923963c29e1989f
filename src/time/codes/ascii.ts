import { Problem } from "../../problem/index.ts";
import { calendarDate, dayNumber } from "../calendar.ts";
import type { Instant } from "../instant.ts";
import type { LeapSecondTable } from "../leapSeconds.ts";
import { formatInstant, parseInstant } from "../scales.ts";
import { invalidCode } from "./octets.ts";
import type { WrittenCode } from "./written.ts";

/** Time as text, UTC: code A with month and day, code B with the day of year. */
export interface AsciiFormat {
  readonly code: "ASCII-A" | "ASCII-B";
  /** Decimals of the second, 0 to 12. Null: written with twelve, read with any number up to twelve. */
  readonly digits: number | null;
  /** Whether Z ends it. Null: written with it, read with and without. */
  readonly terminator: boolean | null;
}

const shapes = {
  "ASCII-A": { pattern: /^\d{4}-\d\d-\d\dT/, example: "2026-03-01T00:00:00.5Z" },
  "ASCII-B": { pattern: /^\d{4}-\d{3}T/, example: "2026-060T00:00:00.5Z" },
} as const;

function requireFormat(text: string, { code, digits, terminator }: AsciiFormat): void {
  const { pattern, example } = shapes[code];
  const refuse = (detail: string, expected: string) => invalidCode(text, `"${text.slice(0, 80)}" ${detail}.`, expected);
  if (!pattern.test(text)) throw refuse(`is no ${code} time code`, `text such as ${example}`);
  const decimals = /\.(\d+)/.exec(text)?.[1]?.length ?? 0;
  if (digits !== null && decimals !== digits) {
    throw refuse(`has ${decimals} decimals where the format takes ${digits}`, `${digits} decimals of the second`);
  }
  const ends = text.endsWith("Z");
  if (terminator !== null && ends !== terminator) {
    throw refuse(`ends ${ends ? "with" : "without"} Z`, terminator ? "Z at the end" : "no Z at the end");
  }
}

/**
 * ASCII time code A or B to the instant that it shows, exact; with or without Z it is UTC.
 * Errors: invalid-time-code (shape, a time that never was, more than twelve decimals, digits or Z other than the format's),
 * instant-out-of-range (not in 1972 to 2100). Source: CCSDS 301.0-B-4, 3.5.
 */
export function readAscii(text: string, format: AsciiFormat, leapSeconds: LeapSecondTable): Instant {
  requireFormat(text, format);
  try {
    return parseInstant(text.endsWith("Z") ? text : `${text}Z`, "UTC", leapSeconds);
  } catch (error) {
    if (!(error instanceof Problem) || error.code !== "invalid-instant") throw error;
    throw invalidCode(text, error.message, error.faults[0]!.expected);
  }
}

/** An instant as ASCII time code A or B, truncated to its digits. No errors. Source: CCSDS 301.0-B-4, 3.5. */
export function writeAscii(instant: Instant, format: AsciiFormat, leapSeconds: LeapSecondTable): WrittenCode {
  const text = formatInstant(instant, "UTC", leapSeconds);
  const digits = format.digits ?? 12;
  const { day } = leapSeconds.utcLabel(instant.seconds);
  const { year } = calendarDate(day);
  const ordinal = String(day - dayNumber(year, 1, 1) + 1).padStart(3, "0");
  const date = format.code === "ASCII-A" ? text.slice(0, 10) : `${text.slice(0, 4)}-${ordinal}`;
  const decimals = text.slice(20, 32);
  const fraction = digits === 0 ? "" : `.${decimals.slice(0, digits)}`;
  return {
    timeCode: `${date}${text.slice(10, 19)}${fraction}${format.terminator === false ? "" : "Z"}`,
    lostPicoseconds: Number(decimals.slice(digits)),
  };
}
