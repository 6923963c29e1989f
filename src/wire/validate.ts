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
  // Of a union only one branch may be of the right kind: then what is wrong inside it is what helps.
  if (issue.code === "invalid_union" && issue.discriminator === undefined) {
    const inside = issue.errors.filter((branch) =>
      branch.every((inner) => inner.path.length > 0 || inner.code === "unrecognized_keys"),
    );
    if (inside.length === 1 && typeof found === "object" && found !== null) {
      return inside[0]!.flatMap((inner) => faultsOf({ ...inner, path: [...place, ...inner.path] } as Issue, root));
    }
  }
  if (issue.code === "unrecognized_keys") {
    return issue.keys.map((key) => ({ place: [...place, key], expected: "no such field; see the documented shape" }));
  }
  const fault = { place, expected: expectation(issue, found) };
  if (received === undefined) return [fault];
  return [
    {
      ...fault,
      received: typeof received === "number" && !Number.isFinite(received) ? "beyond the range of a double" : received,
    },
  ];
}

function expectation(issue: Issue, found: unknown): string {
  const missing = found === undefined ? " (it is missing)" : "";
  switch (issue.code) {
    case "invalid_type":
      if (typeof found === "number" && !Number.isFinite(found)) return "a finite number, at most about 1.8e308 in size";
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
  if (Number.isInteger(found) && !Number.isSafeInteger(found)) {
    return "a whole number up to 2^53 - 1; larger ones as a decimal string, or digits are lost";
  }
  // Unions of the schemas bring their own words.
  if (issue.message !== "Invalid input") return `${issue.message}${missing}`;
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
  type === "record"
    ? "a JSON object"
    : type === "array" || type === "object"
      ? `an ${type}`
      : type === "string"
        ? "text"
        : `a ${type}`;

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
 * Reads a JSON text. Errors: invalid-json, saying where it breaks off or that it is nested too deep; invalid-request for
 * text that is no Unicode.
 */
export function parseJson(text: string): unknown {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    throw new Problem("invalid-json", `The body cannot be read as JSON: ${(error as Error).message.slice(0, 200)}.`, [
      { place: [], expected: "one JSON object" },
    ]);
  }
  requireReadable(value, 0, []);
  return value;
}

function requireReadable(value: unknown, depth: number, place: readonly (string | number)[]): void {
  if (typeof value === "string") requireWellFormed(value, place);
  if (typeof value !== "object" || value === null) return;
  if (depth >= deepest) {
    throw new Problem("invalid-json", `The body is nested more than ${deepest} deep.`, [
      { place, expected: `nesting of at most ${deepest}` },
    ]);
  }
  const isArray = Array.isArray(value);
  for (const [key, inner] of Object.entries(value)) {
    if (!isArray) requireWellFormed(key, place);
    if (typeof inner === "object" || typeof inner === "string") {
      requireReadable(inner, depth + 1, [...place, isArray ? Number(key) : key]);
    }
  }
}

function requireWellFormed(text: string, place: readonly (string | number)[]): void {
  if (!/\p{Surrogate}/u.test(text)) return;
  throw new Problem("invalid-request", "A text holds half of a surrogate pair, which is no Unicode character.", [
    { place, expected: "well-formed Unicode" },
  ]);
}
