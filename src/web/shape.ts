import { type Schema, shapeName } from "./document.ts";
import { type Html, html, joined, nothing } from "./html.ts";
import { inlineText } from "./markdown.ts";
import { heading, table } from "./page.ts";
import { unitOf } from "./units.ts";

/** Schemas as tables for readers: one row a field, fields of fields below them with their whole path. */

export const shapeLink = (name: string): Html => html`<a href="#shape-${name}">${name}</a>`;

const literal = (value: unknown): Html => html`<code>${JSON.stringify(value)}</code>`;

/** Large and small numbers the short way: 1e12, 1e-5. */
function short(value: number): string {
  const [plain, power] = [String(value), value.toExponential().replace("e+", "e")];
  return power.length + 3 < plain.length || plain.includes("e") ? power : plain;
}

const isObject = (schema: Schema): boolean => schema.properties !== undefined;

/** What kind of value a schema takes, in words, with links to shared shapes. */
export function kindOf(schema: Schema): Html {
  if (schema.$ref !== undefined) return shapeLink(shapeName(schema.$ref));
  if (schema.const !== undefined) return literal(schema.const);
  if (schema.enum !== undefined) return joined(schema.enum.map(literal), " or ");
  const parts = (schema.allOf ?? []).filter((part) => Object.keys(part).some((key) => key !== "description"));
  if (parts.length > 0) return joined(parts.map(kindOf), " and ");
  const alternatives = schema.anyOf ?? schema.oneOf;
  if (alternatives !== undefined) return joined(alternatives.map(alternative), " or ");
  if (schema.prefixItems !== undefined) return html`list of ${schema.prefixItems.length}: ${alike(schema.prefixItems)}`;
  if (schema.items !== undefined) return html`list of ${isObject(schema.items) ? "objects" : kindOf(schema.items)}`;
  if (schema.type === undefined) return html`anything`;
  const types = typeof schema.type === "string" ? [schema.type] : schema.type;
  const of = schema.additionalProperties;
  const named = typeof of === "object" && !isObject(schema) ? html`, each name with ${kindOf(of)}` : "";
  return html`${types.join(" or ")}${named}`;
}

/** An alternative shows its fields' names or its limits, so that it can be told from the others. */
function alternative(schema: Schema): Html {
  if (schema.properties !== undefined) {
    return html`object with ${joined(
      Object.keys(schema.properties).map((name) => html`<code>${name}</code>`),
      ", ",
    )}`;
  }
  const limits = limitsOf(schema);
  return limits === "" ? kindOf(schema) : html`${kindOf(schema)} (${limits})`;
}

function alike(schemas: readonly Schema[]): Html {
  const kinds = new Set(schemas.map((schema) => kindOf(schema).html));
  return joined(
    [...kinds].map((kind) => ({ html: kind })),
    ", ",
  );
}

function range(low: string | undefined, high: string | undefined, what: string): string[] {
  if (low !== undefined && low === high) return [`exactly ${low}${what}`];
  if (low !== undefined && high !== undefined) return [`${low} to ${high}${what}`];
  if (low !== undefined) return [`at least ${low}${what}`];
  return high === undefined ? [] : [`at most ${high}${what}`];
}

const maybe = (value: number | undefined): string | undefined => (value === undefined ? undefined : short(value));

/** The limits of a schema, and of what is in its list, in words. */
export function limitsOf(schema: Schema): string {
  const { minimum, maximum, exclusiveMinimum: above, exclusiveMaximum: below } = schema;
  const open = [above === undefined ? "" : `above ${short(above)}`, below === undefined ? "" : `below ${short(below)}`];
  const limits = [
    ...range(maybe(schema.minItems), maybe(schema.maxItems), " in the list"),
    ...range(maybe(schema.minLength), maybe(schema.maxLength), " characters"),
    ...range(maybe(minimum), maybe(maximum), ""),
    ...open.filter((text) => text !== ""),
    ...(schema.pattern === undefined ? [] : [`pattern ${schema.pattern}`]),
  ];
  const inside = schema.items ?? schema.prefixItems?.[0];
  const each = inside === undefined || isObject(inside) ? "" : limitsOf(inside);
  if (each !== "") limits.push(`each ${each}`);
  const further = schema.additionalProperties;
  if (isObject(schema) && further !== false) limits.push("further fields are taken");
  return limits.join("; ");
}

/** Description and example of a schema; of a shared shape with a word of its own, that word. */
function saysOf(schema: Schema): Html {
  const description = schema.description ?? schema.allOf?.find((part) => part.description !== undefined)?.description;
  const example = schema.example ?? schema.allOf?.find((part) => part.example !== undefined)?.example;
  const shown = example === undefined ? "" : html`Example: ${literal(example)}`;
  const text = description === undefined ? "" : inlineText(description);
  return description === undefined || example === undefined ? html`${text}${shown}` : html`${text} ${shown}`;
}

/** Objects that stand inside a schema without a name of their own, each with the mark that its path gets. */
function inner(schema: Schema): readonly (readonly [mark: string, object: Schema])[] {
  if (schema.properties !== undefined) return [["", schema]];
  if (schema.items !== undefined) return inner(schema.items).map(([mark, object]) => [`[]${mark}`, object] as const);
  if (typeof schema.additionalProperties === "object") {
    return inner(schema.additionalProperties).map(([mark, object]) => [`.*${mark}`, object] as const);
  }
  return [...(schema.anyOf ?? schema.oneOf ?? []), ...(schema.allOf ?? [])].flatMap(inner);
}

/** The way to a field; it may be broken after each dot. */
const outerPath = (path: string): Html =>
  path === "" ? nothing : html`<code class="outer">${joined(path.split(/(?<=\.)/), { html: "<wbr>" })}<wbr></code>`;

function fieldRows(object: Schema, path: string): readonly (readonly Html[])[] {
  return Object.entries(object.properties ?? {}).flatMap(([name, schema]) => [
    [
      html`${outerPath(path)}<code>${name}</code>`,
      kindOf(schema),
      html`${unitOf(name)}`,
      html`${object.required?.includes(name) ? "yes" : "no"}`,
      html`${limitsOf(schema)}`,
      saysOf(schema),
    ],
    ...inner(schema).flatMap(([mark, deeper]) => fieldRows(deeper, `${path}${name}${mark}.`)),
  ]);
}

/** A schema under a name: what it is, and its fields where it has any. */
export function shapeBody(schema: Schema, name: string): Html {
  const rows = inner(schema).flatMap(([mark, object]) => fieldRows(object, mark === "" ? "" : `${mark}.`));
  const limits = isObject(schema) && schema.additionalProperties === false ? "" : limitsOf(schema);
  const is = isObject(schema) ? "" : html`<p>Is ${kindOf(schema)}${limits === "" ? "" : html` (${limits})`}.</p>\n`;
  const says = saysOf(schema);
  const fields = table({
    kind: "fields",
    caption: `Fields of ${name}`,
    head: ["Field", "Type", "Unit", "Required", "Limits", "Description"],
    rows,
  });
  return html`${says.html === "" ? "" : html`<p>${says}</p>\n`}${is}${rows.length === 0 ? "" : fields}`;
}

/** A shared shape with its heading. */
export const shape = (name: string, schema: Schema, level: 3 | 4): Html =>
  html`${heading(level, `shape-${name}`, name)}\n${shapeBody(schema, name)}`;
