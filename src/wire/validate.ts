import { type Fault, mostFaults, Problem } from "../problem/index.ts";
import type { z } from "./zod.ts";

/** Deepest nesting that is read. */
const deepest = 32;

type Issue = z.core.$ZodIssue;

/**
 * Holds a parsed JSON value against a schema.
 * Errors: invalid-request with a pointer and an expectation per fault (the first 100).
 */
export function validate<T extends z.ZodType>(schema: T, value: unknown): z.infer<T> {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const faults = result.error.issues.flatMap((issue) => faultsOf(issue, value)).slice(0, mostFaults);
  const first = faults[0]!;
  const where = first.place.length === 0 ? "The request" : `"${first.place.join(".")}"`;
  const others = faults.length > 1 ? ` (${faults.length} faults in all; this is the first)` : "";
  throw new Problem("invalid-request", `${where} is not as documented: expected ${first.expected}${others}.`, faults);
}

function faultsOf(issue: Issue, root: unknown): Fault[] {
  const place = issue.path as (string | number)[];
  const found = valueAt(root, place);
  const received = typeof found === "object" && found !== null ? undefined : found;
  if (issue.code === "unrecognized_keys") {
    return issue.keys.map((key) => ({ place: [...place, key], expected: "no such field; see the documented shape" }));
  }
  const fault = { place, expected: expectation(issue, found) };
  return [received === undefined ? fault : { ...fault, received }];
}

function expectation(issue: Issue, found: unknown): string {
  const missing = found === undefined ? " (it is missing)" : "";
  switch (issue.code) {
    case "invalid_type":
      if (issue.expected === "int") return "a whole number from -(2^53 - 1) to 2^53 - 1";
      return `${article(issue.expected)}${missing}`;
    case "too_small":
      return bound(issue.origin, issue.inclusive === false ? "more than" : "at least", issue.minimum);
    case "too_big":
      if (issue.origin === "int") return "a whole number up to 2^53 - 1; larger ones as a decimal string";
      return bound(issue.origin, issue.inclusive === false ? "less than" : "at most", issue.maximum);
    case "invalid_value":
      return `${issue.values.length === 1 ? "" : "one of "}${issue.values.map((v) => JSON.stringify(v)).join(", ")}${missing}`;
    case "invalid_format":
      return issue.message; // every pattern of the schemas brings its own words
    case "invalid_union":
      return unionExpectation(issue, found, missing);
    default:
      return issue.message;
  }
}

/** A union tells what the branch that came nearest would have wanted. */
function unionExpectation(issue: Extract<Issue, { code: "invalid_union" }>, found: unknown, missing: string): string {
  if (issue.discriminator !== undefined) {
    const options = (issue as unknown as { options?: unknown[] }).options;
    return options ? `one of ${options.map((o) => JSON.stringify(o)).join(", ")}` : "one of the documented kinds";
  }
  if (typeof found === "number" && !Number.isSafeInteger(found) && Number.isInteger(found)) {
    return "a whole number up to 2^53 - 1; larger ones as a decimal string, or digits are lost";
  }
  const branches = issue.errors.map((branch) =>
    branch
      .map(
        (inner) =>
          `${inner.path.length > 0 ? `${inner.path.join(".")}: ` : ""}${expectation(inner, valueAt(found, inner.path as (string | number)[]))}`,
      )
      .join(" and "),
  );
  return `${[...new Set(branches)].join(", or ")}${missing}`;
}

const article = (type: string): string =>
  type === "array" || type === "object" ? `an ${type}` : type === "string" ? "text" : `a ${type}`;

function bound(origin: string, relation: string, limit: number | bigint): string {
  if (origin === "array") return `${relation} ${limit} entries`;
  if (origin === "string") return `${relation} ${limit} characters`;
  return `a number of ${relation} ${limit}`;
}

function valueAt(root: unknown, place: readonly (string | number)[]): unknown {
  let value = root;
  for (const key of place) {
    if (typeof value !== "object" || value === null) return undefined;
    value = (value as Record<string | number, unknown>)[key];
  }
  return value;
}

/**
 * Reads a JSON text. Errors: invalid-json, saying where it breaks off or that it is nested too deep.
 */
export function parseJson(text: string): unknown {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    const reason = (error as Error).message.replace(/^.*?JSON/, "the JSON").slice(0, 200);
    throw new Problem(
      "invalid-json",
      `The body cannot be read as JSON: ${(error as Error).message.slice(0, 200) || reason}.`,
      [{ place: [], expected: "one JSON object" }],
    );
  }
  requireShallow(value, 0, []);
  return value;
}

function requireShallow(value: unknown, depth: number, place: readonly (string | number)[]): void {
  if (typeof value !== "object" || value === null) return;
  if (depth >= deepest) {
    throw new Problem("invalid-json", `The body is nested more than ${deepest} deep.`, [
      { place, expected: `nesting of at most ${deepest}` },
    ]);
  }
  for (const [key, inner] of Object.entries(value)) {
    if (typeof inner === "object")
      requireShallow(inner, depth + 1, [...place, Array.isArray(value) ? Number(key) : key]);
  }
}
