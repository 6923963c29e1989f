import { calendarDate, dayNumber, daysInMonth, isLeapYear } from "../calendar.ts";
import type { Instant } from "../instant.ts";
import type { LeapSecondTable } from "../leapSeconds.ts";
import { invalidCode, named, readOctets, requireLength, requirePField, writeOctets } from "./octets.ts";
import { instantOfUtc, type WrittenCode } from "./written.ts";

/** Calendar-segmented code: UTC as binary coded decimals. */
export interface CcsFormat {
  readonly code: "CCS";
  readonly variant: "month-day" | "day-of-year";
  /** 0 to 6, two decimals of a second each. */
  readonly subsecondOctets: number;
  readonly pField: boolean;
}

/** Bits: extension, identification 101, variant (1: day of year), subsecond octets (3). Source: CCSDS 301.0-B-4, 3.4.2. */
const pFieldOf = ({ variant, subsecondOctets }: CcsFormat): number =>
  0x50 | (variant === "day-of-year" ? 8 : 0) | subsecondOctets;

function words(octet: number): string {
  if (((octet >> 4) & 7) !== 5) return named(octet);
  const variant = (octet & 8) === 0 ? "month and day" : "day of year";
  const more = (octet & 0x80) === 0 ? "" : ", and announces a second octet, which the standard does not define";
  const count = octet & 7;
  return `CCS by ${variant} with ${count === 7 ? "a reserved number (bits 111)" : count} of subsecond octets${more}`;
}

/** The parts of the time field in order, with how many octets each takes. */
const partsOf = ({ variant }: CcsFormat): readonly (readonly [string, number])[] => [
  ["year", 2],
  ...(variant === "month-day"
    ? ([
        ["month", 1],
        ["day", 1],
      ] as const)
    : ([["day of year", 2]] as const)),
  ["hour", 1],
  ["minute", 1],
  ["second", 1],
];

/** Binary coded decimals. Errors: invalid-time-code naming part and octet. */
function decimal(text: string, part: string, octets: readonly number[]): number {
  for (const octet of octets) {
    if (octet >> 4 > 9 || (octet & 15) > 9) {
      const shown = writeOctets([octet]);
      const detail = `The time code ${text} has ${shown} in its ${part}, which is no pair of binary coded decimals.`;
      throw invalidCode(text, detail, "octets of two decimal digits each, 00 to 99");
    }
  }
  return Number(writeOctets(octets));
}

function requireRange(text: string, part: string, value: number, from: number, to: number): void {
  if (value >= from && value <= to) return;
  throw invalidCode(text, `The time code ${text} shows ${part} ${value}.`, `a ${part} from ${from} to ${to}`);
}

function dayOf(text: string, year: number, shown: ReadonlyMap<string, number>): number {
  const ordinal = shown.get("day of year");
  if (ordinal !== undefined) {
    requireRange(text, "day of year", ordinal, 1, isLeapYear(year) ? 366 : 365);
    return dayNumber(year, 1, 1) + ordinal - 1;
  }
  const month = shown.get("month")!;
  const day = shown.get("day")!;
  requireRange(text, "month", month, 1, 12);
  requireRange(text, "day", day, 1, daysInMonth(year, month));
  return dayNumber(year, month, day);
}

/**
 * CCS to the instant that it shows, exact.
 * Errors: invalid-time-code (hexadecimal, length, P-field, a digit over 9, a date or time that never was),
 * instant-out-of-range (not in 1972 to 2100). Source: CCSDS 301.0-B-4, 3.4.
 */
export function readCcs(text: string, format: CcsFormat, leapSeconds: LeapSecondTable): Instant {
  const octets = readOctets(text);
  if (format.pField) requirePField(text, octets[0], pFieldOf(format), words);
  const layout = `7 of date and time, ${format.subsecondOctets} of decimals`;
  const field = requireLength(text, octets, format.pField ? 1 : 0, 7 + format.subsecondOctets, layout);
  const shown = new Map<string, number>();
  let place = 0;
  for (const [part, count] of partsOf(format)) {
    shown.set(part, decimal(text, part, field.slice(place, place + count)));
    place += count;
  }
  const decimals = field.slice(7);
  decimal(text, "decimals of the second", decimals);
  const picoseconds = Number(writeOctets(decimals).padEnd(12, "0"));
  const hour = shown.get("hour")!;
  const minute = shown.get("minute")!;
  const secondOfMinute = shown.get("second")!;
  const day = dayOf(text, shown.get("year")!, shown);
  requireRange(text, "hour", hour, 0, 23);
  requireRange(text, "minute", minute, 0, 59);
  const isLeap = secondOfMinute === 60 && hour === 23 && minute === 59 && leapSeconds.secondsInDay(day) === 86_401;
  if (!isLeap) requireRange(text, "second", secondOfMinute, 0, 59);
  return instantOfUtc(text, { day, second: hour * 3600 + minute * 60 + secondOfMinute }, picoseconds, leapSeconds);
}

/** An instant in CCS, truncated to the last decimal that the code shows. No errors. Source: CCSDS 301.0-B-4, 3.4. */
export function writeCcs(instant: Instant, format: CcsFormat, leapSeconds: LeapSecondTable): WrittenCode {
  const { day, second } = leapSeconds.utcLabel(instant.seconds);
  const { year, month, day: dayOfMonth } = calendarDate(day);
  // The leap second is 23:59:60.
  const minutes = Math.min(Math.floor(second / 60), 1439);
  const two = (value: number): string => String(value).padStart(2, "0");
  const date =
    format.variant === "month-day"
      ? two(month) + two(dayOfMonth)
      : String(day - dayNumber(year, 1, 1) + 1).padStart(4, "0");
  const time = two(Math.floor(minutes / 60)) + two(minutes % 60) + two(second - minutes * 60);
  const digits = 2 * format.subsecondOctets;
  const decimals = String(instant.picoseconds).padStart(12, "0");
  const head = format.pField ? writeOctets([pFieldOf(format)]) : "";
  return {
    timeCode: `${head}${String(year).padStart(4, "0")}${date}${time}${decimals.slice(0, digits)}`,
    lostPicoseconds: Number(decimals.slice(digits)),
  };
}
