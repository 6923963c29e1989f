import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import type { Duplex } from "node:stream";
import type { Express } from "express";
import { destination, type Logger, pino } from "pino";
import type { Config } from "./config.ts";
import { createHttpApp } from "./http/index.ts";
import { Problem } from "./problem/index.ts";
import type { ProperTime } from "./relativity/index.ts";
import { documentPage, problemPage, problemsPage } from "./web/index.ts";
import { type Bench, problemDetails } from "./wire/index.ts";

/** So many bytes of integrals and paths are kept for trajectories that were asked for lately. */
const mostKeptBytes = 256 * 1024 * 1024;

/** A bench that keeps the integrals used last, by the digest of what they are made of: a trajectory seen before costs nothing. */
function keepingBench(config: Pick<Config, "leapSeconds" | "version">): Bench {
  const kept = new Map<string, ProperTime>();
  return {
    leapSeconds: config.leapSeconds,
    version: config.version,
    properTime(digest, build) {
      // Those kept grow while they are used, so the sum is taken anew; the newest stays whatever its size.
      let bytes = 0;
      for (const [key, value] of [...kept].reverse()) {
        bytes += value.bytes;
        if (bytes > mostKeptBytes) kept.delete(key);
      }
      const value = kept.get(digest) ?? build();
      kept.delete(digest);
      kept.set(digest, value);
      return value;
    },
  };
}

export interface App {
  readonly express: Express;
  readonly logger: Logger;
  /** From now on no new work is begun. */
  stop(): void;
}

/** Wires the service: logs go to standard error. */
export function createApp(config: Config): App {
  const logger = pino({ level: config.logLevel, base: null }, destination({ fd: 2, sync: true }));
  let stopping = false;
  const express = createHttpApp({
    bench: keepingBench(config),
    logger,
    isStopping: () => stopping,
    pages: { documentPage, problemPage, problemsPage },
  });
  return {
    express,
    logger,
    stop() {
      stopping = true;
    },
  };
}

/** What is no HTTP at all never reaches the application; it still gets problem details. */
function answerBrokenRequest(error: NodeJS.ErrnoException, socket: Duplex): void {
  if (!socket.writable) {
    socket.destroy();
    return;
  }
  const problem = new Problem("invalid-request", `The request is no readable HTTP (${error.code ?? error.message}).`);
  const body = JSON.stringify(problemDetails(problem));
  const head = `HTTP/1.1 400 Bad Request\r\nContent-Type: application/problem+json\r\nContent-Length: ${Buffer.byteLength(body)}`;
  socket.end(`${head}\r\nConnection: close\r\n\r\n${body}`);
}

/** Starts listening. Errors: the system's own (port taken, address not ours). */
export async function listen(app: App, host: string, port: number): Promise<{ server: Server; address: string }> {
  const server = createServer({ requestTimeout: 60_000, headersTimeout: 20_000 }, app.express);
  server.maxConnections = 1000;
  server.on("clientError", answerBrokenRequest);
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(port, host, resolve);
  });
  const bound = server.address() as AddressInfo;
  const name = bound.family === "IPv6" ? `[${bound.address}]` : bound.address;
  return { server, address: `http://${name}:${bound.port}` };
}
