/** Units stand at the end of a field's name; the longest ending that fits is the right one. */
const endings: readonly (readonly [ending: string, unit: string])[] = [
  ["KmPerS", "km/s"],
  ["Arcsec", "arcsec"],
  ["Octets", "octets"],
  ["PerDay", "1/day"],
  ["Ticks", "ticks"],
  ["Bits", "bits"],
  ["Deg", "deg"],
  ["HPa", "hPa"],
  ["Hz", "Hz"],
  ["Km", "km"],
  ["Ns", "ns"],
  ["Us", "us"],
  ["Ms", "ms"],
  ["Ps", "ps"],
  ["M", "m"],
  ["S", "s"],
  ["K", "K"],
  ["C", "deg C"],
];

/** The unit that a field's name ends in; empty for a name without one. */
export function unitOf(name: string): string {
  if (name === "ticksPerSecond") return "1/s";
  // A field may be called after its unit alone: ns, hz.
  const whole = endings.find(([ending]) => ending.length === 2 && ending.toLowerCase() === name);
  if (whole !== undefined) return whole[1];
  const found = endings.find(([ending]) => name.endsWith(ending) && /[a-z0-9]$/.test(name.slice(0, -ending.length)));
  return found?.[1] ?? "";
}
