import { Ajv2020, type ValidateFunction } from "ajv/dist/2020.js";
import addFormats from "ajv-formats";
import type { Response } from "supertest";
import { expect } from "vitest";
import { version } from "../../src/config.ts";
import { interfaceDocument } from "../../src/http/index.ts";
import { type ProblemCode, problemCatalogue } from "../../src/problem/index.ts";

/**
 * Holds answers against the interface document, read as what it is: JSON Schema 2020-12 inside OpenAPI 3.1.
 * Source: OpenAPI Specification 3.1.0; JSON Schema draft 2020-12; RFC 9457 (problem details).
 */

type Content = Readonly<Record<string, { readonly schema: object }>>;

export interface Operation {
  readonly operationId: string;
  readonly requestBody?: { readonly content: Content };
  readonly responses: Readonly<Record<string, { readonly content?: Content }>>;
}

export interface InterfaceDocument {
  readonly openapi: string;
  readonly paths: Readonly<Record<string, Readonly<Record<string, Operation>>>>;
  readonly components: { readonly schemas: Readonly<Record<string, object>> };
}

export const document = interfaceDocument(version) as InterfaceDocument;

const ajv = new Ajv2020({ strict: true, strictTuples: false, allowUnionTypes: true, allErrors: true });
// The package is CommonJS; its plugin is the module itself and its "default".
(addFormats as unknown as { default: (on: Ajv2020) => void }).default(ajv);
for (const keyword of ["discriminator", "components", "example"]) ajv.addKeyword(keyword);

const compiled = new Map<object, ValidateFunction>();

/** References in the document point into its components, so each schema is compiled with them beside it. */
function checkerOf(schema: object): ValidateFunction {
  const known = compiled.get(schema);
  const checker = known ?? ajv.compile({ ...schema, components: document.components });
  compiled.set(schema, checker);
  return checker;
}

function requireFit(schema: object, value: unknown, what: string): void {
  const checker = checkerOf(schema);
  checker(value);
  expect(checker.errors ?? [], `${what} against the interface document`).toEqual([]);
}

export function operation(method: string, path: string): Operation | undefined {
  // HEAD answers what GET would answer, without the body (RFC 9110, 9.3.2).
  const name = method === "HEAD" ? "get" : method.toLowerCase();
  return document.paths[path]?.[name];
}

const mediaType = (response: Response): string =>
  String(response.headers["content-type"] ?? "")
    .split(";")[0]!
    .trim();

/** A response must have a documented status and content type and exactly the documented fields. */
export function holdAgainstDocument(method: string, path: string, response: Response): void {
  const here = `${method} ${path}, ${response.status}`;
  const documented = operation(method, path)?.responses[String(response.status)];
  expect(documented, `${here}: documented statuses`).toBeDefined();
  const content = documented!.content ?? {};
  const type = mediaType(response);
  expect(Object.keys(content), `${here}: documented content types`).toContain(type);
  if (method === "HEAD") {
    expect(response.text ?? "", `${here}: body`).toBe("");
    return;
  }
  requireFit(content[type]!.schema, JSON.parse(response.text), here);
}

/** Whether the document allows a request body; every request that is answered with 200 must be allowed. */
export function documentAllows(path: string, body: unknown): boolean {
  const schema = operation("POST", path)!.requestBody!.content["application/json"]!.schema;
  return checkerOf(schema)(body) as boolean;
}

/** A good answer: 200, documented to the letter, and to a request that the document allows. Gives the parsed body. */
export function holdGoodAnswer(path: string, body: unknown, response: Response): unknown {
  expect(response.status, response.text.slice(0, 500)).toBe(200);
  holdAgainstDocument("POST", path, response);
  expect(documentAllows(path, body), `the document allows this request: ${JSON.stringify(body).slice(0, 300)}`).toBe(
    true,
  );
  return JSON.parse(response.text);
}

export interface ProblemBody {
  readonly type: string;
  readonly title: string;
  readonly status: number;
  readonly detail: string;
  readonly instance?: string;
  readonly faults?: readonly { readonly pointer: string; readonly received?: unknown; readonly expected: string }[];
}

/** Lines of a stack trace, files of a library or of the service. */
const innards = /\\n\s+at |node_modules|node:internal|\.(?:ts|js|mjs|cjs):\d+/;

/**
 * A problem: problem details of a code of the catalogue, documented where its address is, with the request's id and
 * nothing of the service's insides. Gives the parsed body.
 */
export function holdProblem(method: string, path: string, response: Response, code: ProblemCode): ProblemBody {
  const known = problemCatalogue[code];
  const here = `${method} ${path}`;
  expect(mediaType(response), `${here}: ${response.text.slice(0, 300)}`).toBe("application/problem+json");
  const body = JSON.parse(response.text) as ProblemBody;
  expect(body.type, body.detail).toBe(`/problems/${code}`);
  expect(response.status).toBe(known.status);
  expect(body.status).toBe(known.status);
  expect(body.title).toBe(known.title);
  expect(body.detail.length).toBeGreaterThan(10);
  expect(body.instance).toBe(response.headers["x-request-id"]);
  expect(response.text).not.toMatch(innards);
  if (operation(method, path) === undefined) {
    // Nothing is documented at an address or for a method that does not exist: only the shape can be held.
    requireFit(document.components.schemas.Problem!, body, here);
  } else {
    holdAgainstDocument(method, path, response);
  }
  return body;
}
