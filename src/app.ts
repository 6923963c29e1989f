import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import type { Express } from "express";
import { destination, type Logger, pino } from "pino";
import type { Config } from "./config.ts";
import { createHttpApp } from "./http/index.ts";
import type { ProperTime } from "./relativity/index.ts";
import type { Bench } from "./wire/index.ts";

/** Integrals along trajectories that were asked for lately, by the digest of what they are made of. */
const mostKept = 32;

/** A bench that keeps the integrals used last, so that a trajectory seen before costs nothing. */
function keepingBench(config: Pick<Config, "leapSeconds" | "version">): Bench {
  const kept = new Map<string, ProperTime>();
  return {
    leapSeconds: config.leapSeconds,
    version: config.version,
    properTime(digest, build) {
      const known = kept.get(digest);
      const value = known ?? build();
      kept.delete(digest);
      kept.set(digest, value);
      if (kept.size > mostKept) kept.delete(kept.keys().next().value!);
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
  const express = createHttpApp({ bench: keepingBench(config), logger, isStopping: () => stopping });
  return {
    express,
    logger,
    stop() {
      stopping = true;
    },
  };
}

/** Starts listening. Errors: the system's own (port taken, address not ours). */
export async function listen(app: App, host: string, port: number): Promise<{ server: Server; address: string }> {
  const server = createServer(app.express);
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(port, host, resolve);
  });
  const bound = server.address() as AddressInfo;
  const name = bound.family === "IPv6" ? `[${bound.address}]` : bound.address;
  return { server, address: `http://${name}:${bound.port}` };
}
