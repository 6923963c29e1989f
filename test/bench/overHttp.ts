import { correction, lowOrbit } from "../support/requests.ts";
import { between, type Figure, figure, plain, type Row } from "./measure.ts";
import { asRequest, sendAll } from "./requestLoop.ts";
import { type Served, startServer } from "./servers.ts";

const rounds = 15;
const warmRounds = 4;

let made = 0;
/** A low orbit that was never asked for before: a nanometre or so beside the last. */
function newOrbit(): unknown {
  return { ...lowOrbit(), positionKm: [6901 + 1e-9 * ++made, 0, 0] };
}

const oneReading = (trajectory: unknown): string =>
  JSON.stringify(correction({ trajectory, readings: [{ reading: 3_600_000 }] }));

const hundredReadings = (trajectory: unknown): string => {
  const readings = Array.from({ length: 100 }, (_, i) => ({ reading: 60_000 * (i + 1) }));
  return JSON.stringify(correction({ trajectory, readings }));
};

async function compare(service: Served, echo: Served, body: () => string, count: number): Promise<Figure> {
  const ratios: number[] = [];
  for (let round = -warmRounds; round < rounds; round++) {
    const bodies = Array.from({ length: count }, body);
    const ours = () =>
      sendAll(
        service.port,
        bodies.map((text) => asRequest("/v1/corrections", text)),
      );
    const theirs = () =>
      sendAll(
        echo.port,
        bodies.map((text) => asRequest("/echo", text)),
      );
    const first = round % 2 === 0 ? await ours() : await theirs();
    const second = round % 2 === 0 ? await theirs() : await ours();
    if (round >= 0) ratios.push(round % 2 === 0 ? second / first : first / second);
  }
  return figure(ratios);
}

/**
 * HTTP-1, HTTP-C, HTTP-100: POST /v1/corrections against an echo of the same body, each server a process of its own, and
 * new ones for each case, because the service keeps the orbits of earlier requests. Targets of a later issue.
 */
export async function overHttp(): Promise<Row[]> {
  const seen = newOrbit();
  const cases = [
    ["HTTP-1", "one reading after an hour, new orbit each time / echo", 0.6, () => oneReading(newOrbit()), 60],
    ["HTTP-C", "the same, orbit seen before / echo", 0.9, () => oneReading(seen), 200],
    ["HTTP-100", "100 readings, one a minute, new orbit each time / echo", 0.6, () => hundredReadings(newOrbit()), 30],
    ["HTTP-100", "the same, orbit seen before / echo", 0.6, () => hundredReadings(seen), 30],
  ] as const;
  const rows: Row[] = [];
  for (const [id, definition, target, body, count] of cases) {
    const ratio = await withServers((service, echo) => compare(service, echo, body, count));
    rows.push({
      id,
      definition,
      reached: plain(ratio.median),
      target: target.toFixed(2),
      met: ratio.median >= target,
      spread: between(ratio),
    });
  }
  return rows;
}

async function withServers<T>(work: (service: Served, echo: Served) => Promise<T>): Promise<T> {
  const service = await startServer("service");
  const echo = await startServer("echo");
  try {
    return await work(service, echo);
  } finally {
    for (const { child } of [service, echo]) child.stdin!.end();
  }
}
