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

/** What every event has: when, how sure, and whose doing. */
const eventFields = {
  at: instantSchema.optional(),
  atReading: readingSchema.optional().openapi({
    description:
      "What the clock showed just before the event, in place of `at`; found at or after the anchor, with the events before it.",
  }),
  sigmaNs: sigma
    .optional()
    .openapi({ description: "Of what the event did to the clock; joins the uncertainty after it." }),
  origin: z.enum(["commanded", "found"]).optional(),
};

const stepNs = number.min(-1e18).max(1e18).openapi({ description: "Positive: the clock then shows more." });

/** Kinds of clock events that need nothing besides. */
const bare = ["oscillator", "reset", "locked", "free"] as const;

const clockEventSchema = z
  .discriminatedUnion("kind", [
    z.strictObject({ kind: z.literal("set"), ...eventFields, toReading: readingSchema }),
    z.strictObject({ kind: z.literal("step"), ...eventFields, stepNs }),
    z.strictObject({ kind: z.literal("leap-second"), ...eventFields, stepNs }),
    z.strictObject({
      kind: z.literal("rate"),
      ...eventFields,
      fractionalChange: number
        .gt(-0.01)
        .lt(0.01)
        .openapi({ description: "Of the fractional frequency, against proper time, from then on." }),
    }),
    z.strictObject({
      kind: z.literal("slew"),
      ...eventFields,
      stepNs,
      durationS: number.min(1e-3).max(1e9).openapi({ description: "How long it takes to gain stepNs evenly." }),
    }),
    ...bare.map((kind) => z.strictObject({ kind: z.literal(kind), ...eventFields })),
  ])
  .openapi("ClockEvent", {
    description:
      "Somebody or something touched the clock. Exactly one of at and atReading. set: from then on it shows toReading; step and leap-second: it jumps by stepNs; slew: it gains stepNs evenly; rate: its frequency changes; locked: it follows its scale, nothing accumulates, its offset stays; free: it runs free again and the oscillator's polynomial starts anew (rate changes stay); reset and oscillator: the model ends there, as it does backwards at a set before the anchor.",
  });

export type ClockEventIn = z.infer<typeof clockEventSchema>;

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
    events: z.array(clockEventSchema).max(1000).optional().openapi({ description: "In any order." }),
  })
  .openapi("Clock", { description: "Exactly one of counter, timeStamp and timeCode says what its readings are." });

export type ClockIn = z.infer<typeof clockSchema>;
