import { createApp, listen } from "./app.ts";
import { correctionReport } from "./cli/index.ts";
import { readConfig } from "./config.ts";
import { dot } from "./numeric/index.ts";
import { type KeplerianElements, twoBodyState } from "./orbit/index.ts";
import { endTerm, twoBodyMeanRate } from "./relativity/index.ts";
import { addSeconds, formatInstant, parseInstant } from "./time/index.ts";
import { DEGREE } from "./units/index.ts";
import { type CorrectionRequest, type CorrectionResponse, caution, type ProblemDetails } from "./wire/index.ts";

/**
 * The demo: starts the service, corrects readings of an invented mission over HTTP, holds one of them against the
 * two-body closed form, says what to try next, and stops. Everything in it is made up.
 */

const epoch = "2026-03-01T00:00:00Z";

interface Example {
  readonly title: string;
  readonly request: CorrectionRequest;
}

/** The invented "Larkspur" mission: three spacecraft that never flew. */
const mission: readonly Example[] = [
  {
    title: "Larkspur Low: 400 km, 51.6 degrees; 32 bits at 32768 Hz, oscillator 0.2 ppm fast",
    request: {
      clock: {
        counter: { ticksPerSecond: 32_768, widthBits: 32, stands: "truncated" },
        anchor: { reading: 4_000_000_000, at: epoch, sigmaNs: 200 },
        oscillator: { frequencyOffset: 2e-7, frequencySigma: 1e-11, agingPerDay: 3e-11, agingSigmaPerDay: 1e-12 },
      },
      trajectory: {
        kind: "state-vector",
        frame: "GCRF",
        epoch,
        positionKm: [6778, 0, 0],
        velocityKmPerS: [0, 4.7634, 6.0099],
        positionSigmaKm: 0.01,
        velocitySigmaKmPerS: 0.00001,
      },
      readings: [
        { id: "1 min", reading: 4_001_966_080 },
        { id: "1 orbit", reading: 4_182_000_000 },
        { id: "1 day", reading: 2_536_188_500 },
      ],
      unwrap: "after",
    },
  },
  {
    title: "Larkspur Mid: 20 182 km, 55 degrees; 10.23 MHz with a frequency preset of -4.4647e-10",
    request: {
      clock: {
        counter: { ticksPerSecond: 10_230_000 },
        anchor: { reading: 0, at: epoch, sigmaNs: 1 },
        oscillator: { presetFractional: -4.4647e-10, frequencyOffset: 1.5e-13, frequencySigma: 2e-14 },
      },
      trajectory: {
        kind: "state-vector",
        frame: "GCRF",
        epoch,
        positionKm: [26_560, 0, 0],
        velocityKmPerS: [0, 2.2336, 3.1899],
        semiMajorAxisSigmaKm: 0.001,
      },
      readings: [
        { id: "1 min", reading: 613_800_000 },
        { id: "1 orbit", reading: 440_694_202_300 },
        { id: "1 day", reading: 883_872_000_000 },
      ],
    },
  },
  {
    title: "Larkspur Far: perigee 1000 km, eccentricity 0.74, 63.4 degrees; 1 MHz, nothing known of its oscillator",
    request: {
      clock: {
        counter: { ticksPerSecond: 1_000_000 },
        anchor: { reading: "1000000", at: epoch, sigmaNs: 50 },
      },
      trajectory: {
        kind: "state-vector",
        frame: "GCRF",
        epoch,
        positionKm: [7378.137, 0, 0],
        velocityKmPerS: [0, 4.3414, 8.6696],
        positionSigmaKm: 0.05,
        velocitySigmaKmPerS: 0.00003,
      },
      readings: [
        { id: "1 min", reading: "61000000" },
        { id: "6 h", reading: "21601000000" },
        { id: "1 day", reading: "86401000000" },
      ],
    },
  },
];

