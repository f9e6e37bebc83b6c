import { setTimeout as pause } from 'node:timers/promises';
import { invalid, outage, StripeFailure, unauthorized } from './errors.mjs';
import { apiVersion } from './events.mjs';
import { expand } from './expand.mjs';
import { takeFault } from './faults.mjs';
import { parseForm } from './forms.mjs';
import { send } from './http.mjs';
import { inputHash, keyInUse, savedAnswer, savedId } from './idempotency.mjs';
import { newId } from './ids.mjs';
import { route } from './router.mjs';

/**
 * @typedef {import('./types.d.ts').World} World
 * @typedef {import('./types.d.ts').Form} Form
 * @typedef {import('node:http').IncomingMessage} IncomingMessage
 * @typedef {import('node:http').ServerResponse} ServerResponse
 * @typedef {{ status: number, text: string, headers?: Record<string, string> }} Answer
 * @typedef {{ request: string, method: string, path: string, form: Form, expand: string[], account: string, key: string | undefined,
 *   handler: import('./router.mjs').Handler, params: Record<string, string> }} Asked
 */

/** Keys whose first request is still at work, in this process. */
/** @type {WeakMap<World, Set<string>>} */
const atWork = new WeakMap();

/**
 * Everything under /v1.
 * @param {World} world
 * @param {IncomingMessage} request
 * @param {ServerResponse} response
 * @param {string | undefined} body
 */
