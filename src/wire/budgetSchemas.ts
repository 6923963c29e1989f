import { clockSchema } from "./clockSchemas.ts";
import { termsSchema } from "./correctionSchemas.ts";
import { basisSchema, evidenceSchema, instantSchema, magnitude, noticeSchema, number } from "./sharedSchemas.ts";
import { earthOrientationSchema, trajectorySchema } from "./trajectorySchemas.ts";
import { z } from "./zod.ts";

export const budgetRequestSchema = z
  .strictObject({
    trajectory: trajectorySchema,
    clock: clockSchema
      .optional()
      .openapi({ description: "Only oscillator.nominalHz is used: it turns the frequency preset into Hz." }),
    horizonS: number
      .gt(0)
      .max(1e12)
      .openapi({ description: "How far to look, s; at most 20 years.", example: 864_000 }),
    from: instantSchema.optional().openapi({
      description:
        "Where to begin; the epoch or the first state when left out. A clock on the ground has none: give it.",
    }),
    terms: termsSchema,
    earthOrientation: earthOrientationSchema.optional(),
    seriesPoints: z
      .int()
      .min(2)
      .max(2000)
      .optional()
      .openapi({ description: "Length of the series; 181 when left out." }),
  })
  .openapi("BudgetRequest");

const nullableNumber = number.nullable();

const termBudgetSchema = z
  .strictObject({
    term: z.string(),
    label: z.string(),
    meanRate: number.openapi({ description: "Mean of d(clock - TT)/dTT, dimensionless." }),
    perOrbitNs: nullableNumber.openapi({ description: "Mean over one revolution; null without an orbit." }),
    perDayUs: number,
    peakToPeakNs: magnitude.openapi({ description: "Largest less smallest departure from the mean line." }),
  })
  .openapi("TermBudget");

export const budgetResponseSchema = z
  .strictObject({
    from: z.string(),
    meanOverS: number.openapi({ description: "Length of the stretch that the means are taken over." }),
    orbit: z
      .strictObject({
        periodS: number.openapi({ description: "Mean length of a revolution." }),
        revolutions: z.int(),
        countedBy: z.enum(["argument of latitude", "true longitude", "perigee"]),
        semiMajorAxisKm: number.openapi({ description: "Osculating, at `from`." }),
        meanSemiMajorAxisKm: number.openapi({ description: "Mean of the osculating one over the revolutions." }),
        eccentricity: number.openapi({ description: "Osculating, at `from`." }),
        inclinationDeg: number.openapi({ description: "Against the pole of date, at `from`." }),
        perigeeKm: number.openapi({ description: "Distance of the perigee from the Earth's centre, osculating." }),
        apogeeKm: number,
      })
      .nullable(),
    terms: z.array(termBudgetSchema),
    total: termBudgetSchema,
    closedForm: z
      .strictObject({
        osculatingRate: number.openapi({ description: "L_G - 3GM/(2ac^2), osculating a." }),
        secularRate: number.openapi({ description: "The same with the mean a and the full secular effect of J2." }),
        eccentricityAmplitudeNs: magnitude.openapi({
          description: "2 e sqrt(GM a)/c^2: half the wave of an eccentric orbit.",
        }),
        differenceNs: number.openapi({ description: "Integrated mean less secularRate, over meanOverS." }),
        why: z.string().openapi({ description: "Where the difference comes from." }),
      })
      .nullable(),
    withoutOrbit: z.string().optional().openapi({ description: "Why orbit, closedForm and perOrbitNs are null." }),
    frequencyPreset: z.strictObject({
      fractional: number.openapi({
        description: "Deliberate fractional frequency offset that takes the mean rate away.",
      }),
      hz: number.optional().openapi({ description: "The same in Hz of the nominal frequency." }),
      setHz: number.optional().openapi({ description: "The frequency to set in the laboratory." }),
    }),
    series: z.array(
      z.strictObject({
        atS: number.openapi({ description: "Since `from`." }),
        accumulatedNs: number,
        periodicNs: number.openapi({ description: "Accumulated less the mean line." }),
      }),
    ),
    basis: basisSchema.optional(),
    evidence: evidenceSchema,
    notices: z.array(noticeSchema),
  })
  .openapi("BudgetResponse");

export type BudgetRequest = z.infer<typeof budgetRequestSchema>;
export type BudgetResponse = z.infer<typeof budgetResponseSchema>;
