import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { connect, createServer, type Socket } from "node:net";
import { networkInterfaces, tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { shippedLeapSeconds } from "../../src/time/leapSeconds.data.ts";
import { type Running, startServe } from "../support/process.ts";
import { correction } from "../support/requests.ts";
import { post, send } from "../support/service.ts";

/** The real process: its start, its lines, its end. */

const readyLine = /^Tauline \S+ is ready at (http:\/\/\S+?) \(leap-second table to (\d{1,2} [A-Z][a-z]+ \d{4})\)\.\n/;

const running = new Set<Running>();

function serve(environment: Readonly<Record<string, string>>): Running {
  const process = startServe(environment);
  running.add(process);
  return process;
}

async function ready(environment: Readonly<Record<string, string>> = {}): Promise<Running & { address: string }> {
  const process = serve({ PORT: "0", ...environment });
  const [, address] = await process.said("out", readyLine);
  return { ...process, address: address! };
}

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "tauline-process-"));
});
afterEach(async () => {
  for (const process of running) {
    process.child.kill("SIGKILL");
    await process.ended;
  }
  running.clear();
});
afterAll(() => rmSync(folder, { recursive: true }));

describe("a start", () => {
  it("says where it is ready, answers /readyz, keeps to the loopback address and ends on SIGTERM with 0", async () => {
    const process = await ready();
    expect(process.address).toMatch(/^http:\/\/127\.0\.0\.1:[1-9]\d*$/);
    const response = await send(process.address, "/readyz", undefined, { method: "GET" });
    expect(response.status).toBe(200);
    expect(response.body.status).toBe("ready");
    const port = Number(new URL(process.address).port);
    const others = Object.values(networkInterfaces())
      .flatMap((list) => list ?? [])
      .filter(({ internal, family }) => !internal && family === "IPv4");
    for (const { address } of others) expect(await opens(address, port)).toBe(false);
    expect(await opens("127.0.0.1", port)).toBe(true);
    process.child.kill("SIGTERM");
    expect(await process.ended).toEqual({ code: 0, signal: null });
    expect(process.out()).toMatch(new RegExp(`${readyLine.source}$`));
  });

  it("prints the ready line even when logs are silent, and then nothing else", async () => {
    const process = await ready({ LOG_LEVEL: "silent" });
    expect((await post(process.address, "/v1/corrections", {})).status).toBe(400);
    process.child.kill("SIGINT");
    expect((await process.ended).code).toBe(0);
    expect(process.out()).toMatch(new RegExp(`${readyLine.source}$`));
    expect(process.messages()).toBe("");
  });

  it("takes the leap-second list that it is given", async () => {
    const file = join(folder, "list");
    writeFileSync(file, shippedLeapSeconds.replaceAll("\n", "\r\n"));
    const process = await ready({ LEAP_SECONDS_FILE: file });
    // "#@" of the shipped list, 4 023 129 600 s after 1900-01-01, is 2027-06-28.
    expect(process.out()).toContain("leap-second table to 28 June 2027");
  });

  it("takes empty variables as not given", async () => {
    const process = await ready({ HOST: "", LOG_LEVEL: "", LEAP_SECONDS_FILE: "" });
    expect((await send(process.address, "/healthz", undefined, { method: "GET" })).status).toBe(200);
  });
});

const opens = (host: string, port: number): Promise<boolean> =>
  new Promise((resolve) => {
    const socket = connect({ host, port, timeout: 2000 });
    const end = (open: boolean) => {
      socket.destroy();
      resolve(open);
    };
    socket.once("connect", () => end(true));
    socket.once("error", () => end(false));
    socket.once("timeout", () => end(false));
  });

describe("logs", () => {
  it("are JSON lines on standard error with the request id and without the request's contents", async () => {
    const process = await ready({ LOG_LEVEL: "debug" });
    const secretly = { ...correction(), unasked: "lark-4711" };
    await send(process.address, "/v1/corrections", secretly, { headers: { "X-Request-Id": "first-of-two" } });
    await send(process.address, "/healthz", undefined, { method: "GET", headers: { "X-Request-Id": "second-of-two" } });
    await process.said("messages", /second-of-two.*\n/);
    const lines = process
      .messages()
      .trimEnd()
      .split("\n")
      .map((line) => JSON.parse(line));
    const byId = (id: string) => lines.find((line) => line.req?.id === id);
    expect(byId("first-of-two")).toMatchObject({
      req: { method: "POST", url: "/v1/corrections" },
      res: { statusCode: 400 },
    });
    expect(byId("second-of-two")).toMatchObject({ res: { statusCode: 200 } });
    expect(process.messages()).not.toContain("lark-4711");
    expect(process.out()).not.toContain("of-two");
  });
});

/** A connection on which bytes are sent by hand. */
class Wire {
  readonly #socket: Socket;
  #text = "";
  #look: (() => void) | undefined;
  readonly closed: Promise<void>;

