import fc from "fast-check";

/** Ways to spoil a text, for fast-check: the same seed spoils it the same way. */

type Mutation = (text: string, at: number, word: string) => string;

/** The place of a fraction (0 to 1) in something of a length. */
const placeIn = (length: number, at: number): number => Math.min(length - 1, Math.floor(at * length));

function onLines(work: (lines: string[], i: number) => void): Mutation {
  return (text, at) => {
    const lines = text.split("\n");
    work(lines, placeIn(lines.length, at));
    return lines.join("\n");
  };
}

const numbers = /[+-]?\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/g;
const keywords = /\b[A-Z][A-Z_]{2,}\b/g;

function onMatch(pattern: RegExp, work: (found: string, word: string) => string): Mutation {
  return (text, at, word) => {
    const all = [...text.matchAll(pattern)];
    const one = all[placeIn(all.length, at)];
    if (one === undefined) return text;
    return text.slice(0, one.index) + work(one[0], word) + text.slice(one.index + one[0].length);
  };
}

const mutations: readonly Mutation[] = [
  // a character changed, dropped, put in, doubled
  (text, at, word) => {
    const i = placeIn(text.length, at);
    return (
      text.slice(0, i) + String.fromCharCode(text.charCodeAt(i) ^ (1 + (word.charCodeAt(0) % 127))) + text.slice(i + 1)
    );
  },
  (text, at) => text.slice(0, placeIn(text.length, at)) + text.slice(placeIn(text.length, at) + 1),
  (text, at, word) => text.slice(0, placeIn(text.length, at)) + word + text.slice(placeIn(text.length, at)),
  // lines dropped, doubled, swapped, moved, emptied
  onLines((lines, i) => lines.splice(i, 1)),
  onLines((lines, i) => lines.splice(i, 0, lines[i]!)),
  onLines((lines, i) => {
    [lines[i], lines[0]] = [lines[0]!, lines[i]!];
  }),
  onLines((lines, i) => {
    if (i > 0) [lines[i - 1], lines[i]] = [lines[i]!, lines[i - 1]!];
  }),
  onLines((lines, i) => {
    lines[i] = "";
  }),
  onLines((lines, i) => lines.splice(i, 0, "COMMENT put in between")),
  // numbers that are none, too large, or others
  onMatch(numbers, () => "NaN"),
  onMatch(numbers, () => "1e999"),
  onMatch(numbers, () => ""),
  onMatch(numbers, (found) => `-${found}`),
  onMatch(numbers, (found) => found + found),
  onMatch(numbers, () => "-0"),
  onMatch(numbers, (_, word) => word),
  // keywords misspelt or exchanged
  onMatch(keywords, (found) => found.slice(1)),
  onMatch(keywords, (found) => found.toLowerCase()),
  onMatch(keywords, () => "EPOCH"),
  onMatch(keywords, () => "COMMENT"),
  // the end or the beginning cut off, other line ends
  (text, at) => text.slice(0, placeIn(text.length, at)),
  (text, at) => text.slice(placeIn(text.length, at)),
  (text) => text.replaceAll("\n", "\r\n"),
  (text) => `\ufeff${text}`,
];

const word = fc.oneof(
  fc.string({ minLength: 1, maxLength: 6 }),
  fc.string({ minLength: 1, maxLength: 4, unit: "binary" }),
  fc.constantFrom(
    "=",
    " = ",
    "[km]",
    "<",
    "</",
    "]]>",
    "&amp;",
    "&x;",
    '"',
    "{",
    "[",
    ",",
    "\t",
    "\0",
    "\ud800",
    "é",
    "\u2028",
  ),
);

/** One of the texts, spoilt one to four times; now and then any text at all. */
export const spoilt = (texts: readonly string[]): fc.Arbitrary<string> =>
  fc.oneof(
    { arbitrary: fc.string({ maxLength: 300, unit: "binary" }), weight: 1 },
    {
      arbitrary: fc
        .tuple(
          fc.constantFrom(...texts),
          fc.array(fc.tuple(fc.nat(mutations.length - 1), fc.double({ min: 0, max: 1, noNaN: true }), word), {
            minLength: 1,
            maxLength: 4,
          }),
        )
        .map(([text, steps]) => steps.reduce((one, [kind, at, by]) => mutations[kind]!(one, at, by), text)),
      weight: 19,
    },
  );
