import { type ChildProcess, spawn } from "node:child_process";
import { fileURLToPath } from "node:url";

/** The top folder of the checkout. */
const root = fileURLToPath(new URL("../..", import.meta.url));

/** A real process with what it has said so far. */
export interface Running {
  readonly child: ChildProcess;
  out(): string;
  messages(): string;
  /** Resolves as soon as the text so far matches; rejects when the process ends first. */
  said(where: "out" | "messages", pattern: RegExp): Promise<RegExpMatchArray>;
  /** Exit code and signal once the process is gone and its output is complete. */
  readonly ended: Promise<{ code: number | null; signal: NodeJS.Signals | null }>;
}

/** The variables that the service reads are taken from `environment` alone. */
function cleanEnvironment(environment: Readonly<Record<string, string>>): NodeJS.ProcessEnv {
  const names = ["PORT", "HOST", "LOG_LEVEL", "LEAP_SECONDS_FILE", "DATA_DIR", "DATABASE_URL", "NODE_OPTIONS"];
  const own = Object.fromEntries(Object.entries(process.env).filter(([name]) => !names.includes(name)));
  return { ...own, ...environment };
}

/** Starts a program in the checkout. */
export function start(
  program: string,
  args: readonly string[],
  environment: Readonly<Record<string, string>> = {},
): Running {
  const child = spawn(program, args, { cwd: root, env: cleanEnvironment(environment), stdio: "pipe" });
  const text = { out: "", messages: "" };
  const watchers = new Set<() => void>();
  const collect = (where: "out" | "messages") => (chunk: string) => {
    text[where] += chunk;
    for (const look of watchers) look();
  };
  child.stdout.setEncoding("utf8").on("data", collect("out"));
  child.stderr.setEncoding("utf8").on("data", collect("messages"));
  const ended = new Promise<{ code: number | null; signal: NodeJS.Signals | null }>((resolve, reject) => {
    child.once("error", reject);
    child.once("close", (code, signal) => resolve({ code, signal }));
  });
  return {
    child,
    out: () => text.out,
    messages: () => text.messages,
    said: (where, pattern) =>
      new Promise((resolve, reject) => {
        const look = () => {
          const found = text[where].match(pattern);
          if (found === null) return;
          watchers.delete(look);
          resolve(found);
        };
        watchers.add(look);
        look();
        ended.then(
          ({ code }) => reject(new Error(`ended with ${code} before saying ${pattern}: ${text.out}${text.messages}`)),
          reject,
        );
      }),
    ended,
  };
}

/** The service as `npm start` starts it; it is built first when it must be. */
export const startServe = (environment: Readonly<Record<string, string>>): Running =>
  start(process.execPath, [".config/run.mjs", "main", "serve"], environment);
