import { frames } from "../orbit/index.ts";
import { basisSchema, instantSchema, number, sigma, vectorSchema } from "./sharedSchemas.ts";
import { z } from "./zod.ts";

const frameSchema = z.enum(frames).openapi("Frame", {
  description:
    "GCRF: geocentric celestial. EME2000: mean equator and equinox of J2000.0. ICRF: axes of GCRF, centre Earth. ITRF: Earth-fixed, its velocity relative to the rotating Earth.",
});

const center = z.enum(["Earth", "Moon"]).optional().openapi({
  description: "About what the states are given; the Moon only for tables, with the axes of ICRF, GCRF or EME2000.",
});

const stateVectorSchema = z
  .strictObject({
    kind: z.literal("state-vector"),
    frame: frameSchema,
    center,
    epoch: instantSchema,
    positionKm: vectorSchema,
    velocityKmPerS: vectorSchema,
    positionSigmaKm: sigma.max(1e6).optional(),
    velocitySigmaKmPerS: sigma.max(1e6).optional(),
    semiMajorAxisSigmaKm: sigma.max(1e9).optional(),
    covarianceRtn: z
      .array(z.array(number.min(-1e12).max(1e12)).min(6).max(6))
      .min(6)
      .max(6)
      .optional()
      .openapi({ description: "Radial, transverse, normal position (km) and velocity (km/s)." }),
    basis: basisSchema.optional(),
  })
  .openapi("StateVector", { description: "One state, propagated at most 400 days either way." });

const stateTableSchema = z
  .strictObject({
    kind: z.literal("state-table"),
    frame: frameSchema,
    center,
    states: z
      .array(
        z.strictObject({ epoch: instantSchema, positionKm: vectorSchema, velocityKmPerS: vectorSchema.optional() }),
      )
      .min(2)
      .max(200_000),
    basis: basisSchema.optional(),
  })
  .openapi("StateTable", { description: "States in rising order, interpolated inside and never used outside." });

const place = {
  latitudeDeg: number.min(-90).max(90),
  longitudeDeg: number.min(-360).max(360),
  heightM: number.min(-12_000).max(100_000),
};

const heightOf = z
  .enum(["ellipsoid", "geoid"])
  .openapi({ description: "What heights are above: WGS 84 or the geoid." });

const surfaceSchema = z
  .strictObject({
    kind: z.literal("surface"),
    body: z.enum(["Earth", "Moon"]),
    ...place,
    heightOf: heightOf.optional().openapi({
      description: "What the height is above: required for the Earth; left out for the Moon (above 1737.4 km).",
    }),
  })
  .openapi("Surface", { description: "A clock at rest on the Earth or on the Moon (mean Earth / polar axes)." });

const trackSchema = z
  .strictObject({
    kind: z.literal("track"),
    body: z.literal("Earth"),
    heightOf,
    points: z
      .array(z.strictObject({ at: instantSchema, ...place }))
      .min(2)
      .max(200_000),
  })
  .openapi("Track", {
    description: "A clock carried over the Earth: great-circle legs between points, height even in time.",
  });

const basis = basisSchema.optional();
const messageText = z.string().max(16 * 1024 * 1024);

const oemSchema = z.strictObject({ kind: z.literal("oem"), text: messageText, basis }).openapi("Oem", {
  description:
    "An orbit ephemeris message, CCSDS 502.0-B, KVN or XML; its interpolation and useable span are honoured.",
});

const opmSchema = z.strictObject({ kind: z.literal("opm"), text: messageText, basis }).openapi("Opm", {
  description:
    "An orbit parameter message, KVN or XML, propagated like a state vector; one with manoeuvres is refused.",
});

const ommSchema = z
  .strictObject({
    kind: z.literal("omm"),
    omm: z.record(z.string(), z.unknown()).optional().openapi({ description: "The message as JSON." }),
    text: messageText.optional().openapi({ description: "The message as KVN, XML or JSON text, instead of omm." }),
    basis,
  })
  .openapi("Omm", { description: "An orbit mean-elements message for SGP4; exactly one of omm and text." });

const tleSchema = z
  .strictObject({ kind: z.literal("tle"), line1: z.string().max(200), line2: z.string().max(200), basis })
  .openapi("Tle", { description: "Two-line elements, checksums checked." });

const single = [
  stateVectorSchema,
  stateTableSchema,
  oemSchema,
  opmSchema,
  ommSchema,
  tleSchema,
  surfaceSchema,
  trackSchema,
] as const;

const phasesSchema = z
  .strictObject({
    kind: z.literal("phases"),
    parts: z
      .array(z.strictObject({ from: instantSchema, trajectory: z.discriminatedUnion("kind", [...single]) }))
      .min(1)
      .max(1000),
  })
  .openapi("Phases", { description: "Trajectories one after the other, each from its start to the next one's." });

export const trajectorySchema = z.discriminatedUnion("kind", [...single, phasesSchema]).openapi("Trajectory");

export type TrajectoryIn = z.infer<typeof trajectorySchema>;

export const earthOrientationSchema = z
  .strictObject({
    ut1MinusUtcS: number.min(-1).max(1).optional(),
    xPoleArcsec: number.min(-2).max(2).optional(),
    yPoleArcsec: number.min(-2).max(2).optional(),
  })
  .openapi("EarthOrientation", {
    description: "How the Earth is turned; what is left out is zero, and the uncertainty says so.",
  });
