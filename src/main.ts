#!/usr/bin/env node
import closeWithGrace from "close-with-grace";
import { createApp, listen } from "./app.ts";
import { runCommandLine } from "./cli/index.ts";
import { BadEnvironment, type Config, readConfig, readLeapSeconds, version } from "./config.ts";
import { displayDate } from "./time/index.ts";

/** Longest time that work in hand may take after a signal, ms; who is still sending then is cut off. */
const patienceMs = 5_000;
/** Longest time that stopping may take altogether, ms. */
const graceMs = 10_000;

async function serve(config: Config): Promise<void> {
  const app = createApp(config);
  const { server, address } = await listen(app, config.host, config.port);
  closeWithGrace({ delay: graceMs, logger: app.logger }, async ({ err, signal }) => {
    app.stop();
    const closed = new Promise<void>((resolve) => server.close(() => resolve()));
    server.closeIdleConnections();
    setTimeout(() => server.closeAllConnections(), patienceMs).unref();
    app.logger.info({ signal, err }, "stopping: no new connections; work in hand is finished");
    await closed;
  });
  const { leapSeconds } = config;
  const expiry = displayDate(leapSeconds.expires, leapSeconds.steps.at(-1)!.offset);
  process.stdout.write(`Tauline ${config.version} is ready at ${address} (leap-second table to ${expiry}).\n`);
}

try {
  process.exitCode = await runCommandLine(process.argv.slice(2), {
    version,
    leapSeconds: () => readLeapSeconds(process.env),
    serve: () => serve(readConfig(process.env)),
    input: process.stdin,
    output: process.stdout,
    messages: process.stderr,
  });
} catch (error) {
  const known = error instanceof BadEnvironment || (error as NodeJS.ErrnoException).code !== undefined;
  process.stderr.write(`tauline: ${known ? (error as Error).message : ((error as Error).stack ?? String(error))}\n`);
  process.exitCode = 1;
}
