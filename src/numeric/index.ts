export { antiderivative, antiderivativeInto, ChebyshevBasis, evaluateSeries } from "./chebyshev.ts";
export { addToTwoPart, multiplyTwoPart, type TwoPart, twoProduct, twoSum } from "./errorfree.ts";
export { accumulateKnot, interpolateStates, lagrangeStates, slopeAtKnot } from "./hermite.ts";
export { TabulatedFunction } from "./tabulated.ts";
export {
  add,
  axisRotation,
  cross,
  dot,
  type Mat3,
  multiply,
  multiplyTransposed,
  norm,
  product,
  scale,
  subtract,
  transpose,
  type Vec3,
} from "./vector.ts";
