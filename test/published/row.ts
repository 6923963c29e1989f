/** How the published figure is known: read in its source, recalled, worked out of printed figures, or true by algebra. */
export type Standing = "read" | "from memory" | "derived" | "identity";

/** One figure from outside of the project beside what the project's own code makes of the same inputs. */
export interface Row {
  readonly id: string;
  /** The quantity in words. */
  readonly what: string;
  readonly inputs: Readonly<Record<string, number | string | readonly number[]>>;
  readonly published: number | readonly number[];
  /** Computed when it is asked for, by the code that `place` names. */
  readonly got: () => number | readonly number[];
  /** Greatest difference allowed, in the row's unit; one for every number or one each. */
  readonly tolerance: number | readonly number[];
  readonly unit: string;
  readonly source: string;
  readonly standing: Standing;
  /** Which code is exercised. */
  readonly place: string;
  readonly note?: string;
  /** Why the published figure is not met and cannot be: such a row is shown and counted apart, and never fails. */
  readonly explained?: string;
}

/** One number of a row held against its published figure. */
export interface Compared {
  readonly published: number;
  readonly computed: number;
  readonly difference: number;
  readonly tolerance: number;
  readonly agrees: boolean;
}

const list = (x: number | readonly number[]): readonly number[] => (typeof x === "number" ? [x] : x);

/** Every number of a row. Errors: a plain Error when the counts of numbers differ. */
export function compareRow(row: Row): Compared[] {
  const published = list(row.published);
  const computed = list(row.got());
  const tolerances = list(row.tolerance);
  if (computed.length !== published.length) {
    throw new Error(`${row.id}: ${computed.length} numbers were computed for ${published.length} published ones`);
  }
  if (tolerances.length !== 1 && tolerances.length !== published.length) {
    throw new Error(`${row.id}: ${tolerances.length} tolerances for ${published.length} numbers`);
  }
  return published.map((figure, i) => {
    const value = computed[i]!;
    const tolerance = tolerances[i] ?? tolerances[0]!;
    const difference = value - figure;
    // Written so that NaN never agrees.
    return { published: figure, computed: value, difference, tolerance, agrees: Math.abs(difference) <= tolerance };
  });
}

/** The number of a row that comes nearest to its tolerance, or exceeds it most. */
export function worst(numbers: readonly Compared[]): Compared {
  const strain = ({ difference, tolerance }: Compared): number =>
    tolerance === 0 ? (difference === 0 ? 0 : Number.POSITIVE_INFINITY) : Math.abs(difference) / tolerance;
  return numbers.reduce((a, b) => (!b.agrees && a.agrees ? b : strain(b) > strain(a) ? b : a));
}
