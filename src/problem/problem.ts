import { type NoticeCode, type ProblemCode, problemCatalogue } from "./catalogue.ts";

/** Where in the request something is wrong: field names and indices from the outside in. */
export type Place = readonly (string | number)[];

export interface Fault {
  readonly place: Place;
  /** What was found there; left out when it would only repeat a large structure. */
  readonly received?: unknown;
  /** What would be right, as a sentence or phrase. */
  readonly expected: string;
}

/** At most so many faults travel with one problem. */
export const mostFaults = 100;

/** A failure that the user can mend. Anything else that is thrown is a fault of this project. */
export class Problem extends Error {
  readonly code: ProblemCode;
  readonly faults: readonly Fault[];
  /** True when the places are counted from the whole request, whoever works on a part of it. */
  readonly fromTheTop: boolean;

  constructor(code: ProblemCode, detail: string, faults: readonly Fault[] = [], fromTheTop = false) {
    super(detail);
    this.name = "Problem";
    this.code = code;
    this.faults = faults;
    this.fromTheTop = fromTheTop;
  }

  get status(): number {
    return problemCatalogue[this.code].status;
  }

  /** The same problem seen from further outside: every place gets the prefix. */
  within(...prefix: (string | number)[]): Problem {
    if (this.fromTheTop) return this;
    const faults = this.faults.map((fault) => ({ ...fault, place: [...prefix, ...fault.place] }));
    return new Problem(this.code, this.message, faults);
  }
}

/** Runs `work`; a Problem thrown inside is reported at `place`. */
export function at<T>(place: Place, work: () => T): T {
  try {
    return work();
  } catch (error) {
    throw error instanceof Problem ? error.within(...place) : error;
  }
}

/**
 * Runs `work` on every item and collects what is wrong with each before failing, so that a user mends a list in one go.
 * Errors: one Problem with the code and detail of the first, and the faults of all (the first 100).
 */
export function forEachItem<T, R>(place: Place, items: readonly T[], work: (item: T, index: number) => R): R[] {
  const results: R[] = [];
  const problems: Problem[] = [];
  let faultCount = 0;
  for (const [index, item] of items.entries()) {
    try {
      results.push(work(item, index));
    } catch (error) {
      if (!(error instanceof Problem) || error.fromTheTop) throw error;
      problems.push(error.within(...place, index));
      faultCount += error.faults.length;
      if (faultCount >= mostFaults) break;
    }
  }
  const first = problems[0];
  if (first === undefined) return results;
  const faults = problems.flatMap((problem) => problem.faults).slice(0, mostFaults);
  const others = faults.length > 1 ? ` (${faults.length} faults in all; this is the first)` : "";
  throw new Problem(first.code, `${first.message}${others}`, faults);
}

/** A remark that travels with a good answer. */
export interface Notice {
  readonly code: NoticeCode;
  readonly text: string;
  readonly place?: Place;
}

/** Thrown when this project's own reasoning fails; never the user's fault. */
class BrokenInvariant extends Error {
  constructor(message: string) {
    super(message);
    this.name = "BrokenInvariant";
  }
}

export function invariant(condition: unknown, message: string): asserts condition {
  if (!condition) throw new BrokenInvariant(message);
}
