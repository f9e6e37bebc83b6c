/**
 * A stand-in for Stripe on this machine: the real `stripe` package works against it by `host`, `port` and `protocol`.
 *
 *   node mocks/stripe/server.mjs
 *
 * Environment: PORT (4310), STRIPE_DATA_DIR (.data/stripe), STRIPE_WEBHOOK_URL with STRIPE_WEBHOOK_SECRET,
 * STRIPE_SETTLE_AFTER_MS (20000; negative: only when told to), STRIPE_RETURN_AFTER_MS, STRIPE_RETRY_BASE_MS.
 * People reach /pay/<session>, /onboard/<link> and / (all payments); tests reach /_control (see control/index.mjs).
 */
import { once } from 'node:events';
import { createServer } from 'node:http';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { answerApi } from './api.mjs';
import { answerControl, changeSettings } from './control/index.mjs';
import { StripeFailure } from './errors.mjs';
import { readBody } from './http.mjs';
import { answerPage } from './pages/index.mjs';
import { foundPlatform, openWorld, setEnvironmentEndpoint } from './world.mjs';

/**
 * @typedef {object} Options
 * @property {number} [port] 4310; 0 for a free one
 * @property {string} [dataDir] where state is kept between runs
 * @property {string} [webhookUrl] gets every event of the platform and of all connected accounts
 * @property {string} [webhookSecret] signs what goes to `webhookUrl`
 * @property {number} [settleAfterMs] until a bank debit settles or fails; negative: only when told to
 * @property {number} [returnAfterMs] from settlement to a late return or dispute
 * @property {number} [retryBaseMs] first pause before a refused webhook is sent again
 * @property {number} [webhookTimeoutMs]
 * @property {(line: string) => void} [log]
 */

/**
 * Starts the stand-in on 127.0.0.1. A folder serves one stand-in at a time.
 * @param {Options} [options]
 * @returns {Promise<{ url: string, port: number, platform: string, close: () => Promise<void> }>}
 */
export async function start(options = {}) {
  const log = options.log ?? ((line) => void process.stderr.write(`[stripe] ${line}\n`));
  const server = createServer();
  // The port comes first: whoever can't have it must not touch the file of whoever has.
  server.listen(options.port ?? 4310, '127.0.0.1');
  await once(server, 'listening');
  /** @type {(() => void) | undefined} */
  let closeWorld;
  const close = async () => {
    const ended = once(server, 'close');
    server.close();
    server.closeAllConnections();
    await ended;
    closeWorld?.();
  };
  try {
    const house = openWorld({ dataDir: path.resolve(options.dataDir ?? home), log });
    closeWorld = house.close;
    const { world } = house;
    const bound = server.address();
    const port = typeof bound === 'object' && bound !== null ? bound.port : 0;
    world.url = `http://127.0.0.1:${port}`;
    applyOptions(world, options);
    server.on('request', (request, response) => serve(world, options, request, response));
    house.look();
    return { url: world.url, port, platform: world.platform, close };
  } catch (error) {
    await close();
    throw error;
  }
}

const home = fileURLToPath(new URL('../../.data/stripe', import.meta.url));

/**
 * @param {import('./types.d.ts').World} world
 * @param {Options} options
 * @param {import('node:http').IncomingMessage} request
 * @param {import('node:http').ServerResponse} response
 */
function serve(world, options, request, response) {
  const reset = () => {
    world.store.clear();
    foundPlatform(world);
    applyOptions(world, options);
  };
  answer(world, request, response, reset).catch((error) => {
    world.log(error instanceof Error ? (error.stack ?? error.message) : String(error));
    response.destroy();
  });
}

/**
 * @param {import('./types.d.ts').World} world
 * @param {Options} options
 */
function applyOptions(
  world,
  { webhookUrl, webhookSecret, settleAfterMs, returnAfterMs, retryBaseMs, webhookTimeoutMs },
) {
  const given = {
    settle_after_ms: settleAfterMs,
    return_after_ms: returnAfterMs,
    retry_base_ms: retryBaseMs,
    webhook_timeout_ms: webhookTimeoutMs,
  };
  changeSettings(world, Object.fromEntries(Object.entries(given).filter(([, value]) => value !== undefined)));
  if ((webhookUrl === undefined) !== (webhookSecret === undefined))
    throw new Error('A webhook address and its secret go together');
  setEnvironmentEndpoint(
    world,
    webhookUrl !== undefined && webhookSecret !== undefined ? { url: webhookUrl, secret: webhookSecret } : undefined,
  );
}

/**
 * @param {import('./types.d.ts').World} world
 * @param {import('node:http').IncomingMessage} request
 * @param {import('node:http').ServerResponse} response
 * @param {() => void} reset
 */
async function answer(world, request, response, reset) {
  const body = await readBody(request);
  const pathname = (request.url ?? '/').split('?')[0] ?? '/';
  if (pathname === '/_control' || pathname.startsWith('/_control/'))
    return answerControl(world, request, response, body ?? '', reset);
  if (pathname.startsWith('/v1') || pathname.startsWith('/v2')) return answerApi(world, request, response, body);
  answerPage(world, request, response, body ?? '');
}

/**
 * @param {NodeJS.ProcessEnv} env
 * @returns {Options}
 */
function fromEnvironment(env) {
  const whole = (/** @type {string} */ name) => {
    const text = env[name];
    if (text === undefined || text === '') return undefined;
    if (!/^-?\d+$/.test(text))
      throw new StripeFailure(400, { type: 'configuration', message: `${name} must be a whole number, not "${text}"` });
    return Number(text);
  };
  const options = {
    port: whole('PORT'),
    dataDir: env['STRIPE_DATA_DIR'] || undefined,
    webhookUrl: env['STRIPE_WEBHOOK_URL'] || undefined,
    webhookSecret: env['STRIPE_WEBHOOK_SECRET'] || undefined,
    settleAfterMs: whole('STRIPE_SETTLE_AFTER_MS'),
    returnAfterMs: whole('STRIPE_RETURN_AFTER_MS'),
    retryBaseMs: whole('STRIPE_RETRY_BASE_MS'),
  };
  return /** @type {Options} */ (
    Object.fromEntries(Object.entries(options).filter(([, value]) => value !== undefined))
  );
}

async function main() {
  const standIn = await start(fromEnvironment(process.env));
  process.stdout.write(`Stripe stand-in on ${standIn.url}\n`);
  for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM'])) {
    process.once(signal, () => void standIn.close().then(() => process.exit(0)));
  }
}

if (process.argv[1] !== undefined && path.resolve(process.argv[1]) === fileURLToPath(import.meta.url)) {
  main().catch((error) => {
    const taken = error instanceof Error && 'code' in error && error.code === 'EADDRINUSE';
    process.stderr.write(
      `[stripe] ${taken ? `port ${process.env['PORT'] ?? 4310} is taken; set PORT` : error instanceof Error ? error.message : String(error)}\n`,
    );
    process.exit(1);
  });
}
