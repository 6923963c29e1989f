import { dayNumber } from "../calendar.ts";
import type { Instant } from "../instant.ts";
import type { LeapSecondTable } from "../leapSeconds.ts";
import { formatInstant } from "../scales.ts";
import {
  invalidCode,
  named,
  numberOctets,
  readNumber,
  readOctets,
  requireLength,
  requirePField,
  writeOctets,
} from "./octets.ts";
import { instantOfUtc, type WrittenCode } from "./written.ts";

/** Day-segmented code: UTC days since an epoch, milliseconds of the day, and what is below a millisecond. */
export interface CdsFormat {
  readonly code: "CDS";
  readonly dayOctets: 2 | 3;
  /** None, microseconds of the millisecond in two, or picoseconds of the millisecond in four. */
  readonly subMillisecondOctets: 0 | 2 | 4;
  /** An agency's own epoch as a UTC day since 1970-01-01; null: 1958-01-01. */
  readonly epochDay: number | null;
  readonly pField: boolean;
}

const epoch1958 = dayNumber(1958, 1, 1);
const subMillisecond = {
  0: { code: 0, unit: 1e9, limit: 1, name: "nothing" },
  2: { code: 1, unit: 1e6, limit: 1000, name: "microseconds of the millisecond" },
  4: { code: 2, unit: 1, limit: 1e9, name: "picoseconds of the millisecond" },
} as const;

/**
 * Bits: extension, identification 100, epoch (1: an agency's own), day segment (1: 24 bits), submillisecond segment (00
 * none, 01 microseconds, 10 picoseconds, 11 reserved). Source: CCSDS 301.0-B-4, 3.3.2.
 */
const pFieldOf = ({ epochDay, dayOctets, subMillisecondOctets }: CdsFormat): number =>
  0x40 | (epochDay === null ? 0 : 8) | (dayOctets === 3 ? 4 : 0) | subMillisecond[subMillisecondOctets].code;

function words(octet: number): string {
  if (((octet >> 4) & 7) !== 4) return named(octet);
  const epoch = (octet & 8) === 0 ? "the epoch 1958-01-01" : "an agency's own epoch";
  const below = ["no part", "microseconds", "picoseconds", "a reserved part (bits 11)"][octet & 3]!;
  const more = (octet & 0x80) === 0 ? "" : ", and announces a second octet, which the standard does not define";
  return `CDS with ${(octet & 4) === 0 ? 2 : 3} octets of days since ${epoch} and ${below} below the millisecond${more}`;
}

/**
 * CDS to the instant that it shows, exact.
 * Errors: invalid-time-code (hexadecimal, length, P-field, milliseconds beyond the day, 1000 microseconds and more),
 * instant-out-of-range (not in 1972 to 2100). Source: CCSDS 301.0-B-4, 3.3.
 */
export function readCds(text: string, format: CdsFormat, leapSeconds: LeapSecondTable): Instant {
  const { dayOctets, subMillisecondOctets } = format;
  const octets = readOctets(text);
  if (format.pField) requirePField(text, octets[0], pFieldOf(format), words);
  const layout = `${dayOctets} of days, 4 of milliseconds, ${subMillisecondOctets} below`;
  const field = requireLength(text, octets, format.pField ? 1 : 0, dayOctets + 4 + subMillisecondOctets, layout);
  const day = Number(readNumber(field.slice(0, dayOctets))) + (format.epochDay ?? epoch1958);
  const milliseconds = Number(readNumber(field.slice(dayOctets, dayOctets + 4)));
  const below = Number(readNumber(field.slice(dayOctets + 4)));
  const { unit, limit, name } = subMillisecond[subMillisecondOctets];
  if (below >= limit) {
    const detail = `The time code ${text} shows ${below} ${name}; there are only ${limit}.`;
    throw invalidCode(text, detail, `0 to ${limit - 1} ${name}`);
  }
  const most = leapSeconds.secondsInDay(day) * 1000 - 1;
  if (milliseconds > most) {
    throw invalidCode(
      text,
      `The time code ${text} shows millisecond ${milliseconds} of a UTC day that ends with ${most}.`,
      `0 to ${most} milliseconds of that day (86400999 only where a leap second ends it)`,
    );
  }
  const second = Math.floor(milliseconds / 1000);
  return instantOfUtc(text, { day, second }, (milliseconds % 1000) * 1e9 + below * unit, leapSeconds);
}

/**
 * An instant in CDS, truncated to the last unit that the code shows.
 * Errors: invalid-time-code when the day lies before the epoch or beyond the day segment. Source: CCSDS 301.0-B-4, 3.3.
 */
export function writeCds(instant: Instant, format: CdsFormat, leapSeconds: LeapSecondTable): WrittenCode {
  const { dayOctets, subMillisecondOctets } = format;
  const label = leapSeconds.utcLabel(instant.seconds);
  const day = label.day - (format.epochDay ?? epoch1958);
  const most = 256 ** dayOctets - 1;
  if (day < 0 || day > most) {
    const shown = formatInstant(instant, "UTC", leapSeconds);
    const detail = `CDS with ${dayOctets} octets of days cannot show ${shown}: it is day ${day} from the epoch.`;
    throw invalidCode(shown, detail, `an instant on days 0 to ${most} from the epoch`);
  }
  const { unit } = subMillisecond[subMillisecondOctets];
  const milliseconds = label.second * 1000 + Math.floor(instant.picoseconds / 1e9);
  const rest = instant.picoseconds % 1e9;
  const octets = [
    ...(format.pField ? [pFieldOf(format)] : []),
    ...numberOctets(BigInt(day), dayOctets),
    ...numberOctets(BigInt(milliseconds), 4),
    ...numberOctets(BigInt(Math.floor(rest / unit)), subMillisecondOctets),
  ];
  return { timeCode: writeOctets(octets), lostPicoseconds: rest % unit };
}
