import { OpenAPIRegistry, OpenApiGeneratorV31 } from "@asteasolutions/zod-to-openapi";
import { noticeCatalogue, type ProblemCode, problemCatalogue } from "../problem/index.ts";
import { caution, problemSchema, sharedShapes, z } from "../wire/index.ts";
import { calls } from "./calls.ts";
import { requestExamples } from "./examples.ts";

const json = (schema: z.ZodType, example?: object) => ({
  "application/json": { schema, ...(example === undefined ? {} : { example }) },
});
const page = { "text/html": { schema: z.string() } };

/** The catalogue as text: one line a code. */
function catalogueText(): string {
  const rows = Object.entries(problemCatalogue).map(
    ([code, { status, title, remedy }]) => `| \`${code}\` | ${status} | ${title}. | ${remedy} |`,
  );
  return ["| type /problems/... | status | meaning | what to do |", "|---|---|---|---|", ...rows].join("\n");
}

function noticeText(): string {
  const rows = Object.entries(noticeCatalogue).map(([code, meaning]) => `| \`${code}\` | ${meaning} |`);
  return ["| code | meaning |", "|---|---|", ...rows].join("\n");
}

function problemResponses(codes: readonly ProblemCode[]) {
  const byStatus = new Map<number, string[]>();
  for (const code of codes) {
    const { status } = problemCatalogue[code];
    byStatus.set(status, [...(byStatus.get(status) ?? []), code]);
  }
  return Object.fromEntries(
    [...byStatus.entries()].map(([status, names]) => [
      String(status),
      { description: names.join(", "), content: { "application/problem+json": { schema: problemSchema } } },
    ]),
  );
}

/** The OpenAPI 3.1 document of the service, made from the schemas that validate the requests. */
export function interfaceDocument(version: string): object {
  const registry = new OpenAPIRegistry();
  // First, so that each shared shape carries its own words and not those of the place where it is met first.
  for (const [name, shape] of Object.entries(sharedShapes)) registry.register(name, shape);
  const everyCall = (Object.keys(problemCatalogue) as ProblemCode[]).filter(
    (code) => code !== "unknown-path" && code !== "method-not-allowed",
  );
  for (const call of calls) {
    registry.registerPath({
      method: "post",
      path: call.path,
      operationId: call.operation,
      summary: call.summary,
      description: call.description,
      tags: ["corrections"],
      request: { body: { required: true, content: json(call.request, requestExamples[call.path]) } },
      responses: { 200: { description: "The answer.", content: json(call.response) }, ...problemResponses(everyCall) },
    });
  }
  const state = z.strictObject({ status: z.string() }).openapi("ServiceState");
  const plain = (path: string, operationId: string, summary: string, responses: object, request?: object) =>
    registry.registerPath({
      method: "get",
      path,
      operationId,
      summary,
      tags: ["service"],
      ...(request === undefined ? {} : { request }),
      responses: responses as never,
    });
  plain("/healthz", "getHealth", "Is the process alive", { 200: { description: "It is.", content: json(state) } });
  plain("/readyz", "getReadiness", "Is the service ready for work", {
    200: {
      description: "It is.",
      content: json(
        z
          .strictObject({
            status: z.string(),
            version: z.string(),
            leapSeconds: z.strictObject({ source: z.string(), expires: z.string(), daysLeft: z.int() }),
          })
          .openapi("Readiness"),
      ),
    },
    ...problemResponses(["unavailable"]),
  });
  plain("/openapi.json", "getInterfaceDocument", "This document", {
    200: { description: "OpenAPI 3.1.", content: json(z.looseObject({})) },
  });
  plain("/docs", "getDocumentPage", "This document as a page", {
    200: { description: "A page without script.", content: page },
  });
  const kind = z
    .strictObject({
      type: z.string().openapi({ description: "What problem details carry as `type`; the address of its page." }),
      status: z.int(),
      title: z.string(),
      remedy: z.string().openapi({ description: "What to do about it." }),
    })
    .openapi("ProblemKind");
  const noticeKind = z.strictObject({ code: z.string(), meaning: z.string() }).openapi("NoticeKind");
  const catalogue = z.strictObject({ problems: z.array(kind), notices: z.array(noticeKind) }).openapi("Catalogue");
  const either = "A page, or JSON where `Accept` asks for application/json.";
  plain("/problems", "getProblems", "The catalogue of problems and notices", {
    200: { description: either, content: { ...json(catalogue), ...page } },
  });
  plain(
    "/problems/{code}",
    "getProblem",
    "One kind of problem",
    { 200: { description: either, content: { ...json(kind), ...page } }, ...problemResponses(["unknown-path"]) },
    { params: z.strictObject({ code: z.enum(Object.keys(problemCatalogue)) }) },
  );
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: "3.1.0",
    info: {
      title: "Tauline",
      version,
      description: [
        "From the orbit and the readings of a spacecraft's clock to corrected, traceable time, term by term.",
        `**Caution.** ${caution}`,
        "**Signs.** A term is positive when it makes the clock run ahead of TT. Clock minus TT is the sum of all terms; the correction added to a reading is its negative.",
        "**Problems.** Every failure is RFC 9457 problem details with pointers to the faults:",
        catalogueText(),
        "**Notices.** Remarks that travel with a good answer:",
        noticeText(),
      ].join("\n\n"),
    },
    servers: [{ url: "/" }],
    tags: [
      { name: "corrections", description: "Stateless work" },
      { name: "service", description: "State of the service" },
    ],
  });
}
