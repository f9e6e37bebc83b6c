import Handlebars from 'handlebars';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import path from 'node:path';

/** Every kind of mail; each has its folder of three templates: head (subject, preheader, heading, why), text and html. */
const noticeKinds = [
  'sign-in-code',
  'password-changed',
  'second-step-changed',
  'second-step-refused',
  'session-reused',
  'address-code',
  'address-changed',
  'invitation',
  'firm-invitation',
  'invitation-accepted',
  'access-ended',
  'person-left',
  'change-to-review',
  'change-issued',
  'change-partly-signed',
  'change-approved',
  'change-closed',
  'milestone-claimed',
  'milestone-seen',
  'milestone-reopened',
  'guest-link',
  'guest-code',
  'guest-inspected',
  'draw-submitted',
  'draw-to-review',
  'draw-returned',
  'draw-objected',
  'draw-objected-homeowner',
  'draw-approved',
  'draw-approved-homeowner',
  'draw-to-fund',
  'draw-split-changed',
  'draw-funded',
  'payment-receipt',
  'payment-received',
  'payment-failed',
  'payment-failed-office',
  'payment-returned',
  'payment-returned-office',
] as const;
export type NoticeKind = (typeof noticeKinds)[number];

export interface Mail {
  subject: string;
  text: string;
  html: string;
}

const HEAD_FIELDS = ['subject', 'preheader', 'heading', 'why'] as const;
type Head = Record<(typeof HEAD_FIELDS)[number], string>;

// The build copies no assets, so the templates are read from the source tree, which ships with the application.
const folder = path.join(fileURLToPath(new URL('../..', import.meta.url)), 'src/notices/templates');
const read = (file: string) => readFileSync(path.join(folder, file), 'utf8');
const engine = Handlebars.create();
engine.registerPartial('layout', read('layout.html.hbs'));
engine.registerPartial('footer', read('footer.text.hbs'));
// strict: a value that a template names and nobody gave is an error, not a hole in a mail
const plain = { strict: true, preventIndent: true, noEscape: true };
const escaped = { strict: true, preventIndent: true };
const compiled = new Map(
  noticeKinds.map((kind) => {
    const [head, text, html] = [read(`${kind}/head.hbs`), read(`${kind}/text.hbs`), read(`${kind}/html.hbs`)];
    return [kind, { head: compileHead(kind, head), text: engine.compile(text, plain), html: engine.compile(html, escaped) }];
  }),
);

/** Renders a mail of a kind. A subject is one line, whatever stands in its data. */
export function renderMail(kind: NoticeKind, data: Readonly<Record<string, unknown>>): Mail {
  const templates = compiled.get(kind);
  if (!templates) throw new Error(`There is no mail "${kind}".`);
  const head = templates.head(data);
  const all = { ...data, ...head };
  return { subject: head.subject, text: `${templates.text(all).trim()}\n`, html: templates.html(all) };
}

function compileHead(kind: string, source: string): (data: unknown) => Head {
  const lines = new Map(source.trim().split('\n').map((line) => [line.slice(0, line.indexOf(':')), line.slice(line.indexOf(':') + 1)]));
  const templates = HEAD_FIELDS.map((field) => {
    const line = lines.get(field);
    if (line === undefined) throw new Error(`The head of the mail "${kind}" lacks its ${field}.`);
    return [field, engine.compile(line, plain)] as const;
  });
  const oneLine = (text: string) => text.replace(/\s+/g, ' ').trim();
  return (data) => Object.fromEntries(templates.map(([field, template]) => [field, oneLine(template(data))])) as Head;
}
