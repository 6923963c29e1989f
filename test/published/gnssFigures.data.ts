/**
 * A dozen moments of four GPS satellites on 28 April 2021: the most eccentric (G21, G02), the least (G14), and the one with
 * most of J2 in it (G08). Figures copied as numbers, so that the check of the real orbits also runs without the files.
 * Source: positions of COD0MGXFIN (final multi-GNSS orbits of CODE, AIUB; DOI 10.7892/boris.75882.3); elements of the
 * broadcast file brdc1180.21n of CDDIS. Both as they stand in data/gnss-2021-118, see its PROVENANCE.md.
 */
export interface GnssFigures {
  readonly satellite: string;
  /** GPS time of the middle position. */
  readonly at: string;
  /** F e sqrt(A) sin E of the message at that time, ns: worked out beside this project, from the figures below. */
  readonly term: number;
  /** Second of GPS week 2155. */
  readonly toe: number;
  /** rad, and rad/s. */
  readonly meanAnomaly: number;
  readonly motionCorrection: number;
  readonly eccentricity: number;
  /** m^0.5 */
  readonly rootOfAxis: number;
  /** Earth-fixed, km, every five minutes around the middle one. */
  readonly positions: readonly (readonly [number, number, number])[];
}

export const gnssFigures: readonly GnssFigures[] = [
  {
    satellite: "G21",
    at: "2021-04-28T18:40:00",
    term: -21.4989,
    toe: 324000,
    meanAnomaly: 0.238212897463e1,
    motionCorrection: 0.431303679815e-8,
    eccentricity: 0.241103537846e-1,
    rootOfAxis: 0.515369853592e4,
    // biome-ignore format: one position a line
    positions: [
      [15452.353500, -2542.056936, 22150.023350],
      [15528.626273, -1750.956963, 22188.368706],
      [15619.054487, -961.200262, 22186.898750],
      [15723.458826, -174.443717, 22145.665430],
      [15841.566473, 607.673177, 22064.787003],
    ],
  },
  {
    satellite: "G21",
    at: "2021-04-28T20:40:00",
    term: 32.3671,
    toe: 331200,
    meanAnomaly: -0.285092153249e1,
    motionCorrection: 0.417231665088e-8,
    eccentricity: 0.24107088102e-1,
    rootOfAxis: 0.515370457649e4,
    // biome-ignore format: one position a line
    positions: [
      [19929.203235, 13126.211936, 12863.505109],
      [20133.073503, 13516.637737, 12087.484330],
      [20326.770832, 13880.455629, 11289.663493],
      [20508.809327, 14217.617631, 10471.446041],
      [20677.713275, 14528.170909, 9634.275255],
    ],
  },
  {
    satellite: "G21",
    at: "2021-04-28T22:40:00",
    term: 54.9466,
    toe: 338400,
    meanAnomaly: -0.180082538857e1,
    motionCorrection: 0.437589655937e-8,
    eccentricity: 0.24108485668e-1,
    rootOfAxis: 0.515370074654e4,
    // biome-ignore format: one position a line
    positions: [
      [19370.792027, 15997.131213, -8604.979278],
      [19003.787267, 15907.934138, -9459.738701],
      [18605.315677, 15812.525118, -10296.316711],
      [18175.598476, 15712.317900, -11113.042904],
      [17714.968879, 15608.722170, -11908.275059],
    ],
  },
  {
    satellite: "G02",
    at: "2021-04-28T18:40:00",
    term: -28.0211,
    toe: 324000,
    meanAnomaly: 0.287909510667,
    motionCorrection: 0.431232248268e-8,
    eccentricity: 0.202163800132e-1,
    rootOfAxis: 0.515366684723e4,
    // biome-ignore format: one position a line
    positions: [
      [-13218.342848, -14238.770225, -17436.824683],
      [-13221.343581, -14933.619415, -16863.616254],
      [-13233.952303, -15605.210930, -16256.458226],
      [-13255.144286, -16252.166350, -15616.625127],
      [-13283.825904, -16873.198587, -14945.456038],
    ],
  },
  {
    satellite: "G02",
    at: "2021-04-28T20:40:00",
    term: -45.8549,
    toe: 331200,
    meanAnomaly: 0.133801018378e1,
    motionCorrection: 0.41798169633e-8,
    eccentricity: 0.202170491684e-1,
    rootOfAxis: 0.515367006874e4,
    // biome-ignore format: one position a line
    positions: [
      [-13406.928876, -22813.569910, 2584.205725],
      [-13286.819905, -22784.340073, 3530.038345],
      [-13145.906565, -22728.344936, 4469.150819],
      [-12983.308703, -22646.707451, 5399.777397],
      [-12798.225518, -22540.621955, 6320.177498],
    ],
  },
  {
    satellite: "G02",
    at: "2021-04-28T22:40:00",
    term: -17.8365,
    toe: 338400,
    meanAnomaly: 0.238820431688e1,
    motionCorrection: 0.417374528181e-8,
    eccentricity: 0.202177036554e-1,
    rootOfAxis: 0.515366922188e4,
    // biome-ignore format: one position a line
    positions: [
      [-3949.781189, -17491.299268, 20233.650563],
      [-3271.020268, -17207.368824, 20608.438125],
      [-2575.625133, -16930.542523, 20945.862454],
      [-1864.863637, -16661.921961, 21245.351394],
      [-1140.067718, -16402.536753, 21506.398714],
    ],
  },
  {
    satellite: "G08",
    at: "2021-04-28T18:40:00",
    term: -7.4819,
    toe: 324000,
    meanAnomaly: 0.224765865952e1,
    motionCorrection: 0.483020119727e-8,
    eccentricity: 0.634956581052e-2,
    rootOfAxis: 0.515358763885e4,
    // biome-ignore format: one position a line
    positions: [
      [23526.421640, 3476.587576, 12128.749556],
      [23888.473025, 3739.680578, 11325.457074],
      [24227.995377, 3982.164642, 10500.819088],
      [24543.643898, 4204.717329, 9656.398337],
      [24834.137981, 4408.101797, 8793.792910],
    ],
  },
  {
    satellite: "G08",
    at: "2021-04-28T20:40:00",
    term: 7.0103,
    toe: 331200,
    meanAnomaly: -0.298533826968e1,
    motionCorrection: 0.478448500729e-8,
    eccentricity: 0.634834519588e-2,
    rootOfAxis: 0.51535899601e4,
    // biome-ignore format: one position a line
    positions: [
      [24140.549907, 6172.475919, -9631.476198],
      [23763.142536, 6246.525119, -10476.502880],
      [23355.796278, 6328.974982, -11301.806976],
      [22919.459845, 6420.994673, -12105.826860],
      [22455.171830, 6523.695926, -12887.039124],
    ],
  },
  {
    satellite: "G08",
    at: "2021-04-28T22:40:00",
    term: 14.5337,
    toe: 338400,
    meanAnomaly: -0.193520489303e1,
    motionCorrection: 0.483984445609e-8,
    eccentricity: 0.634895404801e-2,
    rootOfAxis: 0.515358832741e4,
    // biome-ignore format: one position a line
    positions: [
      [9488.023357, 11835.132180, -21823.377945],
      [8782.033116, 12273.111049, -21867.993363],
      [8082.907359, 12724.239230, -21870.793680],
      [7392.189018, 13187.515593, -21831.738786],
      [6711.365445, 13661.853752, -21750.868613],
    ],
  },
  {
    satellite: "G14",
    at: "2021-04-28T18:40:00",
    term: 0.6548,
    toe: 324000,
    meanAnomaly: -0.833916514439,
    motionCorrection: 0.479877131666e-8,
    eccentricity: 0.614341697656e-3,
    rootOfAxis: 0.51537522831e4,
    // biome-ignore format: one position a line
    positions: [
      [2948.290929, -17326.897547, 19895.647797],
      [3628.878467, -17648.139728, 19496.304352],
      [4290.100814, -17973.350315, 19059.580836],
      [4930.861914, -18301.188358, 18586.312812],
      [5550.154831, -18630.263145, 18077.406086],
    ],
  },
  {
    satellite: "G14",
    at: "2021-04-28T20:40:00",
    term: -0.757,
    toe: 331200,
    meanAnomaly: 0.21736713714,
    motionCorrection: 0.471841082646e-8,
    eccentricity: 0.614826916717e-3,
    rootOfAxis: 0.515375356293e4,
    // biome-ignore format: one position a line
    positions: [
      [12758.408396, -23162.007261, 2342.071647],
      [12871.293055, -23176.366767, 1394.912136],
      [12965.656614, -23161.908339, 445.077789],
      [13042.642082, -23117.869164, -505.609902],
      [13103.448903, -23043.580420, -1455.327964],
    ],
  },
  {
    satellite: "G14",
    at: "2021-04-28T22:40:00",
    term: -1.4056,
    toe: 341072,
    meanAnomaly: 0.165408079579e1,
    motionCorrection: 0.463483591666e-8,
    eccentricity: 0.61446276959e-3,
    rootOfAxis: 0.515375617981e4,
    // biome-ignore format: one position a line
    positions: [
      [12999.274683, -15089.955093, -17571.987518],
      [13029.450041, -14409.063027, -18113.845334],
      [13071.133387, -13709.056395, -18621.028981],
      [13125.070187, -12991.462411, -19092.570792],
      [13191.920267, -12257.864015, -19527.571471],
    ],
  },
];
