import { type Html, html } from "./html.ts";
import { inlineText } from "./markdown.ts";
import { heading, type Page, page, table } from "./page.ts";

export interface ProblemKind {
  readonly code: string;
  readonly status: number;
  readonly title: string;
  readonly remedy: string;
}

export interface NoticeKind {
  readonly code: string;
  readonly meaning: string;
}

const foot = html`<p>The calls that answer with these: <a href="/docs">the interface</a>. The same as JSON: ask with
<code>Accept: application/json</code>.</p>`;

const address = (code: string): Html => html`<a href="/problems/${code}"><code>${code}</code></a>`;

/** The catalogue: every kind of problem, and the notices that travel with good answers. */
export function problemsPage(problems: readonly ProblemKind[], notices: readonly NoticeKind[]): Page {
  return page({
    title: "Tauline: problems and notices",
    heading: "Problems and notices",
    lead: html`<p class="lead">Every failure is problem details as RFC 9457 has them; their <code>type</code> is the address of
one of these. What begins with 4 can be mended in the request, and its faults point to where.</p>`,
    contents: html`<ul><li><a href="#problems">Problems</a></li><li><a href="#notices">Notices</a></li></ul>`,
    body: html`<section>${heading(2, "problems", "Problems")}
${table({
  kind: "list",
  caption: "Kinds of problem, by status",
  head: ["Code", "Status", "Meaning", "What to do"],
  rows: problems.map(({ code, status, title, remedy }) => [
    address(code),
    html`${status}`,
    html`${inlineText(title)}.`,
    inlineText(remedy),
  ]),
})}</section>
<section>${heading(2, "notices", "Notices")}
<p>Remarks that travel with a good answer. They never change a number; they say how far to trust it.</p>
${table({
  kind: "list",
  caption: "Kinds of notice",
  head: ["Code", "Meaning"],
  rows: notices.map(({ code, meaning }) => [html`<code>${code}</code>`, inlineText(meaning)]),
})}</section>`,
    foot,
  });
}

/** One kind of problem, at the address that its `type` gives. */
export function problemPage({ code, status, title, remedy }: ProblemKind): Page {
  return page({
    title: `Tauline: ${code}`,
    heading: title,
    lead: html`<p class="lead">A kind of problem with which Tauline answers.</p>`,
    body: html`<dl>
<dt>Type</dt><dd><code>/problems/${code}</code></dd>
<dt>Status</dt><dd>${status}</dd>
<dt>What to do</dt><dd>${inlineText(remedy)}</dd>
</dl>
<p><a href="/problems">All problems and notices</a></p>`,
    foot,
  });
}
