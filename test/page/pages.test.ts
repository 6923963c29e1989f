import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { version } from "../../src/config.ts";
import { interfaceDocument } from "../../src/http/index.ts";
import { noticeCatalogue, problemCatalogue } from "../../src/problem/index.ts";
import { documentPage, problemPage, problemsPage } from "../../src/web/index.ts";
import { caution } from "../../src/wire/index.ts";
import { type Service, send, startService } from "../support/service.ts";

/** The pages as text: everything of the document is on them, and nothing of it becomes HTML by itself. */

const codes = Object.keys(problemCatalogue);
const document = interfaceDocument(version) as {
  readonly paths: Readonly<Record<string, Readonly<Record<string, { operationId: string; summary: string }>>>>;
  readonly components: { readonly schemas: Readonly<Record<string, object>> };
};
const page = documentPage(document, codes).html;

/** What a reader sees: without tags, entities read. */
const readable = (html: string): string =>
  html
    .replace(/<style>.*<\/style>/s, "")
    .replace(/<[^>]*>/g, "")
    .replaceAll("&lt;", "<")
    .replaceAll("&gt;", ">")
    .replaceAll("&quot;", '"')
    .replaceAll("&#39;", "'")
    .replaceAll("&amp;", "&");

const text = readable(page);

/** The section of a shared shape, to the next heading of its rank. */
function sectionOf(shape: string): string {
  const start = page.indexOf(`id="shape-${shape}"`);
  expect(start, shape).toBeGreaterThan(0);
  const next = page.slice(start).search(/<h3|<h2|<div id="shape-|<\/section>/);
  return page.slice(start, next < 0 ? undefined : start + next);
}

/** Names of all fields anywhere inside a schema, without those behind references. */
function fieldsIn(schema: unknown): string[] {
  if (typeof schema !== "object" || schema === null) return [];
  if (Array.isArray(schema)) return schema.flatMap(fieldsIn);
  const { properties = {}, ...others } = schema as { properties?: Record<string, unknown> };
  return [
    ...Object.entries(properties).flatMap(([name, inner]) => [name, ...fieldsIn(inner)]),
    ...Object.entries(others).flatMap(([key, inner]) => (key === "example" || key === "enum" ? [] : fieldsIn(inner))),
  ];
}

describe("the page of the document", () => {
  it("shows the caution before everything else", () => {
    expect(text).toContain(caution);
    expect(text.indexOf(caution)).toBeLessThan(text.indexOf("Contents"));
  });

  it("shows every call with its summary", () => {
    for (const [path, operations] of Object.entries(document.paths)) {
      for (const [method, { operationId, summary }] of Object.entries(operations)) {
        expect(page).toContain(`id="call-${operationId}"`);
        expect(text).toContain(`${method.toUpperCase()} ${path}`);
        expect(text).toContain(summary);
      }
    }
  });

  it("shows every field of every shape in the table of that shape", () => {
    const shapes = Object.entries(document.components.schemas);
    expect(shapes.length).toBeGreaterThan(30);
    let shown = 0;
    for (const [name, schema] of shapes) {
      const section = sectionOf(name);
      for (const field of fieldsIn(schema)) {
        expect(section, `${name}: ${field}`).toContain(`<code>${field}</code></th>`);
        shown++;
      }
    }
    expect(shown).toBeGreaterThan(150);
  });

  it("says unit, limits, values and example of a field", () => {
    const row = (shape: string, field: string): string =>
      readable(
        sectionOf(shape)
          .split("<tr")
          .find((line) => line.includes(`<code>${field}</code></th>`))!
          .replaceAll("</td>", "|"),
      );
    expect(row("Surface", "latitudeDeg")).toContain("number|deg|yes|-90 to 90|");
    expect(row("StateVector", "velocityKmPerS")).toContain("list of 3: number|km/s|yes|");
    expect(row("Anchor", "sigmaNs")).toContain("number|ns|no|0 to 1e12|");
    expect(row("Surface", "heightOf")).toContain('"ellipsoid" or "geoid"|');
    expect(row("TermValue", "accumulated")).toContain('Example: "-0.000038123456789"');
    expect(row("BudgetRequest", "horizonS")).toContain("number|s|yes|at most 1e12; above 0|");
  });

  it("shows every problem and notice, and links each problem to its page", () => {
    for (const [code, { title, remedy }] of Object.entries(problemCatalogue)) {
      expect(page).toContain(`<a href="/problems/${code}">`);
      expect(text).toContain(title);
      expect(text).toContain(remedy);
    }
    for (const [code, meaning] of Object.entries(noticeCatalogue)) {
      expect(text).toContain(code);
      expect(text).toContain(meaning);
    }
  });

  it("has a line for the terminal with each call, and no script", () => {
    for (const [path, { post }] of Object.entries(document.paths)) {
      expect(text).toContain(post === undefined ? `curl -sS "$TAULINE/` : `curl -sS -X POST "$TAULINE${path}"`);
    }
    expect(page).not.toMatch(/<script|<link|<img|<iframe|@import|url\(|\son\w+=|javascript:/i);
  });

  it("has no id twice", () => {
    const ids = [...page.matchAll(/ id="([^"]*)"/g)].map(([, id]) => id!);
    expect(ids.filter((id, i) => ids.indexOf(id) !== i)).toEqual([]);
  });
});

describe("hostile text", () => {
  const hostile = `<script>alert(1)</script>"'&lt;<img src=x onerror=alert(2)>`;
  const everywhere = {
    openapi: hostile,
    info: {
      title: hostile,
      version: hostile,
      description: `${hostile}\n\n**Caution.** ${hostile}\n\n**${hostile}.** \`${hostile}\` **${hostile}**\n\n**List.** It:\n\n| ${hostile} | b |\n|---|---|\n| \`${hostile}\` | **${hostile}** |`,
    },
    tags: [{ name: hostile, description: hostile }],
    paths: {
      [`/${hostile}`]: {
        get: {
          operationId: hostile,
          summary: hostile,
          description: hostile,
          tags: [hostile],
          parameters: [{ name: hostile, in: hostile, description: hostile, schema: { enum: [hostile] } }],
          requestBody: {
            content: { "application/json": { schema: { type: hostile }, example: { [hostile]: hostile } } },
          },
          responses: { [hostile]: { description: hostile }, 200: { description: hostile, content: { [hostile]: {} } } },
        },
      },
    },
    components: {
      schemas: {
        [hostile]: {
          type: "object",
          description: hostile,
          properties: { [hostile]: { type: hostile, pattern: hostile, description: hostile, example: hostile } },
        },
      },
    },
  };

  /** Tags that the pages are made of; anything else came in from outside. */
  const own =
    /^<\/?(?:!doctype|html|head|meta|title|style|body|a|header|h[1-4]|p|strong|nav|ul|li|main|section|footer|code|pre|table|caption|thead|tbody|tr|th|td|div|dl|dt|dd|wbr)(?:\s[^<>]*)?>$/;

  it.each([
    ["the document", documentPage(everywhere, [hostile]).html],
    [
      "the catalogue",
      problemsPage(
        [{ code: hostile, status: 400, title: hostile, remedy: hostile }],
        [{ code: hostile, meaning: hostile }],
      ).html,
    ],
    ["a problem", problemPage({ code: hostile, status: 400, title: hostile, remedy: hostile }).html],
  ])("stays text on the page of %s", (_name, html) => {
    const tags = html.replace(/<style>.*<\/style>/s, "").match(/<[^>]*>/g) ?? [];
    expect(tags.length).toBeGreaterThan(20);
    expect(tags.filter((tag) => !own.test(tag))).toEqual([]);
    expect(html).not.toMatch(/<script|<img/);
    expect(readable(html)).toContain(hostile);
  });

  it("in a request of an example cannot leave the quotes of the shell", () => {
    const example = { name: "'; touch stolen; '" };
    const operation = {
      operationId: "call",
      requestBody: { content: { "application/json": { example } } },
      responses: {},
    };
    const { html } = documentPage(
      { openapi: "3.1.0", info: { title: "T", version: "1" }, paths: { "/call": { post: operation } } },
      [],
    );
    expect(readable(html)).toContain(`-d '{ "name": "'\\''; touch stolen; '\\''" }'`);
  });
});

describe("how the pages are sent", () => {
  let service: Service;
  beforeAll(async () => {
    service = await startService();
  });
  afterAll(() => service.close());

  it("with a policy that lets nothing be loaded or run, and only the page's own sheet in", async () => {
    for (const path of ["/docs", "/problems", "/problems/outside-span"]) {
      const { headers } = await send(service.address, path, undefined, { method: "GET" });
      expect(headers["content-type"]).toBe("text/html; charset=utf-8");
      expect(headers["content-security-policy"]).toMatch(
        /^default-src 'none'; style-src 'sha256-[\w+/]{43}='; base-uri 'none'; form-action 'none'; frame-ancestors 'none'$/,
      );
    }
  });

  it.each([
    { accept: "text/html,application/xhtml+xml;q=0.9,*/*;q=0.8", type: "text/html" },
    { accept: "*/*", type: "text/html" },
    { accept: "application/json", type: "application/json" },
    { accept: "text/html;q=0.5, application/json", type: "application/json" },
    { accept: "image/png", type: "text/html" },
  ])("/problems for Accept: $accept is $type", async ({ accept, type }) => {
    for (const path of ["/problems", "/problems/invalid-json"]) {
      const { headers } = await send(service.address, path, undefined, { method: "GET", headers: { Accept: accept } });
      expect(headers["content-type"]).toContain(type);
      expect(headers.vary).toContain("Accept");
    }
  });
});
