/** A line of the table that `npm run bench` prints. */
export interface Row {
  readonly id: string;
  readonly definition: string;
  readonly reached: string;
  readonly target: string;
  /** Null where the target belongs to a later issue or nothing was asked. */
  readonly met: boolean | null;
  readonly spread: string;
}

export interface Figure {
  readonly median: number;
  /** The quartiles of the rounds. */
  readonly low: number;
  readonly high: number;
}

/** Median and quartiles. */
export function figure(values: readonly number[]): Figure {
  const sorted = values.toSorted((a, b) => a - b);
  const at = (share: number): number => {
    const place = share * (sorted.length - 1);
    const below = Math.floor(place);
    const next = sorted[Math.min(below + 1, sorted.length - 1)]!;
    return sorted[below]! + (place - below) * (next - sorted[below]!);
  };
  return { median: at(0.5), low: at(0.25), high: at(0.75) };
}

/** Keeps results alive, so that no work is optimised away. */
export const sink = { value: 0 };

function milliseconds(work: () => void): number {
  const start = process.hrtime.bigint();
  work();
  return Number(process.hrtime.bigint() - start) / 1e6;
}

/** Times of one piece of work, ms, after `warm` rounds that do not count. */
export function timesOf(work: () => void, warm: number, rounds: number): number[] {
  for (let i = 0; i < warm; i++) work();
  return Array.from({ length: rounds }, () => milliseconds(work));
}

/**
 * Speed of `ours` over the speed of `theirs` for the same number of items: the two take turns, the order changes from
 * round to round, and each round gives one ratio, so that what else runs on the machine meets both.
 */
export function speedRatio(ours: () => void, theirs: () => void, warm: number, rounds: number): Figure {
  for (let i = 0; i < warm; i++) {
    ours();
    theirs();
  }
  const ratios: number[] = [];
  for (let i = 0; i < rounds; i++) {
    const first = milliseconds(i % 2 === 0 ? ours : theirs);
    const second = milliseconds(i % 2 === 0 ? theirs : ours);
    ratios.push(i % 2 === 0 ? second / first : first / second);
  }
  return figure(ratios);
}

/** Numbers in [0, 1), the same in every run. Source: Marsaglia (2003), Xorshift RNGs, J. Stat. Softw. 8, 14. */
export function seededNumbers(seed: number): () => number {
  let state = seed | 0 || 1;
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state >>> 0) / 2 ** 32;
  };
}

export const plain = (value: number, digits = 2): string =>
  value !== 0 && value < 0.01 ? value.toExponential(digits - 1) : value.toPrecision(digits);
export const between = ({ low, high }: Figure, digits = 2): string => `${plain(low, digits)} to ${plain(high, digits)}`;
