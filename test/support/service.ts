import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import type { Express } from "express";
import request, { type Response } from "supertest";
import { createApp } from "../../src/app.ts";
import { type Config, readConfig } from "../../src/config.ts";

/** A service of its own for a test: listens on the loopback address on a free port. */
export interface Service {
  readonly address: string;
  /** From now on no new work is begun. */
  stop(): void;
  close(): Promise<void>;
}

export interface Listener {
  readonly address: string;
  close(): Promise<void>;
}

/** Puts an application on 127.0.0.1 and any free port. */
export async function listenOnLoopback(app: Express): Promise<Listener> {
  const server: Server = createServer(app);
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(0, "127.0.0.1", resolve);
  });
  return {
    address: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    close: () =>
      new Promise<void>((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

/** The service as it is wired for real, silent, with `changes` to its configuration. */
export async function startService(changes: Partial<Config> = {}): Promise<Service> {
  const app = createApp({ ...readConfig({ LOG_LEVEL: "silent" }), ...changes });
  const listener = await listenOnLoopback(app.express);
  return { ...listener, stop: () => app.stop() };
}

export interface Sending {
  readonly method?: string;
  /** Headers to send; Content-Type is application/json unless this names another, or null for none. */
  readonly headers?: Readonly<Record<string, string | null>>;
}

/**
 * Sends a body as it stands: text and bytes untouched, anything else as JSON. Undefined: no body at all.
 * The response's `text` is the whole answer, whatever its type.
 */
export async function send(address: string, path: string, body: unknown, sending: Sending = {}): Promise<Response> {
  const { method = "POST", headers = {} } = sending;
  const call = request(address)
    [method.toLowerCase() as "post"](path)
    .ok(() => true)
    .serialize((data: unknown) => data as string);
  const type = headers["Content-Type"];
  if (body !== undefined && type === undefined) call.set("Content-Type", "application/json");
  for (const [name, value] of Object.entries(headers)) if (value !== null) call.set(name, value);
  if (body === undefined) return await call;
  const bytes =
    body instanceof Uint8Array
      ? Buffer.from(body)
      : Buffer.from(typeof body === "string" ? body : JSON.stringify(body), "utf8");
  return await call.send(bytes);
}

/** Posts a JSON body. */
export const post = (address: string, path: string, body: unknown): Promise<Response> => send(address, path, body);
