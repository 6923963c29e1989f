import { instantSchema, number, readingSchema, sigma } from "./sharedSchemas.ts";
import { clockCodeSchema } from "./timeCodeSchemas.ts";
import { z } from "./zod.ts";

const counterSchema = z
  .strictObject({
    ticksPerSecond: z
      .union(
        [
          z.number().gt(0),
          z
            .string()
            .max(120)
            .regex(/^\d+\/\d+$/, 'a fraction of whole numbers such as "10230000/3"'),
        ],
        'a positive number, or a fraction of whole numbers such as "10230000/3"',
      )
      .openapi({
        description: 'Nominal rate: a number, taken as its shortest decimal exactly, or "num/den".',
        example: 32768,
      }),
    widthBits: z
      .int()
      .min(1)
      .max(128)
      .optional()
      .openapi({ description: "The counter rolls over after 2^widthBits ticks." }),
    stands: z.enum(["edge", "truncated", "rounded"]).optional().openapi({
      description:
        "What a reading stands for: the instant at which the counter became it (edge, the default), or some moment while it showed it (truncated: half a tick is added), or the nearest tick (rounded).",
    }),
  })
  .openapi("Counter");

const timeStampSchema = z
  .strictObject({
    scale: z.enum(["UTC", "TAI", "TT", "GPS", "GST", "BDT"]),
    form: z.enum(["iso", "week-seconds", "seconds"]).optional().openapi({
      description:
        'How a reading is written: ISO 8601 (the default; UTC ends in Z), "WEEK SECONDS" or "SECONDS" since the epoch of GPS, GST or BDT, as text with up to 12 decimals.',
    }),
    resolutionS: number.gt(0).max(86_400).optional().openapi({
      description: "Step in which the stamp is written; brings its share of uncertainty.",
    }),
    leapSeconds: z
      .union([z.literal("followed"), z.strictObject({ heldAt: z.int().min(-1000).max(1000) })])
      .optional()
      .openapi({
        description: "Of a UTC stamp: the clock follows leap seconds (the default), or holds TAI - UTC at a value.",
      }),
  })
  .openapi("TimeStamp", { description: "A clock that shows the time itself." });

const oscillatorSchema = z
  .strictObject({
    offsetNs: number.min(-1e18).max(1e18).optional(),
    presetFractional: number
      .gt(-0.01)
      .lt(0.01)
      .optional()
      .openapi({ description: "Deliberate fractional frequency offset given before launch." }),
    frequencyOffset: number
      .gt(-0.01)
      .lt(0.01)
      .optional()
      .openapi({ description: "What is left of the fractional frequency." }),
    agingPerDay: number
      .gt(-1e-5)
      .lt(1e-5)
      .optional()
      .openapi({ description: "Change of the fractional frequency per day." }),
    nominalHz: number.gt(0).optional(),
    frequencySigma: sigma.max(1).optional(),
    agingSigmaPerDay: sigma.max(1).optional(),
    covariance: z
      .array(z.array(number.min(-1e24).max(1e24)).min(3).max(3))
      .min(3)
      .max(3)
      .optional()
      .openapi({ description: "Of offset (ns), frequency (1) and ageing (1/day); instead of the sigmas." }),
  })
  .openapi("Oscillator");

export const clockSchema = z
  .strictObject({
    counter: counterSchema.optional(),
    timeStamp: timeStampSchema.optional(),
    timeCode: clockCodeSchema.optional(),
    anchor: z
      .strictObject({
        reading: readingSchema,
        at: instantSchema.openapi({
          description: "The instant on board at which the counter became `reading`, not that of ground receipt.",
        }),
        sigmaNs: sigma.optional(),
      })
      .openapi("Anchor", { description: "The reading and the instant at which the clock model starts." }),
    oscillator: oscillatorSchema.optional(),
  })
  .openapi("Clock", { description: "Exactly one of counter, timeStamp and timeCode says what its readings are." });

export type ClockIn = z.infer<typeof clockSchema>;
