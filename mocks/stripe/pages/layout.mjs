import { createHash } from 'node:crypto';
import { send } from '../http.mjs';
import { html, Html } from './html.mjs';

const style = `
:root { color-scheme: light dark; --paper: #f4f1ea; --sheet: #fffdf8; --ink: #23261f; --soft: #5a5d52; --line: #8a8c7e;
  --mark: #7a3b00; --tape: #f2c14e; --tape-ink: #2b2000; --go: #1f5130; --go-ink: #ffffff; --bad: #9c1c1c; }
@media (prefers-color-scheme: dark) { :root { --paper: #1b1d19; --sheet: #24271f; --ink: #eceadf; --soft: #b3b4a6; --line: #7c7f70;
  --mark: #f0b070; --tape: #c9971f; --tape-ink: #1b1400; --go: #8fd0a4; --go-ink: #10210f; --bad: #ff9a8f; } }
* { box-sizing: border-box; }
html { background: var(--paper); color: var(--ink); font: 1rem/1.5 ui-monospace, "DejaVu Sans Mono", Menlo, Consolas, monospace; }
body { margin: 0; overflow-wrap: anywhere; }
.tape { margin: 0; padding: .6rem 1rem; background: var(--tape); color: var(--tape-ink); font-weight: 700; text-align: center;
  border-bottom: 3px dashed var(--tape-ink); }
main { max-width: 44rem; margin: 1.25rem auto; padding: 1.25rem; background: var(--sheet); border: 1px solid var(--line); }
@media (max-width: 30rem) { main { margin: 0; border: 0; padding: 1rem; } }
h1 { font-size: 1.35rem; line-height: 1.25; margin: 0 0 .75rem; } h2 { font-size: 1.05rem; margin: 1.5rem 0 .5rem; }
.sum { font-size: 1.9rem; font-weight: 700; margin: .25rem 0 1rem; }
p { margin: .5rem 0; } .soft, .hint { color: var(--soft); } .hint { display: block; font-size: .875rem; }
dl { display: grid; grid-template-columns: minmax(7rem, auto) 1fr; gap: .25rem 1rem; margin: 1rem 0; } dt { color: var(--soft); } dd { margin: 0; }
fieldset { margin: 1.25rem 0; padding: .5rem 1rem 1rem; border: 1px solid var(--line); } legend { font-weight: 700; padding: 0 .4rem; }
.pick { display: grid; grid-template-columns: auto 1fr; gap: 0 .75rem; align-items: start; padding: .5rem 0; }
.pick input { width: 1.4rem; height: 1.4rem; margin: .1rem 0 0; accent-color: var(--go); } .pick .hint { grid-column: 2; }
.field { margin: 1rem 0; } .field label { display: block; font-weight: 700; }
input[type=text], input[type=email], select { width: 100%; min-height: 2.75rem; padding: .4rem .6rem; font: inherit; color: inherit;
  background: var(--paper); border: 1px solid var(--line); }
button { min-height: 2.75rem; padding: .5rem 1.1rem; font: inherit; font-weight: 700; cursor: pointer; border: 2px solid var(--go);
  background: var(--go); color: var(--go-ink); } button.plain { background: transparent; color: var(--ink); border-color: var(--line); }
.row { display: flex; flex-wrap: wrap; gap: .75rem; margin: 1rem 0; } .row form { margin: 0; }
:focus-visible { outline: 3px solid var(--mark); outline-offset: 2px; } a { color: var(--mark); }
.problem { border-left: .4rem solid var(--bad); padding: .25rem 1rem; margin: 1rem 0; } .problem strong { color: var(--bad); }
.list { list-style: none; margin: 0; padding: 0; } .list li { border-top: 1px solid var(--line); padding: .6rem 0; }
`;

const styleHash = createHash('sha256').update(style).digest('base64');

/**
 * Sends a page. No script, no picture, nothing from elsewhere.
 * @param {import('node:http').ServerResponse} response
 * @param {number} status
 * @param {{ title: string, body: Html, leadsTo?: Array<string | null> }} page `leadsTo`: addresses that a form may end at
 */
export function sendPage(response, status, { title, body, leadsTo = [] }) {
  // Chromium holds redirects after a form to form-action too.
  const origins = leadsTo.flatMap((url) => (url !== null && URL.canParse(url) ? [new URL(url).origin] : []));
  const page = html`<!doctype html>
<html lang="en-US">
<head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><title>${title}</title>
<link rel="icon" href="data:,"><style>${new Html(style)}</style></head>
<body><header class="tape">Stand-in payment page. No money moves.</header><main>${body}</main></body>
</html>`;
  send(response, status, page.text, {
    'Content-Type': 'text/html; charset=utf-8',
    'Content-Security-Policy': `default-src 'none'; style-src 'sha256-${styleHash}'; img-src data:; form-action 'self' ${origins.join(' ')}; base-uri 'none'; frame-ancestors 'none'`,
    'X-Content-Type-Options': 'nosniff',
    'Referrer-Policy': 'same-origin',
  });
}

/**
 * @param {import('node:http').ServerResponse} response
 * @param {number} status
 * @param {string} message
 */
export const sendProblem = (response, status, message) =>
  sendPage(response, status, {
    title: 'Not here',
    body: html`<h1>${message}</h1><p><a href="/">All payments of the stand-in</a></p>`,
  });