export async function answerApi(world, request, response, body) {
  const id = newId('req', 14);
  const url = new URL(request.url ?? '/', 'http://stand-in');
  const method = request.method ?? 'GET';
  const reply = (/** @type {Answer} */ { status, text, headers }) =>
    send(response, status, text, { ...usualHeaders(request, id), ...headers });
  const fault = takeFault(world, method, url.pathname);
  try {
    if (fault?.mode === 'hang') return;
    if (fault?.mode === 'drop') return void request.socket.destroy();
    if (fault?.mode === 'error') throw outage(fault.status, 'An error occurred on our side. Please try again.');
    const asked = understand(world, request, url, body, id);
    const answer = await once(world, asked, fault);
    if (fault?.mode === 'hang_after') return;
    if (fault?.mode === 'drop_after') return void request.socket.destroy();
    reply(answer);
  } catch (error) {
    if (error instanceof StripeFailure) return reply({ status: error.status, text: written(error.body(id)) });
    world.log(`${method} ${url.pathname}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
    reply({ status: 500, text: written(outage(500, 'The stand-in made a mistake; see its log.').body(id)) });
  }
}

/**
 * @param {World} world
 * @param {IncomingMessage} request
 * @param {URL} url
 * @param {string | undefined} body
 * @param {string} id
 * @returns {Asked}
 */
function understand(world, request, url, body, id) {
  authenticate(request.headers.authorization);
  const method = request.method ?? 'GET';
  const found = route(method, url.pathname);
  if (body === undefined)
    throw new StripeFailure(413, { type: 'invalid_request_error', message: 'Request body is too large.' }, false);
  const type = request.headers['content-type'] ?? '';
  if (method === 'POST' && body !== '' && !type.startsWith('application/x-www-form-urlencoded')) {
    throw invalid(
      'Invalid request (check that your POST content type is application/x-www-form-urlencoded). If you have any questions, we can help at https://support.stripe.com/.',
    );
  }
  const { expand: paths = [], ...form } = parseForm(method === 'POST' ? body : url.search);
  if (!Array.isArray(paths) || !paths.every((p) => typeof p === 'string'))
    throw invalid('Invalid array', { param: 'expand' });
  const key = request.headers['idempotency-key'];
  return {
    request: id,
    method,
    path: url.pathname,
    form,
    expand: /** @type {string[]} */ (paths),
    account: accountOf(world, request.headers['stripe-account']),
    key: method === 'POST' && typeof key === 'string' && key !== '' ? key : undefined,
    ...found,
  };
}

/** @param {string | undefined} header */
function authenticate(header) {
  if (!header) {
    throw unauthorized(
      "You did not provide an API key. You need to provide your API key in the Authorization header, using Bearer auth (e.g. 'Authorization: Bearer YOUR_SECRET_KEY').",
    );
  }
  const [scheme, value = ''] = header.split(' ');
  const key =
    scheme?.toLowerCase() === 'basic' ? (Buffer.from(value, 'base64').toString('utf8').split(':')[0] ?? '') : value;
  if (/^[sr]k_live_/.test(key))
    throw unauthorized('This is the stand-in: a live key has no business here, and it should be rolled.');
  if (!/^[sr]k_test_\w{3,}$/.test(key))
    throw unauthorized(
      `Invalid API Key provided: ${key.slice(0, 8)}${'*'.repeat(Math.min(24, Math.max(0, key.length - 8)))}`,
    );
}

/**
 * @param {World} world
 * @param {string | string[] | undefined} header
 */
function accountOf(world, header) {
  if (header === undefined || header === '') return world.platform;
  const known =
    typeof header === 'string' &&
    (header === world.platform || world.store.transaction((tx) => tx.find('account', header)));
  if (known) return /** @type {string} */ (header);
  throw new StripeFailure(
    403,
    {
      type: 'invalid_request_error',
      code: 'account_invalid',
      message: `The provided key does not have access to account '${String(header)}' (or that account does not exist). Application access may have been revoked.`,
    },
    false,
  );
}

/**
 * Performs the call at most once per idempotency key.
 * @param {World} world
 * @param {Asked} asked
 * @param {import('./types.d.ts').Fault | undefined} fault
 * @returns {Promise<Answer>}
 */
async function once(world, asked, fault) {
  const { key, account, method, path, form } = asked;
  const slow = fault?.mode === 'slow' ? fault.ms : 0;
  if (key === undefined) {
    await pause(slow);
    return perform(world, asked, undefined, fault);
  }
  const id = savedId(account, key);
  const input = inputHash(method, path, { ...form, expand: asked.expand });
  const saved = savedAnswer(world.store, id, { key, input, path, nowMs: world.nowMs() });
  if (saved)
    return {
      status: saved.status,
      text: saved.body,
      headers: { 'Idempotent-Replayed': 'true', 'Original-Request': saved.request },
    };
  const working = atWork.get(world) ?? new Set();
  atWork.set(world, working);
  if (working.has(id)) throw keyInUse(key);
  working.add(id);
  try {
    if (slow > 0) await pause(slow);
    return perform(world, asked, { id, input }, fault);
  } finally {
    working.delete(id);
  }
}

/**
 * The act and the answer that its key remembers, in one transaction. A refusal undoes the act and is remembered too,
 * unless it came before any work began.
 * @param {World} world
 * @param {Asked} asked
 * @param {{ id: string, input: string } | undefined} key
 * @param {import('./types.d.ts').Fault | undefined} fault
 * @returns {Answer}
 */
function perform(world, asked, key, fault) {
  const failed = {
    status: fault?.status ?? 500,
    text: written(outage(500, 'An unknown error occurred').body(asked.request)),
    headers: { 'Stripe-Should-Retry': 'false' },
  };
  const save = (/** @type {import('./store.mjs').Tx} */ tx, /** @type {Answer} */ { status, text }) => {
    if (key)
      tx.put('key', asked.account, {
        id: key.id,
        input: key.input,
        path: asked.path,
        status,
        body: text,
        request: asked.request,
        at: world.nowMs(),
      });
  };
  const origin = { id: asked.request, idempotency_key: asked.key ?? null };
  if (fault?.mode === 'error_stored') {
    world.store.transaction((tx) => save(tx, failed));
    return failed;
  }
  try {
    return world.act(
      asked.account,
      (act) => {
        const body = asked.handler({ act, form: asked.form, params: asked.params, path: asked.path });
        const answer =
          fault?.mode === 'error_after' ? failed : { status: 200, text: written(expand(act, body, asked.expand)) };
        save(act.tx, answer);
        return answer;
      },
      asked.method === 'GET' ? undefined : origin,
    );
  } catch (error) {
    if (error instanceof StripeFailure && error.began) {
      world.store.transaction((tx) => save(tx, { status: error.status, text: written(error.body(asked.request)) }));
    }
    throw error;
  }
}

/** @param {object} body */
const written = (body) => `${JSON.stringify(body, null, 2)}\n`;

/**
 * @param {IncomingMessage} request
 * @param {string} id
 */
function usualHeaders(request, id) {
  /** @type {Record<string, string>} */
  const headers = { 'Content-Type': 'application/json', 'Request-Id': id, 'Stripe-Version': apiVersion };
  for (const name of ['Idempotency-Key', 'Stripe-Account']) {
    const value = request.headers[name.toLowerCase()];
    // Node reads header bytes as Latin-1; what it can't write back is left out.
    if (typeof value === 'string' && value !== '' && /^[\x20-\x7e]+$/.test(value)) headers[name] = value;
  }
  return headers;
}
