export { broadcastEccentricityTerm, endTerm, secularMeanRate, twoBodyMeanRate } from "./closedForm.ts";
export { ProperTime } from "./properTime.ts";
export type { RateTerm } from "./rateTerm.ts";
export { type PhysicalTermName, physicalTermNames, rateTerms } from "./terms.ts";
export { lorentzFactor, lorentzRate } from "./velocity.ts";