async function correct(address: string, request: CorrectionRequest): Promise<CorrectionResponse> {
  const response = await fetch(`${address}/v1/corrections`, {
    method: "POST",
    headers: { "Content-Type": "application/json" },
    body: JSON.stringify(request),
  });
  if (!response.ok) throw new Error(((await response.json()) as ProblemDetails).detail);
  return (await response.json()) as CorrectionResponse;
}

/**
 * An independent check over HTTP: a table of states of an exact two-body orbit, one day, against
 * (L_G - 3 GM/(2 a c^2)) dt - (2/c^2) [r.v]. Gives both in seconds.
 */
async function closedFormCheck(address: string): Promise<{ integrated: number; closed: number }> {
  const config = readConfig({});
  const start = parseInstant(epoch, "UTC", config.leapSeconds);
  const elements: KeplerianElements = {
    semiMajorAxis: 26_560e3,
    eccentricity: 0.02,
    inclination: 55 * DEGREE,
    node: 1,
    perigeeArgument: 2,
    meanAnomaly: 3,
  };
  const states = Array.from({ length: 289 }, (_, i) => {
    const { position, velocity } = twoBodyState(elements, 300 * i);
    return {
      epoch: formatInstant(addSeconds(start, 300 * i), "UTC", config.leapSeconds),
      positionKm: position.map((x) => x / 1000) as [number, number, number],
      velocityKmPerS: velocity.map((x) => x / 1000) as [number, number, number],
    };
  });
  const { results } = await correct(address, {
    clock: { counter: { ticksPerSecond: 1_000_000_000 }, anchor: { reading: 0, at: epoch } },
    trajectory: { kind: "state-table", frame: "GCRF", states },
    terms: ["velocity", "earth-monopole", "reference-surface"],
    readings: [{ reading: 80_000_000_000_000 }],
  });
  const integrated = Number(results[0]!.clockMinusTt);
  const dt = 80_000 - integrated;
  const product = (t: number): number => {
    const { position, velocity } = twoBodyState(elements, t);
    return dot(position, velocity);
  };
  return { integrated, closed: twoBodyMeanRate(elements.semiMajorAxis) * dt + endTerm(product(dt) - product(0)) };
}

const app = createApp({ ...readConfig({}), logLevel: "error" });
const { server, address } = await listen(app, "127.0.0.1", 0);
try {
  console.log(`Tauline ${readConfig({}).version}, demo: the service runs at ${address}.`);
  console.log(`Readings of an invented mission, corrected by POST /v1/corrections. Anchor ${epoch}.\n`);
  for (const { title, request } of mission) {
    console.log(title);
    console.log(correctionReport(await correct(address, request)));
  }
  const { integrated, closed } = await closedFormCheck(address);
  console.log("Check: velocity + earth-monopole + reference-surface along an exact two-body orbit, 80 000 s");
  console.log(`  service      ${(integrated * 1e9).toFixed(6)} ns`);
  console.log(`  closed form  ${(closed * 1e9).toFixed(6)} ns   (L_G - 3GM/2ac^2) dt - (2/c^2)[r.v]`);
  console.log(`  difference   ${((integrated - closed) * 1e12).toFixed(4)} ps\n`);
  console.log("Try next: start the service with `npm start`, then in another terminal");
  console.log(`  curl -s http://127.0.0.1:8080/v1/corrections -H 'Content-Type: application/json' -d '${tryNext()}'`);
  console.log("or without a server: npm run -s tauline -- correct --help. All published checks: npm run checks\n");
  console.log(`Caution: ${caution}`);
} finally {
  app.stop();
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
}

/** A small request that fits a line: a clock on a mountain. */
function tryNext(): string {
  return JSON.stringify({
    clock: { counter: { ticksPerSecond: 1000 }, anchor: { reading: 0, at: epoch } },
    trajectory: { kind: "surface", body: "Earth", latitudeDeg: 45, longitudeDeg: 7, heightM: 3000, heightOf: "geoid" },
    readings: [{ reading: 86_400_000 }],
  });
}