  constructor(address: string) {
    const { hostname, port } = new URL(address);
    this.#socket = connect({ host: hostname, port: Number(port) });
    this.closed = new Promise((resolve) => this.#socket.once("close", () => resolve()));
    this.#socket.setEncoding("utf8").on("data", (chunk: string) => {
      this.#text += chunk;
      this.#look?.();
    });
    this.#socket.on("error", () => {});
  }

  send(text: string): void {
    this.#socket.write(text);
  }

  async heard(pattern: RegExp): Promise<string> {
    return new Promise((resolve, reject) => {
      this.#look = () => {
        if (pattern.test(this.#text)) resolve(this.#text);
      };
      this.#look();
      this.closed.then(() => reject(new Error(`closed before ${pattern}: ${this.#text}`)));
    });
  }
}

describe("SIGTERM", () => {
  it("while a request is in flight: it is answered in full, no other is taken, exit 0", async () => {
    const process = await ready({ LOG_LEVEL: "info" });
    const body = JSON.stringify(correction());
    const wire = new Wire(process.address);
    // The service says "continue" when it has begun with the request (RFC 9110, 10.1.1).
    wire.send(
      `POST /v1/corrections HTTP/1.1\r\nHost: tauline\r\nContent-Type: application/json\r\nContent-Length: ${body.length}\r\nExpect: 100-continue\r\n\r\n`,
    );
    await wire.heard(/^HTTP\/1\.1 100 /);
    wire.send(body.slice(0, 50));
    process.child.kill("SIGTERM");
    await process.said("messages", /stopping: no new connections/);
    expect(await opens("127.0.0.1", Number(new URL(process.address).port))).toBe(false);
    const asked = Date.now();
    wire.send(body.slice(50));
    const text = await wire.heard(/\}\]\}$/);
    const answer = text.slice(text.lastIndexOf("\r\n\r\n") + 4);
    expect(text).toContain("HTTP/1.1 200 OK");
    expect(JSON.parse(answer).results).toHaveLength(1);
    expect(await process.ended).toEqual({ code: 0, signal: null });
    // A connection that is merely kept open does not hold the process: it is closed with its answer.
    expect(Date.now() - asked).toBeLessThan(4000);
  });

  it("with an idle connection: the process does not wait for it", async () => {
    const process = await ready();
    const wire = new Wire(process.address);
    wire.send("GET /healthz HTTP/1.1\r\nHost: tauline\r\n\r\n");
    await wire.heard(/alive/);
    process.child.kill("SIGTERM");
    const asked = Date.now();
    expect(await process.ended).toEqual({ code: 0, signal: null });
    await wire.closed;
    expect(Date.now() - asked).toBeLessThan(4000);
  });
});

describe("a bad environment ends the start with 1 and says why", () => {
  const cases: readonly { name: string; environment: () => Record<string, string>; says: RegExp }[] = [
    { name: "PORT=abc", environment: () => ({ PORT: "abc" }), says: /PORT.*"abc".*0.*65535/ },
    { name: "PORT=65536", environment: () => ({ PORT: "65536" }), says: /PORT.*"65536".*65535/ },
    { name: "PORT=-1", environment: () => ({ PORT: "-1" }), says: /PORT.*"-1"/ },
    { name: "LOG_LEVEL=loud", environment: () => ({ LOG_LEVEL: "loud" }), says: /LOG_LEVEL.*"loud".*info.*silent/ },
    {
      name: "two at once",
      environment: () => ({ PORT: "1e3", LOG_LEVEL: "INFO" }),
      says: /PORT.*"1e3"[\s\S]*LOG_LEVEL.*"INFO"/,
    },
    {
      name: "LEAP_SECONDS_FILE missing",
      environment: () => ({ LEAP_SECONDS_FILE: join(folder, "nowhere") }),
      says: /LEAP_SECONDS_FILE.*nowhere/,
    },
    {
      name: "LEAP_SECONDS_FILE a folder",
      environment: () => ({ LEAP_SECONDS_FILE: folder }),
      says: /LEAP_SECONDS_FILE.*(directory|folder)/,
    },
    {
      name: "LEAP_SECONDS_FILE corrupt",
      environment: () => {
        const file = join(folder, "corrupt");
        writeFileSync(file, shippedLeapSeconds.replace("3692217600 37", "3692304000 37"));
        return { LEAP_SECONDS_FILE: file };
      },
      says: /LEAP_SECONDS_FILE.*corrupt.*digest/,
    },
    {
      name: "LEAP_SECONDS_FILE of another kind",
      environment: () => {
        const file = join(folder, "other");
        writeFileSync(file, "%PDF-1.7\n");
        return { LEAP_SECONDS_FILE: file };
      },
      says: /LEAP_SECONDS_FILE.*other, line 1/,
    },
  ];
  it.each(cases)("$name", async ({ environment, says }) => {
    const process = serve({ PORT: "0", ...environment() });
    expect(await process.ended).toEqual({ code: 1, signal: null });
    expect(process.messages()).toMatch(says);
    expect(process.messages()).toMatch(/^tauline: /);
    expect(process.messages()).not.toMatch(/\n\s+at |node:internal|ZodError/);
    expect(process.out()).toBe("");
  });

  it("a port that is taken", async () => {
    const other = createServer();
    await new Promise<void>((resolve) => other.listen(0, "127.0.0.1", resolve));
    const { port } = other.address() as { port: number };
    const process = serve({ PORT: String(port) });
    expect((await process.ended).code).toBe(1);
    expect(process.messages()).toContain(String(port));
    expect(process.messages()).toMatch(/in use/);
    expect(process.messages()).not.toMatch(/\n\s+at /);
    other.close();
  });
});
