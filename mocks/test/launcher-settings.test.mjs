import { readFileSync } from 'node:fs';
import path from 'node:path';
import { parseEnv } from '../lib/env-file.mjs';
import { deploymentOnly, portsOf, readSettings, variables } from '../lib/settings.mjs';

const read = (/** @type {string} */ text, environment = {}) => readSettings(parseEnv(text), environment);

test('values, comments, quotes, an export and a byte-order mark', () => {
  const text = '\uFEFF# first\n\nPORT=4400 # beside\nexport MAIL_FROM = "a b#c@example.com"\r\nSMTP_URL=\'smtp://127.0.0.1:25\'\nLOG_LEVEL=\n';
  const values = Object.fromEntries(Object.entries(parseEnv(text)).map(([name, { value }]) => [name, value]));
  expect(values).toEqual({ PORT: '4400', MAIL_FROM: 'a b#c@example.com', SMTP_URL: 'smtp://127.0.0.1:25', LOG_LEVEL: '' });
});

test.each([
  ['PORT=4300\n\nno value here\n', '.env, line 3 is not of the form NAME=value.'],
  ['=4300', '.env, line 1 is not of the form NAME=value.'],
  ['MAIL_FROM="a', '.env, line 1: the quote " is not closed.'],
  ['MAIL_FROM="a" b', '.env, line 1: something follows the closing quote.'],
  ['PORT=1\nPORT=2', '.env, line 2: PORT is already set on line 1.'],
  ['# x\nPROT=4300', '.env, line 2: PROT is not a variable that npm start knows. See .env.example.'],
  ['PORT=70000', '.env, line 1: PORT must be a port from 1 to 65535.'],
  ['JWT_SECRET=short', '.env, line 1: JWT_SECRET must have at least 32 characters.'],
  ['SMTP_URL=mail.example.com', '.env, line 1: SMTP_URL must be an address that begins with smtp:// or smtps://.'],
  ['DEMO=yes', '.env, line 1: DEMO must be one of true, false.'],
  ['QUEUE_URL=postgres://x', '.env, line 1: QUEUE_URL is made by npm start itself and belongs to a deployment without it. See .env.example.'],
  ['STRIPE_SECRET_KEY=sk_test_1', 'STRIPE_SECRET_KEY is set, so STRIPE_WEBHOOK_SECRET must be set too (Stripe shows it beside the webhook endpoint).'],
  ['STORAGE=tape', '.env, line 1: STORAGE must be one of disk, s3.'],
  ['S3_BUCKET=tally', 'S3_BUCKET is set, so STORAGE must be s3.'],
  ['STORAGE=s3\nS3_BUCKET=tally', 'S3_BUCKET is set, so S3_ACCESS_KEY_ID must be set too.'],
])('%j is refused with one line', (text, message) => {
  expect(() => read(text)).toThrow(new Error(message));
  expect(message).not.toContain('\n');
});

test('the environment wins over .env, and a mistake there is named as such', () => {
  expect(read('PORT=4400', { PORT: '4500' })).toEqual({ PORT: '4500' });
  expect(() => read('', { PORT: 'x' })).toThrow('the environment: PORT must be a port');
  expect(read('', { UNRELATED: 'x' })).toEqual({});
});

test('real Stripe or real mail leave their stand-ins out', () => {
  const usual = portsOf({}, false);
  expect(Object.values(usual).map(({ port }) => port)).toEqual([4300, 4310, 4320, 4325]);
  const real = read('STRIPE_SECRET_KEY=sk_test_1\nSTRIPE_WEBHOOK_SECRET=whsec_1\nSMTP_URL=smtps://u:p@mail.example.com');
  expect(Object.keys(portsOf(real, true))).toEqual(['web', 'dev']);
  expect(portsOf(read('STORAGE=s3'), false)).toMatchObject({ storage: { port: 4330 } });
  expect(portsOf(read('STORAGE=s3\nS3_BUCKET=tally\nS3_ACCESS_KEY_ID=a\nS3_SECRET_ACCESS_KEY=0123456789abcdef'), false)).not.toHaveProperty('storage');
});

test('.env.example names every variable, no other one, and is itself a valid .env', () => {
  const text = readFileSync(path.join(import.meta.dirname, '../../.env.example'), 'utf8');
  expect(read(text)).toEqual({});
  const shown = [...text.matchAll(/^#([A-Z0-9_]+)=/gm)].map(([, name]) => name);
  expect(shown.sort()).toEqual(Object.keys(variables).sort());
  const deployed = [...text.matchAll(/^# {3}([A-Z_]+)/gm)].map(([, name]) => name);
  expect(deployed.sort()).toEqual([...deploymentOnly].sort());
});
