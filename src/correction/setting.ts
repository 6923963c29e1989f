import { type EarthOrientation, sunMoonSource } from "../bodies/index.ts";
import { buildTrajectory, type Trajectory, type TrajectoryDescription } from "../orbit/index.ts";
import { at, type Notice } from "../problem/index.ts";
import { type PhysicalTermName, ProperTime, physicalTermNames, rateTerms } from "../relativity/index.ts";
import {
  coveredYears,
  earlier,
  formatInstant,
  type Instant,
  type LeapSecondTable,
  later,
  secondsBetween,
} from "../time/index.ts";
import { isInside, outsideSpan } from "./clockState.ts";
import { beyondWidth, fits } from "./indication.ts";
import type { Basis, Clock, Setting } from "./model.ts";
import { buildTimeline } from "./timeline.ts";

/** UT1 - UTC (s) and pole coordinates (rad); null: not given. */
export interface GivenOrientation {
  readonly ut1MinusUtc: number | null;
  readonly xPole: number | null;
  readonly yPole: number | null;
}

/** What a trajectory and its integral are made of. */
export interface PathRequest {
  readonly trajectory: TrajectoryDescription;
  readonly orientation: GivenOrientation;
  /** Null: all of them. */
  readonly terms: readonly PhysicalTermName[] | null;
  /** The anchor's instant: the integral is counted from there. */
  readonly anchor: Instant;
}

/** Makes the integral along a trajectory; the only costly part, so callers may keep it by the digest of its request. */
export function buildProperTime(request: PathRequest, leapSeconds: LeapSecondTable): ProperTime {
  const { orientation, anchor } = request;
  // UT1 - TAI is held constant from the anchor on: UT1 - UTC jumps with a leap second, UT1 - TAI does not.
  const earth: EarthOrientation = {
    ut1MinusTai: (orientation.ut1MinusUtc ?? 0) - leapSeconds.taiMinusUtc(anchor),
    xPole: orientation.xPole ?? 0,
    yPole: orientation.yPole ?? 0,
  };
  const trajectory = at(["trajectory"], () => buildTrajectory(request.trajectory, earth, anchor));
  const chosen = request.terms;
  const terms = rateTerms.filter(({ term }) => chosen === null || (chosen as readonly string[]).includes(term));
  const origin = anchor.seconds - trajectory.reference.seconds;
  return new ProperTime(trajectory, terms, Math.min(trajectory.to, Math.max(trajectory.from, origin)));
}

/** Ties a clock to a path. Errors: outside-span (the anchor), reading-beyond-width (its reading), those of its events. */
export function makeSetting(
  clock: Clock,
  properTime: ProperTime,
  given: { readonly orientation: GivenOrientation; readonly basis: Basis | null },
  leapSeconds: LeapSecondTable,
): Setting {
  const { face } = clock;
  if (face.kind === "counter" && face.widthBits !== null && !fits(face.anchorReading, face.widthBits)) {
    throw beyondWidth(face.anchorReading, face.widthBits).within("clock", "anchor", "reading");
  }
  const { trajectory } = properTime;
  const setting: Setting = {
    clock,
    trajectory,
    properTime,
    leapSeconds,
    window: usableWindow(trajectory, leapSeconds),
    basis: given.basis,
    given: orientationGiven(given.orientation),
    timeline: null,
  };
  if (!isInside(setting, clock.anchor.at)) {
    const text = formatInstant(clock.anchor.at, "UTC", leapSeconds);
    throw outsideSpan(setting, "The anchor", text, `at ${text}`).within("clock", "anchor", "at");
  }
  return { ...setting, timeline: buildTimeline(setting) };
}

/** The trajectory's span inside the years that are covered. */
export function usableWindow(trajectory: Trajectory, leapSeconds: LeapSecondTable): Setting["window"] {
  const years = coveredYears(leapSeconds);
  const first = trajectory.first === null ? years.first : later(years.first, trajectory.first);
  const last = trajectory.last === null ? years.last : earlier(years.last, trajectory.last);
  const from = Math.max(trajectory.from, secondsBetween(trajectory.reference, first));
  const to = Math.min(trajectory.to, secondsBetween(trajectory.reference, last));
  return { first, last, from, to };
}

/** What an answer along a trajectory rests on, with a clock or without. */
export type Footing = Pick<Setting, "trajectory" | "properTime" | "leapSeconds" | "given">;

export const orientationGiven = ({ ut1MinusUtc, xPole, yPole }: GivenOrientation): Setting["given"] => ({
  ut1: ut1MinusUtc !== null,
  pole: xPole !== null && yPole !== null,
});

/** Remarks on what is not known of a clock, and therefore not in its uncertainty. */
export function clockNotices({ anchor, oscillator }: Clock): Notice[] {
  const out: Notice[] = [];
  if (anchor.sigma === null) {
    out.push({
      code: "anchor-uncertainty-not-given",
      text: "No uncertainty of the anchor was given (sigmaNs), so none is in the result.",
      place: ["clock", "anchor"],
    });
  }
  const known = oscillator !== null && (oscillator.frequencySigma !== null || oscillator.covariance !== null);
  if (!known) {
    out.push({
      code: "oscillator-uncertainty-not-given",
      text: "No uncertainty of the oscillator was given (frequencySigma or covariance), so its drift is not in the uncertainty; neither is its noise.",
      place: ["clock"],
    });
  }
  return out;
}

/** Remarks that hold for a whole answer. `leapTableExpired`: a result lies after the table's expiry. */
export function settingNotices(setting: Footing, leapTableExpired: boolean): Notice[] {
  const { trajectory, properTime } = setting;
  const out: Notice[] = trajectory.notices.map((notice) => ({
    ...notice,
    place: ["trajectory", ...(notice.place ?? [])],
  }));
  const left = physicalTermNames.filter((name) => !properTime.terms.some(({ term }) => term === name));
  if (left.length > 0) {
    out.push({ code: "terms-left-out", text: `Left out as asked: ${left.join(", ")}.`, place: ["terms"] });
  }
  const { ut1, pole } = setting.given;
  if (!ut1 || !pole) {
    const missing = [...(ut1 ? [] : ["UT1 - UTC"]), ...(pole ? [] : ["the pole"])].join(" and ");
    out.push({
      code: "earth-orientation-not-given",
      text: `${missing} not given and taken as zero; the uncertainty's earth-orientation carries what that may cost.`,
    });
  }
  if (leapTableExpired) {
    const day = formatInstant(setting.leapSeconds.expires, "UTC", setting.leapSeconds).slice(0, 10);
    out.push({
      code: "leap-table-expired",
      text: `A result lies after ${day}, when the leap-second table expires: its UTC may be off by a whole second.`,
    });
  }
  return out;
}

/** Where the Sun and the Moon came from; null when neither was used. */
export function ephemerisUsed({ trajectory, properTime }: Footing): string | null {
  const tides = properTime.terms.some(({ needs }) => needs.includes("sun") || needs.includes("moon"));
  return trajectory.usesSunMoon || tides ? sunMoonSource : null;
}
