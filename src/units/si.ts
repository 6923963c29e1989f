/** Factors to SI. The code computes in metres, seconds and radians; km and degrees stay at the interface. */
export const KM = 1e3;
export const NS = 1e-9;
export const DAY = 86_400;
export const DEGREE = Math.PI / 180;
export const ARCSECOND = DEGREE / 3600;
