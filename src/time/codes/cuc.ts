import { dayNumber } from "../calendar.ts";
import type { Instant } from "../instant.ts";
import type { LeapSecondTable } from "../leapSeconds.ts";
import { formatInstant } from "../scales.ts";
import { invalidCode, named, numberOctets, readNumber, readOctets, requireLength, writeOctets } from "./octets.ts";
import { requireCoveredCode, type WrittenCode } from "./written.ts";

/** Unsegmented code: a count of seconds of TAI and binary fractions of one since an epoch. */
export interface CucFormat {
  readonly code: "CUC";
  /** 1 to 7. */
  readonly coarseOctets: number;
  /** 0 to 10; the least significant stands for 256^-fineOctets s. */
  readonly fineOctets: number;
  /** An agency's own epoch (level 2); null: 1958-01-01T00:00:00 TAI (level 1). */
  readonly epoch: Instant | null;
  readonly pField: boolean;
}

const epoch1958: Instant = { seconds: dayNumber(1958, 1, 1) * 86_400, picoseconds: 0 };
const second = 1_000_000_000_000n;

const epochOf = ({ epoch }: CucFormat): Instant => epoch ?? epoch1958;
const layoutOf = ({ coarseOctets, fineOctets }: CucFormat): string =>
  `${coarseOctets} of whole seconds, ${fineOctets} of fractions`;

/**
 * One octet where it is enough, else two: bits extension, identification (3), coarse octets - 1 (2), fine octets (2); then
 * extension, additional coarse octets (2), additional fine octets (3), two reserved. Source: CCSDS 301.0-B-4, 3.2.2.
 */
function pFieldOf({ coarseOctets, fineOctets, epoch }: CucFormat): number[] {
  const moreCoarse = Math.max(0, coarseOctets - 4);
  const moreFine = Math.max(0, fineOctets - 3);
  const identification = epoch === null ? 1 : 2;
  const first = (identification << 4) | ((coarseOctets - moreCoarse - 1) << 2) | (fineOctets - moreFine);
  return moreCoarse + moreFine === 0 ? [first] : [0x80 | first, (moreCoarse << 5) | (moreFine << 2)];
}

const wordsOf = (level: number, coarse: number, fine: number): string =>
  `CUC with ${coarse} coarse and ${fine} fine octets and ${level === 1 ? "the epoch 1958-01-01 TAI" : "an agency's own epoch"}`;

/** Length of the P-field at the head of a code. Errors: invalid-time-code when it is not that of the format. */
function checkedPField(text: string, octets: readonly number[], format: CucFormat): number {
  const first = octets[0]!;
  const wanted = writeOctets(pFieldOf(format));
  const level = format.epoch === null ? 1 : 2;
  const given = wordsOf(level, format.coarseOctets, format.fineOctets);
  const right = `a P-field of ${wanted}, or a format that agrees with the code`;
  const refuse = (what: string) => invalidCode(text, `${what}; the format given is ${given}.`, right);
  const identification = (first >> 4) & 7;
  if (identification !== 1 && identification !== 2) {
    throw refuse(`The P-field ${writeOctets([first])} says ${named(first)}`);
  }
  let coarse = ((first >> 2) & 3) + 1;
  let fine = first & 3;
  const isLong = (first & 0x80) !== 0;
  const next = octets[1];
  if (isLong) {
    if (next === undefined) throw refuse("The P-field announces a second octet, which is missing");
    if ((next & 0x80) !== 0) throw refuse("The P-field announces a third octet, which the standard does not define");
    if ((next & 3) !== 0) throw refuse("The last two bits of the P-field's second octet are reserved and must be zero");
    coarse += (next >> 5) & 3;
    fine += (next >> 2) & 7;
  }
  if (coarse !== format.coarseOctets || fine !== format.fineOctets || identification !== level) {
    const shown = writeOctets(octets.slice(0, isLong ? 2 : 1));
    throw refuse(`The P-field ${shown} says ${wordsOf(identification, coarse, fine)}`);
  }
  return isLong ? 2 : 1;
}

/** Picoseconds since the epoch, to the nearest, halves upwards. */
function picosecondsOf(count: bigint, { fineOctets }: CucFormat): bigint {
  const bits = BigInt(8 * fineOctets);
  return ((count * second * 2n) / (1n << bits) + 1n) / 2n;
}

/**
 * CUC to the instant that it shows, to the nearest picosecond.
 * Errors: invalid-time-code (hexadecimal, length, P-field, reserved bits), instant-out-of-range (not in 1972 to 2100).
 * Source: CCSDS 301.0-B-4, 3.2.
 */
export function readCuc(text: string, format: CucFormat, leapSeconds: LeapSecondTable): Instant {
  const octets = readOctets(text);
  const pOctets = format.pField ? checkedPField(text, octets, format) : 0;
  const field = requireLength(text, octets, pOctets, format.coarseOctets + format.fineOctets, layoutOf(format));
  const { seconds, picoseconds } = epochOf(format);
  const total = BigInt(seconds) * second + BigInt(picoseconds) + picosecondsOf(readNumber(field), format);
  return requireCoveredCode(text, instantOf(total), leapSeconds);
}

function instantOf(total: bigint): Instant {
  const rest = ((total % second) + second) % second;
  return { seconds: Number((total - rest) / second), picoseconds: Number(rest) };
}

/**
 * An instant in CUC. The count is the last one reached: a code shows time down to its resolution. One that reads back as
 * exactly this instant is taken though it is reached within the half picosecond after it, so that code to instant to code
 * changes nothing. Where the code is finer than a picosecond, instant to code to instant changes nothing.
 * Errors: invalid-time-code when the instant lies before the epoch or beyond the last count.
 * Source: CCSDS 301.0-B-4, 3.2.
 */
export function writeCuc(instant: Instant, format: CucFormat, leapSeconds: LeapSecondTable): WrittenCode {
  const { coarseOctets, fineOctets } = format;
  const epoch = epochOf(format);
  const elapsed =
    BigInt(instant.seconds - epoch.seconds) * second + BigInt(instant.picoseconds) - BigInt(epoch.picoseconds);
  const length = coarseOctets + fineOctets;
  const reached = (elapsed << BigInt(8 * fineOctets)) / second;
  const isNext = picosecondsOf(reached, format) !== elapsed && picosecondsOf(reached + 1n, format) === elapsed;
  const count = isNext ? reached + 1n : reached;
  if (elapsed < 0n || count >> BigInt(8 * length) !== 0n) throw beyondCount(instant, format, leapSeconds);
  const octets = [...(format.pField ? pFieldOf(format) : []), ...numberOctets(count, length)];
  return { timeCode: writeOctets(octets), lostPicoseconds: Number(elapsed - picosecondsOf(count, format)) };
}

function beyondCount(instant: Instant, { coarseOctets, epoch }: CucFormat, leapSeconds: LeapSecondTable) {
  const shown = `${formatInstant(instant, "TAI", leapSeconds)} TAI`;
  const from = epoch === null ? "1958-01-01T00:00:00 TAI" : `${formatInstant(epoch, "TAI", leapSeconds)} TAI`;
  const detail = `CUC with ${coarseOctets} coarse octets and the epoch ${from} cannot show ${shown}.`;
  return invalidCode(shown, detail, `an instant from ${from} to ${256 ** coarseOctets} s later (not included)`);
}
