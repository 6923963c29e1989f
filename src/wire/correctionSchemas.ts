import { physicalTermNames } from "../relativity/index.ts";
import { clockSchema } from "./clockSchemas.ts";
import {
  basisSchema,
  evidenceSchema,
  flagSchema,
  instantSchema,
  magnitude,
  noticeSchema,
  number,
  readingSchema,
  scaleSchema,
  termValueSchema,
  uncertaintyItemSchema,
} from "./sharedSchemas.ts";
import { earthOrientationSchema, trajectorySchema } from "./trajectorySchemas.ts";
import { z } from "./zod.ts";

export const termsSchema = z
  .array(z.enum(physicalTermNames))
  .min(1)
  .max(physicalTermNames.length)
  .optional()
  .openapi({ description: "The physical terms that are computed and summed; all when left out." });

const common = {
  clock: clockSchema,
  trajectory: trajectorySchema,
  scale: scaleSchema.optional().openapi({ description: "Scale of the instants in the answer; UTC when left out." }),
  terms: termsSchema,
  earthOrientation: earthOrientationSchema.optional(),
};

export const correctionRequestSchema = z
  .strictObject({
    ...common,
    readings: z
      .array(
        z.strictObject({
          id: z.string().max(200).optional(),
          reading: readingSchema,
          near: instantSchema.optional().openapi({ description: "A rough time of the reading; settles rollovers." }),
        }),
      )
      .min(1)
      .max(10_000),
    unwrap: z.enum(["after", "before", "nearest"]).optional().openapi({
      description: "Settles rollovers by the first time after, the last before, or the nearest to the anchor.",
    }),
  })
  .openapi("CorrectionRequest");

const stateFields = {
  clockMinusTt: z
    .string()
    .openapi({ description: "Sum of all accumulated terms, seconds, 15 decimals.", example: "0.000412345678901" }),
  clockMinusTtNs: number,
  terms: z.array(termValueSchema),
  uncertaintyNs: magnitude.openapi({ description: "Combined standard uncertainty (k = 1)." }),
  uncertainty: z.array(uncertaintyItemSchema),
  flags: z.array(flagSchema),
};

const closing = { basis: basisSchema.optional(), evidence: evidenceSchema, notices: z.array(noticeSchema) };

export const correctionResponseSchema = z
  .strictObject({
    results: z.array(
      z.strictObject({
        id: z.string().optional(),
        reading: readingSchema,
        corrected: z
          .string()
          .openapi({ description: "Twelve decimals; UTC ends in Z.", example: "2026-03-01T00:10:00.000000123456Z" }),
        scale: scaleSchema,
        ...stateFields,
      }),
    ),
    ...closing,
  })
  .openapi("CorrectionResponse");

export const predictionRequestSchema = z
  .strictObject({ ...common, instants: z.array(instantSchema).min(1).max(10_000) })
  .openapi("PredictionRequest");

export const predictionResponseSchema = z
  .strictObject({
    results: z.array(
      z.strictObject({
        at: z.string(),
        scale: scaleSchema,
        reading: readingSchema.openapi({
          description:
            "What the clock shows then, as its readings are written; a counter value up to 2^53 - 1 is an integer.",
        }),
        fraction: number.openapi({ description: "Part of a tick beyond the reading." }),
        sigmaTicks: magnitude
          .nullable()
          .openapi({ description: "In ticks, or in steps of a stamp's resolutionS; null for a stamp without one." }),
        ...stateFields,
      }),
    ),
    ...closing,
  })
  .openapi("PredictionResponse");

export type CorrectionRequest = z.infer<typeof correctionRequestSchema>;
export type CorrectionResponse = z.infer<typeof correctionResponseSchema>;
export type PredictionRequest = z.infer<typeof predictionRequestSchema>;
export type PredictionResponse = z.infer<typeof predictionResponseSchema>;
