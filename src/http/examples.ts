/**
 * One example of a request for each call, of an invented mission; they stand in the interface document, and a test sends
 * each of them and gets a good answer.
 */

const clock = {
  counter: { ticksPerSecond: 1000, widthBits: 32 },
  anchor: { reading: 250_000, at: "2026-03-01T00:00:00Z", sigmaNs: 50 },
  oscillator: { frequencyOffset: 3.2e-10, frequencySigma: 1e-12 },
};

const trajectory = {
  kind: "state-vector",
  frame: "GCRF",
  epoch: "2026-03-01T00:00:00Z",
  positionKm: [7123, 0, 0],
  velocityKmPerS: [0, 4.7, 5.8],
};

export const requestExamples: Readonly<Record<string, object>> = {
  "/v1/corrections": {
    clock,
    trajectory,
    readings: [
      { id: "frame 7", reading: 850_000 },
      { id: "frame 8", reading: 910_125 },
    ],
    unwrap: "after",
  },
  "/v1/predicted-readings": { clock, trajectory, instants: ["2026-03-01T00:30:00Z"] },
  "/v1/drift-budgets": { trajectory, horizonS: 86_400, seriesPoints: 5 },
  "/v1/time-conversions": {
    values: ["2026-03-01T00:00:00.5Z", { at: "2026-03-01T00:00:37.5", scale: "TAI" }],
    to: ["TT", "GPS", { format: "CUC", coarseOctets: 4, fineOctets: 3 }],
  },
};
