import { type ChildProcess, spawn } from "node:child_process";
import { fileURLToPath } from "node:url";
import express from "express";
import { createApp, listen } from "../../src/app.ts";
import { readConfig } from "../../src/config.ts";

/** The most that a body of the benches takes. */
const bodyLimit = "8mb";

/** What a process of its own serves: the real service, silent, or an echo of parsed JSON with the framework's defaults. */
export async function serve(what: "service" | "echo"): Promise<void> {
  const config = { ...readConfig({ LOG_LEVEL: "silent" }), port: 0 };
  const app = createApp(config);
  if (what === "echo") {
    const echo = express();
    echo.post("/echo", express.json({ limit: bodyLimit }), (request, response) => {
      response.json(request.body);
    });
    app.stop();
    const { address } = await listen({ ...app, express: echo }, "127.0.0.1", 0);
    console.log(address);
  } else {
    const { address } = await listen(app, "127.0.0.1", 0);
    console.log(address);
  }
  // It ends with whoever started it, at the latest after ten minutes.
  process.stdin.resume().on("end", () => process.exit(0));
  setTimeout(() => process.exit(1), 600_000).unref();
}

export interface Served {
  readonly port: number;
  readonly child: ChildProcess;
}

/** Starts this program again as a server on the loopback address and any free port. */
export async function startServer(what: "service" | "echo"): Promise<Served> {
  const run = fileURLToPath(new URL("run.ts", import.meta.url));
  const child = spawn(process.execPath, ["--import", "tsx", run, what], { stdio: ["pipe", "pipe", "inherit"] });
  const address = await new Promise<string>((resolve, reject) => {
    child.stdout.once("data", (chunk: Buffer) => resolve(chunk.toString().trim()));
    child.once("exit", (code) => reject(new Error(`the ${what} ended with ${code}`)));
  });
  return { port: Number(new URL(address).port), child };
}
