import type { Instant } from "../time/index.ts";
import { DAY } from "../units/index.ts";

/**
 * Greenwich mean sidereal time of 1982 at an instant, rad in [0, 2 pi): what the mean-element theory's axes are tied to.
 * Source: Aoki et al. (1982), A&A 105, 359; AIAA 2006-6753, appendix C, for its use with TEME.
 */
export function greenwichMeanSiderealTime1982(instant: Instant, ut1MinusTai: number): number {
  const seconds = instant.seconds - 946_728_000;
  const days = Math.floor(seconds / DAY);
  const fraction = (seconds - days * DAY + instant.picoseconds / 1e12 + ut1MinusTai) / DAY;
  const t = (days + fraction) / 36_525;
  // Seconds of time since the same moment's UT1; the whole turns of UT1 itself are left out.
  const excess = 67_310.54841 + (8_640_184.812866 + (0.093104 - 6.2e-6 * t) * t) * t;
  const turns = fraction + excess / DAY;
  return 2 * Math.PI * (turns - Math.floor(turns));
}

/** Its rate, rad a second of UT1 at the present epoch. */
export const siderealRate1982 = (2 * Math.PI * (1 + 8_640_184.812866 / (36_525 * DAY))) / DAY;
