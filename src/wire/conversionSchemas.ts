import { evidenceSchema, flagSchema, noticeSchema, scaleSchema } from "./sharedSchemas.ts";
import { timeCodeFormatSchema } from "./timeCodeSchemas.ts";
import { z } from "./zod.ts";

const codeText = z.string().min(1).max(100).openapi({
  description: "Hexadecimal digits in upper or lower case, nothing else; the text itself for ASCII codes.",
  example: "1e5a5d1c368000",
});

export const scaledInstantSchema = z.strictObject({ at: z.string().max(60), scale: scaleSchema });
export const codedInstantSchema = z.strictObject({ timeCode: codeText, format: timeCodeFormatSchema });

const valueSchema = z
  .union(
    [z.string().max(60), scaledInstantSchema, codedInstantSchema],
    'an instant (ISO 8601 text that ends in Z, or { "at": ..., "scale": ... }) or a time code ({ "timeCode": ..., "format": { ... } })',
  )
  .openapi("ConversionValue", {
    description: "An instant as elsewhere, or a time code with its format.",
    example: "2026-03-01T00:00:00.5Z",
  });

const targetSchema = z
  .union(
    [scaleSchema, timeCodeFormatSchema],
    'a time scale such as "TAI", or a time code such as { "format": "CCS", ... }',
  )
  .openapi("ConversionTarget", { description: "A time scale, or a time code's format." });

export const conversionRequestSchema = z
  .strictObject({
    values: z.array(valueSchema).min(1).max(10_000),
    to: z.array(targetSchema).min(1).max(20),
  })
  .openapi("ConversionRequest");

const inScaleSchema = z.strictObject({
  scale: scaleSchema,
  at: z.string().openapi({
    description: "Twelve decimals; UTC ends in Z.",
    example: "2026-03-01T00:00:37.500000000000",
  }),
});

const inCodeSchema = z.strictObject({
  format: timeCodeFormatSchema,
  timeCode: codeText,
  lostPs: z.int().min(0).openapi({
    description:
      "A code is truncated to its resolution: the instant less the one that the code reads back as, picoseconds.",
  }),
});

export const conversionResponseSchema = z
  .strictObject({
    results: z.array(
      z.strictObject({
        input: valueSchema,
        values: z.array(z.union([inScaleSchema, inCodeSchema])),
        flags: z.array(flagSchema),
      }),
    ),
    evidence: evidenceSchema,
    notices: z.array(noticeSchema),
  })
  .openapi("ConversionResponse");

export type ConversionRequest = z.infer<typeof conversionRequestSchema>;
export type ConversionResponse = z.infer<typeof conversionResponseSchema>;
