import { dayNumber } from "../time/index.ts";

/**
 * The values of orbit messages: numbers, whole numbers, epochs, texts.
 * Source: CCSDS 502.0-B-3 section 7.5. Read more widely than written there where no doubt can arise: a decimal point may
 * stand at either end of the digits, and there may be more than 16 of them.
 */

const numberShape = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;

/** The double nearest to a decimal number; null when it is none or beyond the range of a double. */
export function readNumber(text: string): number | null {
  if (!numberShape.test(text)) return null;
  const value = Number(text);
  return Number.isFinite(value) ? value : null;
}

/** A whole number of at most 2^53 - 1 in size; null when it is none. */
export function readWhole(text: string): number | null {
  if (!/^[+-]?\d+$/.test(text)) return null;
  const value = Number(text) + 0;
  return Number.isSafeInteger(value) ? value : null;
}

/** The shortest decimal that reads back to the same double. */
export const numberText = (value: number): string => (Object.is(value, -0) ? "-0" : String(value));

/** An epoch in a form that compares: day number (days since 1970-01-01), second of the day, decimals of the second. */
export interface EpochKey {
  readonly day: number;
  readonly second: number;
  readonly decimals: string;
}

const epochShape = /^(\d{4})-(?:(\d{2})-(\d{2})|(\d{3}))T(\d{2}):(\d{2}):(\d{2})(?:\.(\d+))?Z?$/;

/** What an epoch looks like, for sentences that say what would be right. */
export const epochExpected = "an epoch such as 2026-03-01T00:00:00.5 or 2026-060T00:00:00.5";

/**
 * Reads YYYY-MM-DDThh:mm:ss[.d...][Z] or YYYY-DDDThh:mm:ss[.d...][Z]; null when it is none or no such day or time exists.
 * 23:59:60 is taken as written: whether there was a leap second shows when the epoch becomes an instant. Mission-elapsed
 * times may lie on day 000. Source: CCSDS 502.0-B-3 sections 7.5.10 and 3.2.3.2.
 */
export function readEpoch(text: string): EpochKey | null {
  const m = epochShape.exec(text);
  if (!m) return null;
  const [, yearText, monthText, dayText, ordinalText, hourText, minuteText, secondText, decimals = ""] = m;
  const year = Number(yearText);
  const first = dayNumber(year, 1, 1);
  let day: number;
  if (ordinalText !== undefined) {
    const ordinal = Number(ordinalText);
    if (ordinal > dayNumber(year + 1, 1, 1) - first) return null;
    day = first + ordinal - 1;
  } else {
    const month = Number(monthText);
    if (month < 1 || month > 12) return null;
    day = dayNumber(year, month, Number(dayText));
    const afterLast = month === 12 ? dayNumber(year + 1, 1, 1) : dayNumber(year, month + 1, 1);
    if (Number(dayText) < 1 || day >= afterLast) return null;
  }
  const hour = Number(hourText);
  const minute = Number(minuteText);
  const second = Number(secondText);
  if (hour > 23 || minute > 59 || second > (hour === 23 && minute === 59 ? 60 : 59)) return null;
  return { day, second: hour * 3600 + minute * 60 + second, decimals };
}

/** Negative when a lies before b. Epochs of one time system only. */
export function compareEpochs(a: EpochKey, b: EpochKey): number {
  if (a.day !== b.day) return a.day - b.day;
  if (a.second !== b.second) return a.second - b.second;
  const length = Math.max(a.decimals.length, b.decimals.length);
  const left = a.decimals.padEnd(length, "0");
  const right = b.decimals.padEnd(length, "0");
  return left < right ? -1 : left > right ? 1 : 0;
}

/** A text value: line breaks and tabs become blanks, and none stands at its ends. */
export const tidyText = (text: string): string => text.replace(/[\t\r\n]+/g, " ").trim();

/** A comment: as a text value, but blanks at its beginning are kept (CCSDS 502.0-B-3 section 7.8.5). */
export const tidyComment = (text: string): string => text.replace(/[\t\r\n]+/g, " ").trimEnd();

/** Whether a text holds a character that no message may hold: a control character, or half of a surrogate pair. */
export function hasUnreadableCharacter(text: string): boolean {
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    if (code >= 0x20 && code < 0x7f) continue;
    if (code === 0x09 || code === 0x0a || code === 0x0d) continue;
    if (code < 0x20 || code === 0x7f || code >= 0xfffe) return true;
    if (code >= 0xdc00 && code <= 0xdfff) return true;
    if (code >= 0xd800 && code <= 0xdbff) {
      const next = text.charCodeAt(i + 1);
      if (!(next >= 0xdc00 && next <= 0xdfff)) return true;
      i++;
    }
  }
  return false;
}

/** Whether every character is printable ASCII, a tab or a line end. */
export function isAscii(text: string): boolean {
  for (let i = 0; i < text.length; i++) {
    if (text.charCodeAt(i) > 0x7e) return false;
  }
  return true;
}
