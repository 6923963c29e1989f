export { caution } from "./caution.ts";
export {
  type CorrectionRequest,
  type CorrectionResponse,
  correctionRequestSchema,
  correctionResponseSchema,
  type PredictionRequest,
  type PredictionResponse,
  predictionRequestSchema,
  predictionResponseSchema,
} from "./correctionSchemas.ts";
export { type Bench, corrections, plainBench, predictedReadings } from "./corrections.ts";
export { type ProblemDetails, problemDetails } from "./problemDetails.ts";
export { problemSchema } from "./sharedSchemas.ts";
export { parseJson } from "./validate.ts";
export { z } from "./zod.ts";
