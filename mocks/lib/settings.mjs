import { Failure } from './failure.mjs';

/** @typedef {(value: string) => string | undefined} Check what is wrong with a value, if anything */

/** @type {Check} */
const port = (value) => (/^\d{1,5}$/.test(value) && Number(value) >= 1 && Number(value) <= 65_535 ? undefined : 'must be a port from 1 to 65535');
/** @type {Check} */
const secret = (value) => (value.length >= 32 ? undefined : 'must have at least 32 characters');
/** @type {Check} */
const web = (value) => (/^https?:\/\/[^\s/]+/.test(value) && URL.canParse(value) ? undefined : 'must be an address that begins with http:// or https://');
/** @type {Check} */
const smtp = (value) => (/^smtps?:\/\/\S+/.test(value) && URL.canParse(value) ? undefined : 'must be an address that begins with smtp:// or smtps://');
/** @type {Check} */
const any = () => undefined;
/** @param {...string} words @returns {Check} */
const oneOf = (...words) => (value) => (words.includes(value) ? undefined : `must be one of ${words.join(', ')}`);
/** @param {string} prefix @returns {Check} */
const begins = (prefix) => (value) => (value.startsWith(prefix) && value.length > prefix.length ? undefined : `must begin with ${prefix}`);
/** @type {Check} */
const milliseconds = (value) => (/^\d{1,9}$/.test(value) ? undefined : 'must be a whole number of milliseconds');
/** @type {Check} */
const mail = (value) => (/^[^\s@<>]+@[^\s@<>]+$/.test(value) ? undefined : 'must be a mail address');

/** @type {Check} */
const keyRing = (value) => (/^[a-z0-9]{1,16}:[\w-]{43}(,[a-z0-9]{1,16}:[\w-]{43})*$/.test(value) ? undefined : 'must be id:key, more of them after commas; a key is 32 bytes in base64url (43 characters)');

/** Everything that .env may hold for `npm start`; .env.example explains each. @type {Record<string, Check>} */
export const variables = {
  PORT: port,
  DEV_PORT: port,
  STRIPE_PORT: port,
  MAIL_PAGE_PORT: port,
  SMTP_PORT: port,
  STORAGE_PORT: port,
  POSTGRES_PORT: port,
  PG_BIN: any,
  PUBLIC_URL: web,
  JWT_SECRET: secret,
  CODE_SECRET: secret,
  SECOND_FACTOR_KEYS: keyRing,
  REQUIRE_SECOND_FACTOR: oneOf('true', 'false'),
  STRIPE_SECRET_KEY: begins('sk_'),
  STRIPE_WEBHOOK_SECRET: begins('whsec_'),
  STRIPE_SETTLE_AFTER_MS: milliseconds,
  SMTP_URL: smtp,
  MAIL_FROM: mail,
  STORAGE: oneOf('disk', 's3'),
  FILES_DIR: any,
  S3_ENDPOINT: web,
  S3_REGION: any,
  S3_BUCKET: (value) => (value.length >= 3 ? undefined : 'must have at least 3 characters'),
  S3_ACCESS_KEY_ID: any,
  S3_SECRET_ACCESS_KEY: (value) => (value.length >= 16 ? undefined : 'must have at least 16 characters'),
  S3_PATH_STYLE: oneOf('true', 'false'),
  DATABASE_POOL: (value) => (/^\d{1,3}$/.test(value) && Number(value) >= 1 && Number(value) <= 100 ? undefined : 'must be a number from 1 to 100'),
  DEMO: oneOf('true', 'false'),
  LOG_LEVEL: oneOf('fatal', 'error', 'warn', 'info', 'debug', 'silent'),
};

/** What a deployment without the launcher sets; the launcher makes these itself. */
export const deploymentOnly = ['NODE_ENV', 'DATABASE_OWNER_URL', 'DATABASE_WRITE_URL', 'DATABASE_READ_URL', 'DATABASE_WORKER_URL', 'QUEUE_URL', 'STRIPE_API_URL', 'MAIL_PAGE_URL', 'PORTAL_DIST'];

/**
 * Joins what .env and the caller's environment say; the environment wins. Refuses unknown names and wrong values with one
 * line that names the variable.
 * @param {Record<string, { value: string, line: number }>} file
 * @param {Record<string, string | undefined>} environment
 * @returns {Record<string, string>} only what was set
 */
export function readSettings(file, environment) {
  for (const [name, { line }] of Object.entries(file)) {
    if (name in variables) continue;
    const why = deploymentOnly.includes(name) ? 'is made by npm start itself and belongs to a deployment without it' : 'is not a variable that npm start knows';
    throw new Failure(`.env, line ${line}: ${name} ${why}. See .env.example.`);
  }
  /** @type {Record<string, string>} */
  const settings = {};
  for (const [name, check] of Object.entries(variables)) {
    const outside = environment[name];
    const value = outside ? outside : file[name]?.value;
    if (value === undefined || value === '') continue;
    const wrong = check(value);
    const where = outside ? 'the environment' : `.env, line ${file[name]?.line}`;
    if (wrong) throw new Failure(`${where}: ${name} ${wrong}.`);
    settings[name] = value;
  }
  if (settings['STRIPE_SECRET_KEY'] && !settings['STRIPE_WEBHOOK_SECRET']) throw new Failure('STRIPE_SECRET_KEY is set, so STRIPE_WEBHOOK_SECRET must be set too (Stripe shows it beside the webhook endpoint).');
  if (settings['STRIPE_WEBHOOK_SECRET'] && !settings['STRIPE_SECRET_KEY']) throw new Failure('STRIPE_WEBHOOK_SECRET is set, so STRIPE_SECRET_KEY must be set too.');
  const bucket = Object.keys(settings).find((name) => name.startsWith('S3_'));
  if (bucket && settings['STORAGE'] !== 's3') throw new Failure(`${bucket} is set, so STORAGE must be s3.`);
  const needed = ['S3_BUCKET', 'S3_ACCESS_KEY_ID', 'S3_SECRET_ACCESS_KEY'].find((name) => !settings[name]);
  if (bucket && needed) throw new Failure(`${bucket} is set, so ${needed} must be set too.`);
  return settings;
}

/**
 * Ports of everything that listens, each with the variable that moves it.
 * @param {Record<string, string>} settings
 * @param {boolean} watch
 */
export function portsOf(settings, watch) {
  /** @param {string} variable @param {number} usual @param {string} what */
  const one = (variable, usual, what) => ({ port: Number(settings[variable] ?? usual), variable, what });
  return {
    web: one('PORT', 4300, 'the portal and its API'),
    ...(watch ? { dev: one('DEV_PORT', 4301, "the portal's development server") } : {}),
    ...(settings['STRIPE_SECRET_KEY'] ? {} : { stripe: one('STRIPE_PORT', 4310, 'the Stripe stand-in') }),
    ...(settings['STORAGE'] === 's3' && !settings['S3_BUCKET'] ? { storage: one('STORAGE_PORT', 4330, 'the storage stand-in') } : {}),
    ...(settings['SMTP_URL'] ? {} : { mailPage: one('MAIL_PAGE_PORT', 4320, 'the mail page'), smtp: one('SMTP_PORT', 4325, 'the mail server') }),
  };
}
