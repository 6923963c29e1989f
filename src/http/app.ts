import { randomUUID } from "node:crypto";
import express, { type Express, type NextFunction, type Request, type Response } from "express";
import helmet from "helmet";
import type { Logger } from "pino";
import { pinoHttp } from "pino-http";
import { Problem } from "../problem/index.ts";
import { daysUntil, formatInstant } from "../time/index.ts";
import { type Bench, parseJson, problemDetails } from "../wire/index.ts";
import { calls } from "./calls.ts";
import { interfaceDocument } from "./interfaceDocument.ts";
import { addPages, type PageMakers, pageAddresses } from "./pages.ts";

/** Largest body, bytes, after decompression. */
const mostBytes = 16 * 1024 * 1024;

export interface HttpParts {
  readonly bench: Bench;
  readonly logger: Logger;
  /** True once the service is going down: no new work is begun. */
  readonly isStopping: () => boolean;
  /** Makes the pages for people; without it there are none. */
  readonly pages?: PageMakers;
}

/** The HTTP application. It holds no state of its own. */
export function createHttpApp({ bench, logger, isStopping, pages }: HttpParts): Express {
  const app = express();
  app.disable("x-powered-by");
  app.set("etag", false);
  app.enable("strict routing");
  app.enable("case sensitive routing");
  app.use(
    pinoHttp({
      logger,
      genReqId: (request, response) => {
        const given = request.headers["x-request-id"];
        const id = typeof given === "string" && /^[A-Za-z0-9._-]{1,64}$/.test(given) ? given : randomUUID();
        response.setHeader("X-Request-Id", id);
        return id;
      },
      customLogLevel: (_request, response, error) =>
        error || response.statusCode >= 500 ? "error" : response.statusCode >= 400 ? "info" : "debug",
      serializers: {
        req: ({ id, method, url }: { id: string; method: string; url: string }) => ({ id, method, url }),
        res: ({ statusCode }: { statusCode: number }) => ({ statusCode }),
      },
    }),
  );
  app.use(
    helmet({
      contentSecurityPolicy: { directives: { upgradeInsecureRequests: null } },
      strictTransportSecurity: false,
    }),
  );

  app.get("/healthz", (_request, response) => {
    response.json({ status: "alive" });
  });
  app.get("/readyz", (_request, response) => {
    requireRunning(isStopping, response);
    const { leapSeconds } = bench;
    response.json({
      status: "ready",
      version: bench.version,
      leapSeconds: {
        source: leapSeconds.source,
        expires: formatInstant(leapSeconds.expires, "UTC", leapSeconds),
        daysLeft: daysUntil(leapSeconds.expires, leapSeconds.steps.at(-1)!.offset, Date.now()),
      },
    });
  });
  let document: object | undefined;
  const theDocument = (): object => {
    document ??= interfaceDocument(bench.version);
    return document;
  };
  app.get("/openapi.json", (_request, response) => {
    response.json(theDocument());
  });
  if (pages !== undefined) addPages(app, pages, theDocument);

  const readBytes = express.raw({ type: () => true, limit: mostBytes });
  for (const call of calls) {
    app.post(
      call.path,
      (request, response, next) => {
        requireRunning(isStopping, response);
        requireJson(request);
        requireSize(request, response);
        readBytes(request, response, next);
      },
      (request: Request, response: Response) => {
        const answer = call.answer(parseJson(decode(request.body)), bench);
        closeWhenStopping(isStopping, response);
        response.type("application/json").send(JSON.stringify(answer));
      },
    );
  }
  const methods: Readonly<Record<string, string>> = {
    ...Object.fromEntries(calls.map(({ path }) => [path, "POST"])),
    "/healthz": "GET, HEAD",
    "/readyz": "GET, HEAD",
    "/openapi.json": "GET, HEAD",
    ...(pages === undefined ? {} : Object.fromEntries(pageAddresses.map((path) => [path, "GET, HEAD"]))),
  };
  app.use((request, response) => {
    const allowed = methods[request.path];
    if (allowed === undefined) {
      throw new Problem("unknown-path", `There is nothing at ${request.path.slice(0, 200)}.`);
    }
    response.setHeader("Allow", allowed);
    throw new Problem("method-not-allowed", `${request.path} takes ${allowed}, not ${request.method}.`);
  });
  app.use((error: unknown, request: Request, response: Response, next: NextFunction) => {
    if (response.headersSent) {
      next(error);
      return;
    }
    const problem = asProblem(error);
    closeWhenStopping(isStopping, response);
    if (problem.code === "internal-error")
      request.log.error({ err: error }, "a request failed for a fault of the service");
    response
      .status(problem.status)
      .type("application/problem+json")
      .send(JSON.stringify(problemDetails(problem, String(request.id))));
  });
  return app;
}

/** The bytes of a body as text. Errors: invalid-json when they are not UTF-8. */
function decode(body: unknown): string {
  if (!Buffer.isBuffer(body)) return "";
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(body);
  } catch {
    throw new Problem("invalid-json", "The body is not UTF-8.", [{ place: [], expected: "JSON in UTF-8" }]);
  }
}

function requireRunning(isStopping: () => boolean, response: Response): void {
  if (!isStopping()) return;
  response.setHeader("Retry-After", "5");
  response.setHeader("Connection", "close");
  throw new Problem("unavailable", "The service is stopping; no new work is begun.");
}

/** A connection that outlives its answer would hold up the end of the service. */
function closeWhenStopping(isStopping: () => boolean, response: Response): void {
  if (isStopping()) response.setHeader("Connection", "close");
}

/** Refuses what is too large before its body is read. */
function requireSize(request: Request, response: Response): void {
  const length = Number(request.headers["content-length"] ?? 0);
  if (length <= mostBytes) return;
  response.setHeader("Connection", "close");
  throw tooLarge();
}

function tooLarge(): Problem {
  return new Problem("body-too-large", `The body is larger than ${mostBytes} bytes (16 MiB).`, [
    { place: [], expected: `at most ${mostBytes} bytes` },
  ]);
}

function requireJson(request: Request): void {
  const type = request.headers["content-type"];
  const [media = "", ...parameters] = (type ?? "")
    .toLowerCase()
    .split(";")
    .map((part) => part.trim());
  const charset = parameters
    .find((parameter) => parameter.startsWith("charset="))
    ?.slice(8)
    .replaceAll('"', "");
  if (media === "application/json" && (charset === undefined || charset === "utf-8")) return;
  throw new Problem(
    "unsupported-media-type",
    type === undefined ? "The request has no Content-Type." : `The body is declared as "${type.slice(0, 100)}".`,
    [{ place: [], received: type, expected: "Content-Type: application/json, in UTF-8" }],
  );
}

/** Failures of reading a body come with a `type` of their own; everything else that is no Problem is our fault. */
function asProblem(error: unknown): Problem {
  if (error instanceof Problem) return error;
  const { type, status } = error as { type?: string; status?: number };
  if (type === "entity.too.large") return tooLarge();
  if (status === 415) {
    return new Problem("unsupported-media-type", (error as Error).message, [
      { place: [], expected: "UTF-8, without Content-Encoding or with gzip, deflate or br" },
    ]);
  }
  if (status !== undefined && status >= 400 && status < 500) {
    return new Problem("invalid-json", `The body could not be read: ${(error as Error).message}.`, [
      { place: [], expected: "one whole JSON object" },
    ]);
  }
  return new Problem("internal-error", "The service failed; the request id leads to the reason in its log.");
}
