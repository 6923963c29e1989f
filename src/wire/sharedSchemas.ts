import { scales } from "../time/index.ts";
import { z } from "./zod.ts";

/** Shapes that several calls share. Plain: no transforms, so the interface document can be made from them. */

export const number = z.number();
/** Any component of a place or a velocity; far beyond what makes sense, near enough to compute with. */
const component = z.number().min(-1e12).max(1e12);
/** A standard uncertainty in a request. */
export const sigma = z.number().min(0).max(1e12);
/** A standard uncertainty in an answer. */
export const magnitude = z.number().min(0);

export const scaleSchema = z.enum(scales).openapi("Scale", {
  description:
    "Time scale. UTC and GLONASS have leap seconds; the others run evenly, TCG, TDB and TCB at rates of their own.",
});

export const instantSchema = z
  .union(
    [z.string().max(60), z.strictObject({ at: z.string().max(60), scale: scaleSchema })],
    'an instant: ISO 8601 text that ends in Z, or { "at": ..., "scale": ... }',
  )
  .openapi("InstantIn", {
    description:
      "ISO 8601 with up to 12 decimals. A string is UTC and ends in Z (calendar date or day of year, 23:59:60 where there was a leap second). Any other scale: an object; there only UTC ends in Z.",
    example: "2026-03-01T00:00:00.5Z",
  });

/** What a clock showed. Its text is read by the clock's own face, so only its size is bound here. */
export const readingSchema = z
  .union(
    [z.int().openapi({ minimum: Number.MIN_SAFE_INTEGER, maximum: Number.MAX_SAFE_INTEGER }), z.string().max(120)],
    "a whole number up to 2^53 - 1, or text: decimal digits of any size for a counter, a time as the clock writes it for a stamp",
  )
  .openapi("Reading", {
    description:
      "A counter value (a JSON integer up to 2^53 - 1, or decimal digits of any size as text, negative only without widthBits), or a time stamp as the clock writes it.",
    example: "48213377",
  });

export const vectorSchema = z
  .tuple([component, component, component])
  .openapi({ minItems: 3, maxItems: 3, description: "x, y, z" });

export const termValueSchema = z
  .strictObject({
    term: z.string(),
    label: z.string(),
    rate: number.openapi({ description: "d(clock - TT)/dTT at the instant, dimensionless." }),
    accumulated: z.string().openapi({
      description: "Since the anchor, seconds, 15 decimals; these add up exactly.",
      example: "-0.000038123456789",
    }),
    accumulatedNs: number.openapi({ description: "The same in nanoseconds, rounded to a double." }),
  })
  .openapi("TermValue", {
    description: "One named contribution to clock minus TT; positive makes the clock run ahead.",
  });

export const uncertaintyItemSchema = z
  .strictObject({
    source: z.string(),
    type: z.enum(["A", "B"]),
    ns: magnitude.openapi({ description: "One standard uncertainty (k = 1), nanoseconds." }),
    shared: z.enum(["row", "pass", "log"]).openapi({
      description: "With what the error is common: this row only, the neighbouring rows, the whole log.",
    }),
  })
  .openapi("UncertaintyItem");

export const basisSchema = z
  .enum(["predicted", "reconstructed"])
  .openapi("Basis", { description: "Whether the orbit was computed ahead or afterwards from measurements; echoed." });

export const flagSchema = z
  .enum([
    "rollover",
    "ambiguous-rollover",
    "before-anchor",
    "clock-event",
    "slewing",
    "locked",
    "holdover",
    "predicted-orbit",
    "implausible-orbit",
    "coarse-ephemeris",
    "leap-second",
    "leap-table-expired",
  ])
  .openapi("Flag", {
    description:
      "A short word that says why to distrust a row, or how it was read. clock-event: within one second (or one tick, if longer) after the clock was set or stepped; slewing: inside a slew; locked: the clock followed its scale; holdover: it runs free after that.",
  });

export const noticeSchema = z
  .strictObject({ code: z.string(), text: z.string(), pointer: z.string().optional() })
  .openapi("Notice", { description: "A remark that travels with a good answer." });

export const evidenceSchema = z
  .strictObject({
    inputsSha256: z.string().openapi({ description: "SHA-256 of the RFC 8785 canonical JSON of the request." }),
    constants: z.record(z.string(), number).openapi({ description: "Physical constants in force, SI units." }),
    leapSeconds: z.strictObject({ source: z.string(), expires: z.string() }),
    ephemeris: z
      .string()
      .nullable()
      .openapi({ description: "Where the Sun and the Moon came from; null when unused." }),
    version: z.string(),
  })
  .openapi("Evidence", { description: "What makes a result repeatable: the same request gives the same bytes." });

export const problemSchema = z
  .strictObject({
    type: z
      .string()
      .openapi({ description: "Names the kind of problem; see the catalogue.", example: "/problems/outside-span" }),
    title: z.string(),
    status: z.int(),
    detail: z.string(),
    instance: z.string().optional().openapi({ description: "The request id." }),
    faults: z
      .array(
        z.strictObject({
          pointer: z.string().openapi({ description: "RFC 6901 pointer into the request." }),
          received: z.unknown().optional(),
          expected: z.string(),
        }),
      )
      .optional(),
  })
  .openapi("Problem", { description: "Problem details, RFC 9457." });

/** Shapes that many places share, by their names in the interface document. */
export const sharedShapes = {
  InstantIn: instantSchema,
  Reading: readingSchema,
  Scale: scaleSchema,
} as const;
