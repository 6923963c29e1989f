import type { Environment, Need } from "./environment.ts";

/**
 * One named contribution to d(clock - TT)/dTT of an ideal clock, dimensionless, positive when it makes the clock run
 * ahead. A term is a file of its own; terms.ts lists them in the order of every answer.
 */
export interface RateTerm {
  readonly term: string;
  readonly label: string;
  readonly needs: readonly Need[];
  readonly rate: (environment: Environment) => number;
  /** True when the rate is the same everywhere, so that it needs no integration. */
  readonly constant?: boolean;
}
