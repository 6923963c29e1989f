import { instantSchema } from "./sharedSchemas.ts";
import { z } from "./zod.ts";

/** The time codes of CCSDS 301.0-B-4, as a clock shows them and as conversions take and give them. */

const epoch = (text: string) => instantSchema.optional().openapi({ description: text });
const pField = z
  .boolean()
  .optional()
  .openapi({ description: "Whether the code begins with its P-field; false when left out." });

const cucFormatSchema = z
  .strictObject({
    format: z.literal("CUC"),
    coarseOctets: z.int().min(1).max(7).openapi({ description: "Octets of whole seconds." }),
    fineOctets: z.int().min(0).max(10).openapi({ description: "Octets of binary fractions of a second." }),
    epoch: epoch("An agency's own epoch (level 2). Left out: 1958-01-01T00:00:00 TAI (level 1)."),
    pField,
  })
  .openapi("CucFormat", { description: "Unsegmented code: seconds of TAI since the epoch, without leap seconds." });

const cdsFormatSchema = z
  .strictObject({
    format: z.literal("CDS"),
    dayOctets: z.union([z.literal(2), z.literal(3)], "2 or 3"),
    subMillisecondOctets: z
      .union([z.literal(0), z.literal(2), z.literal(4)], "0, 2 or 4")
      .openapi({ description: "0: none; 2: microseconds; 4: picoseconds of the millisecond." }),
    epoch: epoch("An agency's own epoch, midnight UTC. Left out: 1958-01-01."),
    pField,
  })
  .openapi("CdsFormat", {
    description:
      "Day-segmented code: UTC days and milliseconds of the day, up to 86400999 where a leap second ends it.",
  });

const ccsFormatSchema = z
  .strictObject({
    format: z.literal("CCS"),
    variant: z.enum(["month-day", "day-of-year"]),
    subsecondOctets: z.int().min(0).max(6).openapi({ description: "Octets of two decimals of a second each." }),
    pField,
  })
  .openapi("CcsFormat", { description: "Calendar-segmented code: UTC in binary coded decimals." });

const ascii = (format: "ASCII-A" | "ASCII-B") =>
  z.strictObject({
    format: z.literal(format),
    digits: z.int().min(0).max(12).optional().openapi({
      description: "Decimals of the second. Left out: written with twelve, read with any number up to twelve.",
    }),
    terminator: z
      .boolean()
      .optional()
      .openapi({ description: "Whether Z ends it. Left out: written with Z, read with and without." }),
  });

/** The binary codes, which a clock can show. */
export const clockCodeSchema = z
  .discriminatedUnion("format", [cucFormatSchema, cdsFormatSchema, ccsFormatSchema])
  .openapi("ClockCode", { description: "A clock that shows a binary time code; a reading is its hexadecimal text." });

export const timeCodeFormatSchema = z
  .discriminatedUnion("format", [
    cucFormatSchema,
    cdsFormatSchema,
    ccsFormatSchema,
    ascii("ASCII-A").openapi("AsciiAFormat", { description: "UTC as text with month and day." }),
    ascii("ASCII-B").openapi("AsciiBFormat", { description: "UTC as text with the day of the year." }),
  ])
  .openapi("TimeCodeFormat", {
    description: "A time code of CCSDS 301.0-B-4 with all that must be known to read or write it.",
  });

export type TimeCodeFormatIn = z.infer<typeof timeCodeFormatSchema>;
export type ClockCodeIn = z.infer<typeof clockCodeSchema>;
