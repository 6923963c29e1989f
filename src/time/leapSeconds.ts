import { createHash } from "node:crypto";
import { dayNumber } from "./calendar.ts";
import type { Instant } from "./instant.ts";
import { shippedLeapSeconds } from "./leapSeconds.data.ts";

interface Step {
  /** First UTC day on which `offset` holds, in days since 1970-01-01. */
  readonly day: number;
  /** TAI - UTC, s. */
  readonly offset: number;
}

export interface UtcLabel {
  readonly day: number;
  /** Second of the day: 86 400 inside a positive leap second. */
  readonly second: number;
}

const ntpEpochDay = dayNumber(1900, 1, 1);

/**
 * TAI - UTC as a table of steps with an expiry, read from the published list format.
 * Validity: from 1972-01-01; after `expires` the last value is kept and the caller flags it.
 * Source: IERS Bulletin C and leap-seconds.list.
 */
export class LeapSecondTable {
  readonly steps: readonly Step[];
  readonly expires: Instant;
  readonly source: string;

  private constructor(steps: readonly Step[], expiresNtp: number, source: string) {
    this.steps = steps;
    this.source = source;
    const day = Math.floor(expiresNtp / 86_400) + ntpEpochDay;
    this.expires = { seconds: day * 86_400 + (expiresNtp % 86_400) + steps.at(-1)!.offset, picoseconds: 0 };
  }

  /**
   * Reads a list. Errors: a plain Error that names the line and what is wrong, for whoever replaced the file.
   * The digest line is checked when there is one; without one the table is refused.
   */
  static parse(text: string, name: string): LeapSecondTable {
    const steps: Step[] = [];
    let updated: string | undefined;
    let expires: string | undefined;
    let digest: string | undefined;
    const digested: string[] = [];
    for (const [index, line] of text.split(/\r?\n/).entries()) {
      const here = `${name}, line ${index + 1}`;
      const special = /^#([$@h])\s*(.*)$/.exec(line);
      if (special) {
        const value = special[2]!.trim();
        if (special[1] === "h") {
          digest = value
            .split(/\s+/)
            .map((word) => word.toLowerCase().padStart(8, "0"))
            .join("");
        } else if (!/^\d+$/.test(value)) {
          throw new Error(`${here}: expected a whole number of NTP seconds, found "${value}"`);
        } else if (special[1] === "$") updated = value;
        else expires = value;
        continue;
      }
      const content = line.replace(/#.*$/, "").trim();
      if (content === "") continue;
      const fields = /^(\d+)\s+(-?\d+)$/.exec(content);
      if (!fields) throw new Error(`${here}: expected "NTP-seconds TAI-UTC", found "${content.slice(0, 60)}"`);
      const ntp = Number(fields[1]);
      if (ntp % 86_400 !== 0) throw new Error(`${here}: a step must fall on midnight UTC, found ${ntp}`);
      const step = { day: ntp / 86_400 + ntpEpochDay, offset: Number(fields[2]) };
      const last = steps.at(-1);
      if (last && step.day <= last.day) throw new Error(`${here}: steps must rise in time`);
      if (last && Math.abs(step.offset - last.offset) !== 1) {
        throw new Error(`${here}: a step must be one second, found ${last.offset} to ${step.offset}`);
      }
      steps.push(step);
      digested.push(fields[1]!, fields[2]!);
    }
    const first = steps[0];
    if (!first || first.day !== dayNumber(1972, 1, 1) || first.offset !== 10) {
      throw new Error(`${name}: the first step must be 10 s on 1972-01-01 (2272060800 10)`);
    }
    if (updated === undefined) throw new Error(`${name}: the line of the last update ("#$ NTP-seconds") is missing`);
    if (expires === undefined) throw new Error(`${name}: the line of the expiry ("#@ NTP-seconds") is missing`);
    if (digest === undefined) throw new Error(`${name}: the digest line ("#h ...") is missing`);
    const computed = createHash("sha1")
      .update(updated + expires + digested.join(""))
      .digest("hex");
    if (computed !== digest) {
      throw new Error(`${name}: the digest does not match its numbers (stated ${digest}, computed ${computed})`);
    }
    const updatedOn = new Date((Number(updated) - 2_208_988_800) * 1000).toISOString().slice(0, 10);
    return new LeapSecondTable(steps, Number(expires), `IERS leap-second list updated ${updatedOn}, sha1 ${computed}`);
  }

  /** TAI - UTC on a UTC day (days since 1970-01-01, not before 1972-01-01), s. */
  offsetOnDay(day: number): number {
    for (let i = this.steps.length - 1; i >= 0; i--) {
      const step = this.steps[i]!;
      if (day >= step.day) return step.offset;
    }
    return this.steps[0]!.offset;
  }

  /** TAI - UTC at an instant, s; inside a leap second the old value. */
  taiMinusUtc(instant: Instant): number {
    return this.offsetOnDay(this.utcLabel(instant.seconds).day);
  }

  /** How long a UTC day is: 86 400 s, or 86 401 s or 86 399 s when it ends in a leap second. */
  secondsInDay(day: number): number {
    return 86_400 + this.offsetOnDay(day + 1) - this.offsetOnDay(day);
  }

  /** The UTC day and second of day of a TAI second (since 1970-01-01T00:00:00 TAI). */
  utcLabel(taiSeconds: number): UtcLabel {
    for (let i = this.steps.length - 1; i >= 0; i--) {
      const step = this.steps[i]!;
      if (taiSeconds < step.day * 86_400 + step.offset && i > 0) continue;
      const utc = taiSeconds - step.offset;
      const next = this.steps[i + 1];
      // The second before a positive step carries the number 86 400 of the old day.
      const day = next && utc >= next.day * 86_400 ? next.day - 1 : Math.floor(utc / 86_400);
      return { day, second: utc - day * 86_400 };
    }
    throw new RangeError("a leap-second table has at least one step");
  }
}

/** The table that is shipped. */
export const defaultLeapSeconds = LeapSecondTable.parse(shippedLeapSeconds, "shipped leap-second table");
