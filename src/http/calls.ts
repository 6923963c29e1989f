import {
  type Bench,
  budgetRequestSchema,
  budgetResponseSchema,
  conversionRequestSchema,
  conversionResponseSchema,
  correctionRequestSchema,
  correctionResponseSchema,
  corrections,
  driftBudgets,
  predictedReadings,
  predictionRequestSchema,
  predictionResponseSchema,
  timeConversions,
  type z,
} from "../wire/index.ts";

/** A call that takes one JSON body and gives one JSON answer. Routes and interface document are made from this list. */
export interface Call {
  readonly path: string;
  readonly operation: string;
  readonly summary: string;
  readonly description: string;
  readonly request: z.ZodType;
  readonly response: z.ZodType;
  readonly answer: (body: unknown, bench: Bench) => unknown;
}

export const calls: readonly Call[] = [
  {
    path: "/v1/corrections",
    operation: "correctReadings",
    summary: "Readings to corrected instants",
    description:
      "Turns counter readings into corrected instants with the breakdown of clock minus TT, uncertainty and flags. All or nothing: one reading that cannot be corrected refuses the request and is pointed to.",
    request: correctionRequestSchema,
    response: correctionResponseSchema,
    answer: corrections,
  },
  {
    path: "/v1/predicted-readings",
    operation: "predictReadings",
    summary: "Instants to predicted readings",
    description: "The inverse: what the counter will show at given instants.",
    request: predictionRequestSchema,
    response: predictionResponseSchema,
    answer: predictedReadings,
  },
  {
    path: "/v1/drift-budgets",
    operation: "budgetDrift",
    summary: "How far an ideal clock drifts along a trajectory",
    description:
      "Per term the mean rate over whole revolutions, per orbit, per day and the wave about the mean; two closed forms beside the integral, with the difference and its reason; the frequency preset that takes the mean away; a series.",
    request: budgetRequestSchema,
    response: budgetResponseSchema,
    answer: driftBudgets,
  },
  {
    path: "/v1/time-conversions",
    operation: "convertTimes",
    summary: "Instants and time codes to other time scales and time codes",
    description:
      "Exact to the picosecond in every scale and bit for bit in every code of CCSDS 301.0-B-4. Codes are truncated to their resolution, and what that loses is told. TDB and TCB are those of the geocentre (Fairhead & Bretagnon 1990, 787 terms). All or nothing: one value that cannot be read, or that a code cannot show, refuses the request and is pointed to.",
    request: conversionRequestSchema,
    response: conversionResponseSchema,
    answer: timeConversions,
  },
];
