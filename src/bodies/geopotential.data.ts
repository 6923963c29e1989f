/**
 * The geopotential to degree and order 4: degree, order, C, S, fully normalised, tide free. They belong to the GM and
 * the radius of EGM2008 (units/constants).
 * Source: EGM2008, Pavlis, Holmes, Kenyon & Factor (2012), J. Geophys. Res. 117, B04406.
 */
// biome-ignore format: one coefficient pair a line
export const geopotentialCoefficients: readonly (readonly [number, number, number, number])[] = [
  [2, 0, -0.484165143790815e-3, 0],
  [2, 1, -0.206615509074176e-9, 0.138441389137979e-8],
  [2, 2, 0.243938357328313e-5, -0.140027370385934e-5],
  [3, 0, 0.957161207093473e-6, 0],
  [3, 1, 0.203046201047864e-5, 0.248200415856872e-6],
  [3, 2, 0.904787894809528e-6, -0.619005475177618e-6],
  [3, 3, 0.721321757121568e-6, 0.141434926192941e-5],
  [4, 0, 0.539965866638991e-6, 0],
  [4, 1, -0.536157389388867e-6, -0.473567346518086e-6],
  [4, 2, 0.350501623962649e-6, 0.662480026275829e-6],
  [4, 3, 0.990856766672321e-6, -0.200956723567452e-6],
  [4, 4, -0.188519633023033e-6, 0.308803882149194e-6],
];
