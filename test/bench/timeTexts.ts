import { defaultLeapSeconds, formatInstant, type Instant, parseInstant } from "../../src/time/index.ts";
import { between, type Figure, plain, type Row, seededNumbers, sink, speedRatio } from "./measure.ts";

const count = 20_000;
const first = parseInstant("1972-01-01T00:00:00Z", "UTC", defaultLeapSeconds).seconds;
const last = parseInstant("2100-12-31T23:59:59Z", "UTC", defaultLeapSeconds).seconds;

/** TIME: texts of twelve decimals in UTC, spread over 1972 to 2100 or one a second, against the built-in's of three. */
export function timeTexts(): Row[] {
  const next = seededNumbers(301);
  const picoseconds = (): number => Math.floor(next() * 1e12);
  const spread = Array.from({ length: count }, () => ({
    seconds: first + Math.floor(next() * (last - first)),
    picoseconds: picoseconds(),
  }));
  const log = Array.from({ length: count }, (_, i) => ({ seconds: 1_772_323_237 + i, picoseconds: picoseconds() }));
  return [...compare("1972 to 2100", spread), ...compare("a log", log)];
}

function compare(which: string, instants: readonly Instant[]): Row[] {
  const texts = instants.map((instant) => formatInstant(instant, "UTC", defaultLeapSeconds));
  const dates = instants.map(({ seconds, picoseconds }) => new Date(seconds * 1000 + Math.floor(picoseconds / 1e9)));
  const dateTexts = dates.map((date) => date.toISOString());
  // Each text is looked into, as whoever writes it out does: a text that is only promised costs nothing yet.
  const format = speedRatio(
    () => {
      for (const instant of instants) sink.value += formatInstant(instant, "UTC", defaultLeapSeconds).charCodeAt(25);
    },
    () => {
      for (const date of dates) sink.value += date.toISOString().charCodeAt(22);
    },
    20,
    41,
  );
  const parse = speedRatio(
    () => {
      for (const text of texts) sink.value += parseInstant(text, "UTC", defaultLeapSeconds).picoseconds;
    },
    () => {
      for (const text of dateTexts) sink.value += Date.parse(text);
    },
    20,
    41,
  );
  const row = (definition: string, ratio: Figure, target: number): Row => ({
    id: "TIME",
    definition: `${definition}, ${which}`,
    reached: plain(ratio.median),
    target: String(target),
    met: ratio.median >= target,
    spread: between(ratio),
  });
  return [
    row("format, 12 decimals UTC / Date.toISOString", format, 0.2),
    row("parse, 12 decimals UTC / Date.parse of 3 decimals", parse, 0.4),
  ];
}
