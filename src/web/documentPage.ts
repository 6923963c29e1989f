import {
  type Content,
  callsOf,
  type DocumentedCall,
  type InterfaceDocument,
  type Parameter,
  type Schema,
  shapeName,
} from "./document.ts";
import { type Html, html, joined } from "./html.ts";
import { readableJson } from "./json.ts";
import { inlineText, type MarkdownTable, type Part, partsOf, plainCode } from "./markdown.ts";
import { heading, type Page, page, table } from "./page.ts";
import { kindOf, limitsOf, shape, shapeBody, shapeLink } from "./shape.ts";

const idOf = (title: string): string =>
  title
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "-")
    .replace(/^-|-$/g, "");

/** Words on how the tables below are meant. */
const howToRead = html`<p>Field names carry their unit at the end. A field of a field stands below it with its whole path;
<code>[]</code> marks what is in a list. An object takes the fields that are listed and no others, unless its limits say
so. Instants, clocks, trajectories and other parts that several calls share stand once, under Shared shapes.</p>`;

/** The page of the whole interface, made from its document. `problems`: the codes that have a page of their own. */
export function documentPage(given: object, problems: readonly string[]): Page {
  const document = given as InterfaceDocument;
  const known = new Set(problems);
  const code = (span: string): Html => (known.has(span) ? problemLink(span) : plainCode(span));
  const parts = partsOf(document.info.description ?? "");
  const caution = parts.find(({ title }) => title === "Caution");
  const before = parts.filter((part) => part.title !== "" && part !== caution && part.tables.length === 0);
  const after = parts.filter((part) => part.title !== "" && part.tables.length > 0);
  const calls = callsOf(document);
  const shapes = Object.entries(document.components?.schemas ?? {});
  const ofOneCall = new Set(calls.flatMap((call) => ownShapes(call, calls)));
  const shared = shapes.filter(([name]) => !ofOneCall.has(name)).sort(([a], [b]) => (a < b ? -1 : 1));

  const sections = [
    ...before.map((part) => partSection(part, code)),
    html`<section>${heading(2, "how-to-call", "How to call")}${howToCall(calls)}</section>`,
    html`<section>${heading(2, "how-to-read-the-tables", "How to read the tables")}${howToRead}</section>`,
    ...groupsOf(document, calls).map(
      ({ title, members }) =>
        html`<section>${heading(2, idOf(title), title)}${members.map((call) => callSection(call, document, known, ofOneCall))}</section>`,
    ),
    html`<section>${heading(2, "shared-shapes", "Shared shapes")}
${shared.map(([name, schema]) => shape(name, schema, 3))}</section>`,
    ...after.map((part) => partSection(part, code)),
  ];
  const opening = parts.find(({ title }) => title === "");
  const { title, version } = document.info;
  return page({
    title: `${title} ${version}: the interface`,
    heading: `${title} ${version}: the interface`,
    lead: html`${opening?.paragraphs.map((text) => html`<p class="lead">${inlineText(text, code)}</p>`)}
${caution === undefined ? "" : html`<p class="caution" role="note"><strong>Caution.</strong> ${joined(caution.paragraphs, " ")}</p>`}`,
    contents: html`<ul>
${before.map(({ title: name }) => contentsLine(name))}
${contentsLine("How to call")}${contentsLine("How to read the tables")}
${groupsOf(document, calls).map(
  ({ title: name, members }) =>
    html`<li><a href="#${idOf(name)}">${name}</a><ul>${members.map(({ method, path, operation }) => html`<li><a href="#call-${operation.operationId}"><code>${method} ${path}</code></a></li>\n`)}</ul></li>\n`,
)}
<li><a href="#shared-shapes">Shared shapes</a><ul class="names">${shared.map(([name]) => html`<li>${shapeLink(name)}</li>\n`)}</ul></li>
${after.map(({ title: name }) => contentsLine(name))}
</ul>`,
    body: joined(sections, "\n"),
    foot: html`<p>Made from <a href="/openapi.json">the interface document</a> (OpenAPI ${document.openapi}) of this very
service, version ${version}. The catalogue of problems has <a href="/problems">pages of its own</a>.</p>`,
  });
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

const contentsLine = (title: string): Html => html`<li><a href="#${idOf(title)}">${title}</a></li>\n`;

const problemLink = (code: string): Html => html`<a href="/problems/${code}"><code>${code}</code></a>`;

function partSection({ title, paragraphs, tables }: Part, code: (span: string) => Html): Html {
  const shown = ({ head, rows }: MarkdownTable): Html =>
    table({
      kind: "list",
      caption: title,
      head: head.map(capital),
      rows: rows.map((row) => row.map((cell) => inlineText(cell, code))),
    });
  return html`<section>${heading(2, idOf(title), title)}
${paragraphs.map((text) => html`<p>${inlineText(text, code)}</p>\n`)}${tables.map(shown)}</section>`;
}

interface Group {
  readonly title: string;
  readonly members: readonly DocumentedCall[];
}

/** Calls by their tag, in the order of the document's tags; those without one at the end. */
function groupsOf(document: InterfaceDocument, calls: readonly DocumentedCall[]): readonly Group[] {
  const tags = document.tags ?? [];
  const names = new Set(tags.map(({ name }) => name));
  const tagOf = ({ operation }: DocumentedCall) => operation.tags?.find((tag) => names.has(tag));
  const groups = tags.map(({ name, description }) => ({
    title: description ?? name,
    members: calls.filter((call) => tagOf(call) === name),
  }));
  const others = { title: "Other calls", members: calls.filter((call) => tagOf(call) === undefined) };
  return [...groups, others].filter(({ members }) => members.length > 0);
}

/** Shapes that a call takes or gives as a whole, and no other call does. */
function ownShapes(call: DocumentedCall, calls: readonly DocumentedCall[]): readonly string[] {
  return wholeShapes(call).filter(
    (name) => !calls.some((other) => other !== call && wholeShapes(other).includes(name)),
  );
}

function wholeShapes({ operation }: DocumentedCall): readonly string[] {
  const good = Object.entries(operation.responses).filter(([status]) => status.startsWith("2"));
  const contents = [operation.requestBody?.content ?? {}, ...good.map(([, { content }]) => content ?? {})];
  const references = contents.flatMap((content) => Object.values(content).map(({ schema }) => schema?.$ref));
  return references.flatMap((reference) => (reference === undefined ? [] : [shapeName(reference)]));
}

/** A line for a terminal, with the first example that the document has. */
function howToCall(calls: readonly DocumentedCall[]): Html {
  const first = calls.find(({ operation }) => exampleOf(operation.requestBody?.content) !== undefined);
  const line = first === undefined ? "" : html`<pre><code>${curl(first)}</code></pre>`;
  return html`
<p>Requests and answers are JSON in UTF-8. When it starts, the service prints the address at which it is ready; put it
into a variable of the shell, and the examples of this page run as they stand:</p>
<pre><code>TAULINE=http://127.0.0.1:8080</code></pre>
${line}
<p>An answer carries its request's id in the header <code>X-Request-Id</code>; send one of your own (letters, digits, dots,
hyphens and underscores, at most 64) and it is taken over.</p>
`;
}

const exampleOf = (content: Content | undefined): unknown => content?.["application/json"]?.example;

/** The text stands in single quotes for the shell; one inside is closed, escaped and opened again. */
function curl({ method, path, operation }: DocumentedCall): string {
  const body = exampleOf(operation.requestBody?.content);
  const filled = (operation.parameters ?? []).reduce((address, { name, schema }) => {
    const value = schema?.example ?? schema?.enum?.[0];
    return value === undefined ? address : address.replace(`{${name}}`, String(value));
  }, path);
  if (body === undefined) return `curl -sS "$TAULINE${filled}"`;
  const text = readableJson(body).replaceAll("'", "'\\''");
  return `curl -sS -X ${method} "$TAULINE${filled}" -H 'Content-Type: application/json' -d '${text}'`;
}

function callSection(
  call: DocumentedCall,
  document: InterfaceDocument,
  known: ReadonlySet<string>,
  own: ReadonlySet<string>,
): Html {
  const { method, path, operation } = call;
  const id = `call-${operation.operationId}`;
  const content = (of: Content | undefined): Html =>
    html`${Object.entries(of ?? {}).map(([type, { schema }]) => contentBody(type, schema ?? {}, document, own))}`;
  const answers = Object.entries(operation.responses);
  const good = answers.filter(([status]) => status.startsWith("2"));
  const bad = answers.filter(([status]) => !status.startsWith("2"));
  const request = operation.requestBody;
  return html`<section>
${heading(3, id, html`<code>${method} ${path}</code>`)}
<p><strong>${operation.summary ?? operation.operationId}.</strong> ${inlineText(operation.description ?? "")}</p>
${operation.parameters === undefined ? "" : html`${heading(4, `${id}-parameters`, "Parameters")}${parameterTable(call, operation.parameters)}`}
${request === undefined ? "" : html`${heading(4, `${id}-request`, "Request")}${content(request.content)}`}
${heading(4, `${id}-example`, "Example of a call")}<pre><code>${curl(call)}</code></pre>
${good.map(([status, answer]) => html`${heading(4, `${id}-${status}`, `Answer, ${status}`)}<p>${inlineText(answer.description)}</p>${content(answer.content)}`)}
${bad.length === 0 ? "" : html`${heading(4, `${id}-problems`, "Problems")}${problemTable(call, bad, known)}`}
</section>
`;
}

function parameterTable({ method, path }: DocumentedCall, parameters: readonly Parameter[]): Html {
  return table({
    kind: "fields",
    caption: `Parameters of ${method} ${path}`,
    head: ["Name", "In", "Type", "Required", "Limits", "Description"],
    rows: parameters.map(({ name, in: where, schema = {}, required, description }) => [
      html`<code>${name}</code>`,
      html`${where}`,
      kindOf(schema),
      html`${required ? "yes" : "no"}`,
      html`${limitsOf(schema)}`,
      inlineText(description ?? schema.description ?? ""),
    ]),
  });
}

/** What is sent as one type. A shape that only this call has stands here in full, another is linked. */
function contentBody(type: string, schema: Schema, document: InterfaceDocument, own: ReadonlySet<string>): Html {
  const name = schema.$ref === undefined ? undefined : shapeName(schema.$ref);
  const found = name === undefined ? undefined : document.components?.schemas?.[name];
  if (name !== undefined && found !== undefined && own.has(name)) {
    return html`<p><code>${type}</code>: ${name}</p>
<div id="shape-${name}">${shapeBody(found, name)}</div>\n`;
  }
  const deeper = schema.properties === undefined ? "" : shapeBody(schema, "the object");
  return html`<p><code>${type}</code>: ${kindOf(schema)}</p>${deeper}\n`;
}

function problemTable(
  { method, path }: DocumentedCall,
  answers: readonly (readonly [string, { readonly description: string }])[],
  known: ReadonlySet<string>,
): Html {
  const codes = (text: string): Html =>
    joined(
      text.split(", ").map((word) => (known.has(word) ? problemLink(word) : word)),
      ", ",
    );
  return table({
    kind: "list",
    caption: `Problems of ${method} ${path}; each answers with the shape Problem`,
    head: ["Status", "Problems"],
    rows: answers.map(([status, { description }]) => [html`${status}`, codes(description)]),
  });
}
