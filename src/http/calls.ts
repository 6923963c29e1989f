import {
  type Bench,
  correctionRequestSchema,
  correctionResponseSchema,
  corrections,
  predictedReadings,
  predictionRequestSchema,
  predictionResponseSchema,
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
];
