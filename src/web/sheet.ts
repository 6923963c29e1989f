/** The sheet of every page: system fonts, light and dark, 320 px to wide, paper. */
export const sheet = `
:root {
  color-scheme: light dark;
  --ground: #fbfaf6; --raised: #f1eee6; --text: #22292d; --quiet: #505a60; --line: #cfcabd; --link: #17506e;
  --warning: #8a3b12;
}
@media (prefers-color-scheme: dark) {
  :root {
    --ground: #14181b; --raised: #1f262a; --text: #dfe5e8; --quiet: #a9b4ba; --line: #424c52; --link: #93c9e6;
    --warning: #f0b088;
  }
}
* { box-sizing: border-box; }
html { scroll-padding-top: 1rem; }
body {
  margin: 0; background: var(--ground); color: var(--text);
  font: 1rem/1.55 system-ui, sans-serif; overflow-wrap: break-word;
}
a { color: var(--link); text-underline-offset: 0.15em; }
a:focus-visible { outline: 3px solid var(--link); outline-offset: 2px; }
.skip { position: absolute; left: -100vw; }
.skip:focus { left: 0.5rem; top: 0.5rem; padding: 0.5rem; background: var(--ground); }
header, main, footer { max-width: 64rem; margin: 0 auto; padding: 0 1rem; }
header { padding-top: 2rem; }
footer { padding-top: 2rem; padding-bottom: 3rem; color: var(--quiet); }
h1, h2, h3, h4 { line-height: 1.25; text-wrap: balance; }
h1 { font-size: 1.9rem; margin: 0 0 0.5rem; }
h2 { font-size: 1.45rem; margin: 3rem 0 0.75rem; padding-top: 0.75rem; border-top: 1px solid var(--line); }
h3 { font-size: 1.15rem; margin: 2.25rem 0 0.5rem; }
h4 { font-size: 1rem; margin: 1.5rem 0 0.5rem; }
:is(h2, h3, h4) > a { color: inherit; text-decoration: none; }
:is(h2, h3, h4) > a:is(:hover, :focus-visible) { text-decoration: underline; }
p, ul { max-width: 44rem; }
p { margin: 0.5rem 0; }
.lead { font-size: 1.1rem; }
.quiet { color: var(--quiet); }
.caution { margin: 1.25rem 0; padding: 0.75rem 1rem; border: 2px solid var(--warning); border-left-width: 0.6rem; }
.caution strong { color: var(--warning); }
nav > h2 { font-size: 1.15rem; margin-top: 1.5rem; border: 0; padding: 0; }
nav ul { padding-left: 1.25rem; margin: 0.25rem 0; }
nav .names { columns: 12rem; }
code, pre { font-family: ui-monospace, monospace; font-size: 0.92em; }
code { overflow-wrap: anywhere; }
pre {
  max-width: 100%; margin: 0.5rem 0; padding: 0.75rem 1rem; background: var(--raised); border: 1px solid var(--line);
  white-space: pre-wrap; overflow-wrap: anywhere;
}
table { width: 100%; margin: 0.75rem 0 1.25rem; border-collapse: collapse; font-size: 0.94rem; }
caption { text-align: left; padding-bottom: 0.35rem; color: var(--quiet); }
th, td { text-align: left; vertical-align: top; padding: 0.4rem 0.75rem 0.4rem 0; border-bottom: 1px solid var(--line); }
thead th { border-bottom: 2px solid var(--line); }
tbody th { font-weight: 600; }
.fields tbody th { width: 22%; font-weight: 400; }
.fields tbody th code { font-weight: 600; overflow-wrap: break-word; }
.fields tbody th .outer { color: var(--quiet); font-weight: 400; }
.list tbody th code { white-space: nowrap; }
dl { display: grid; grid-template-columns: max-content 1fr; gap: 0.35rem 1.25rem; margin: 1rem 0; }
dt { font-weight: 600; }
dd { margin: 0; }
@media (max-width: 46rem) {
  /* Rows become small blocks; the roles in the page keep them a table for those who listen. */
  table, caption, tbody, tr, th, td { display: block; width: auto; }
  .fields tbody th { width: auto; }
  thead { position: absolute; width: 1px; height: 1px; overflow: hidden; clip-path: inset(50%); }
  tr { padding: 0.5rem 0; border-bottom: 1px solid var(--line); }
  th, td { padding: 0.1rem 0; border: 0; }
  td:empty { display: none; }
  .list tbody th code { white-space: normal; }
  td[data-name]::before { content: attr(data-name) ": "; color: var(--quiet); }
}
@media print {
  :root {
    --ground: #fff; --raised: #fff; --text: #000; --quiet: #333; --line: #999; --link: #000; --warning: #000;
  }
  body { font-size: 10pt; }
  header, main, footer { max-width: none; padding: 0; }
  .skip { display: none; }
  thead { display: table-header-group; }
  tr, pre, .caution { break-inside: avoid; }
  h2, h3, h4, caption { break-after: avoid; }
}
`;
