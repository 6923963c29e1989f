import { readFileSync } from "node:fs";
import { defaultLeapSeconds, LeapSecondTable } from "./time/index.ts";
import { z } from "./wire/index.ts";

const levels = ["fatal", "error", "warn", "info", "debug", "trace", "silent"] as const;

const schema = z.object({
  PORT: z
    .string()
    .regex(/^\d{1,5}$/, "a port number from 0 (any free one) to 65535")
    .optional(),
  HOST: z.string().min(1, "a host name or address").optional(),
  LOG_LEVEL: z.enum(levels, `one of ${levels.join(", ")}`).optional(),
  LEAP_SECONDS_FILE: z.string().min(1, "the path of a leap-second list").optional(),
});

type Environment = Readonly<Record<string, string | undefined>>;

export interface Config {
  readonly port: number;
  readonly host: string;
  readonly logLevel: (typeof levels)[number];
  readonly leapSeconds: LeapSecondTable;
  readonly version: string;
}

/** What is wrong with the environment, one line a variable. */
export class BadEnvironment extends Error {}

/** Version of the package, from its manifest. */
export const version: string = (
  JSON.parse(readFileSync(new URL("../package.json", import.meta.url), "utf8")) as { version: string }
).version;

/** Reads the environment. Errors: BadEnvironment, naming each variable, what was found and what would be right. */
export function readConfig(environment: Environment): Config {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ""));
  const result = schema.safeParse(given);
  if (!result.success) {
    const lines = result.error.issues.map(
      ({ path, message }) => `${path.join(".")}: found "${given[String(path[0])]}", expected ${message}`,
    );
    throw new BadEnvironment(lines.join("\n"));
  }
  const { PORT = "8080", HOST = "127.0.0.1", LOG_LEVEL = "info" } = result.data;
  if (Number(PORT) > 65_535) throw new BadEnvironment(`PORT: found "${PORT}", expected a port number from 0 to 65535`);
  return {
    port: Number(PORT),
    host: HOST,
    logLevel: LOG_LEVEL,
    leapSeconds: readLeapSeconds(environment),
    version,
  };
}

/** The leap-second table that the environment asks for, or the shipped one. Errors: BadEnvironment. */
export function readLeapSeconds({ LEAP_SECONDS_FILE: file }: Environment): LeapSecondTable {
  if (file === undefined || file === "") return defaultLeapSeconds;
  try {
    return LeapSecondTable.parse(readFileSync(file, "utf8"), file);
  } catch (error) {
    throw new BadEnvironment(`LEAP_SECONDS_FILE: ${(error as Error).message}`);
  }
}
