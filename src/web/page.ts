import { createHash } from "node:crypto";
import { type Html, html, nothing } from "./html.ts";
import { sheet } from "./sheet.ts";

/** A whole page and the header that it is to be sent with. */
export interface Page {
  readonly html: string;
  /** Value of Content-Security-Policy: nothing is loaded, nothing runs, only the page's own sheet is taken. */
  readonly contentSecurityPolicy: string;
}

const sheetHash = createHash("sha256").update(sheet).digest("base64");

const contentSecurityPolicy = [
  "default-src 'none'",
  `style-src 'sha256-${sheetHash}'`,
  "base-uri 'none'",
  "form-action 'none'",
  "frame-ancestors 'none'",
].join("; ");

export interface PageParts {
  readonly title: string;
  /** The only h1, and what stands under it before the contents. */
  readonly heading: string;
  readonly lead: Html;
  readonly contents?: Html;
  readonly body: Html;
  readonly foot: Html;
}

export function page({ title, heading, lead, contents, body, foot }: PageParts): Page {
  const whole = html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${title}</title>
<style>${{ html: sheet }}</style>
</head>
<body>
<a class="skip" href="#text">Skip to the text</a>
<header>
<h1>${heading}</h1>
${lead}
${contents === undefined ? nothing : html`<nav aria-labelledby="contents"><h2 id="contents">Contents</h2>${contents}</nav>`}
</header>
<main id="text" tabindex="-1">
${body}
</main>
<footer>${foot}</footer>
</body>
</html>
`;
  return { html: whole.html, contentSecurityPolicy };
}

/** A heading that leads to itself, so that its address can be taken along. */
export function heading(level: 2 | 3 | 4, id: string, text: Html | string): Html {
  const tag: Html = { html: `h${level}` };
  return html`<${tag} id="${id}"><a href="#${id}">${text}</a></${tag}>`;
}

export interface TableParts {
  readonly kind: "fields" | "list";
  readonly caption: string;
  readonly head: readonly string[];
  /** The first cell heads its row. */
  readonly rows: readonly (readonly Html[])[];
}

/** A table that stays one for those who listen to it, also where the sheet lays its cells out as blocks. */
export function table({ kind, caption, head, rows }: TableParts): Html {
  const heads = head.map((name) => html`<th role="columnheader" scope="col">${name}</th>`);
  const row = ([first, ...others]: readonly Html[]): Html => {
    const cells = others.map((cell, i) => html`<td role="cell" data-name="${head[i + 1]}">${cell}</td>`);
    return html`<tr role="row"><th role="rowheader" scope="row">${first}</th>${cells}</tr>\n`;
  };
  return html`<table role="table" class="${kind}">
<caption>${caption}</caption>
<thead role="rowgroup"><tr role="row">${heads}</tr></thead>
<tbody role="rowgroup">
${rows.map(row)}</tbody>
</table>
`;
}
