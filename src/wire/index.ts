export { type BudgetRequest, type BudgetResponse, budgetRequestSchema, budgetResponseSchema } from "./budgetSchemas.ts";
export { driftBudgets } from "./budgets.ts";
export { caution } from "./caution.ts";
export {
  type ConversionRequest,
  type ConversionResponse,
  conversionRequestSchema,
  conversionResponseSchema,
} from "./conversionSchemas.ts";
export { timeConversions } from "./conversions.ts";
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
export { problemSchema, sharedShapes } from "./sharedSchemas.ts";
export { parseJson } from "./validate.ts";
export { z } from "./zod.ts";
