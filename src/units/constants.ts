/**
 * Every physical constant of the project: value, unit, source, once. Derived ones are computed where they are used.
 */
export interface Constant {
  readonly value: number;
  readonly unit: string;
  readonly source: string;
}

const iers = "IERS Conventions (2010), table 1.1";

/** The constants that can enter a result; an answer's evidence lists them by these names. */
export const constants = {
  speedOfLight: { value: 299_792_458, unit: "m/s", source: "SI, exact" },
  /** 1 - d(TT)/d(TCG). Defining: never to be computed again from a newer potential of the geoid. */
  lG: { value: 6.969290134e-10, unit: "1", source: "IAU 2000 Resolution B1.9, defining" },
  /** 1 - d(TDB)/d(TCB). Defining, like the offset of TDB at 1977-01-01T00:00:00 TAI that follows it. */
  lB: { value: 1.550519768e-8, unit: "1", source: "IAU 2006 Resolution B3, defining" },
  tdb0: { value: -6.55e-5, unit: "s", source: "IAU 2006 Resolution B3, defining" },
  /** With TCG, used with GCRS coordinates everywhere. */
  gmEarth: { value: 3.986004418e14, unit: "m3/s2", source: iers },
  /** With TDB. */
  gmSun: { value: 1.32712440041e20, unit: "m3/s2", source: "IAU 2009 system of constants, TDB-compatible" },
  moonEarthMassRatio: { value: 0.0123000371, unit: "1", source: iers },
  /** Turns of the Earth rotation angle per day of UT1, beyond one. */
  earthRotationExcess: { value: 0.00273781191135448, unit: "1/d", source: "IAU 2000 Resolution B1.8" },
  ellipsoidRadius: { value: 6_378_137, unit: "m", source: "WGS 84" },
  ellipsoidInverseFlattening: { value: 298.257223563, unit: "1", source: "WGS 84" },
  /** Belong to the coefficients of the geopotential and are used with nothing else. */
  geopotentialGm: { value: 3.986004415e14, unit: "m3/s2", source: "EGM2008, Pavlis et al. (2012)" },
  geopotentialRadius: { value: 6_378_136.3, unit: "m", source: "EGM2008, Pavlis et al. (2012)" },
  /** C20(zero tide) - C20(tide free) of EGM2008, fully normalised: the permanent tide's deformation is in the field. */
  permanentTideC20: {
    value: -4.173576159e-9,
    unit: "1",
    source:
      "EGM2008 zero-tide less tide-free C20; from memory, equals A0 H0 k20 of IERS Conventions (2010) 6.2.2, k = 0.3",
  },
} as const satisfies Record<string, Constant>;

export const C = constants.speedOfLight.value;
/** c squared, m2/s2. */
export const C2 = C * C;
export const LG = constants.lG.value;
export const LB = constants.lB.value;
/** TDB - TCB at 1977-01-01T00:00:00 TAI (TCB 1977-01-01T00:00:32.184), s. */
export const TDB0 = constants.tdb0.value;
export const GM_EARTH = constants.gmEarth.value;
export const GM_SUN = constants.gmSun.value;
/** Moon's GM from the Earth's and the mass ratio, m3/s2. */
export const GM_MOON = GM_EARTH * constants.moonEarthMassRatio.value;
/** Rotation of the Earth, rad/s of UT1. */
export const EARTH_ROTATION = (2 * Math.PI * (1 + constants.earthRotationExcess.value)) / 86_400;
