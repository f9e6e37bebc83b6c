import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:http';
import os from 'node:os';
import path from 'node:path';
import Stripe from 'stripe';
import { start } from '../../stripe/server.mjs';

/** @typedef {{ raw: string, signature: string, event: import('stripe').Stripe.Event, status: number }} Received */

export const webhookSecret = 'whsec_demo_for_tests_only';

/** @param {string} prefix */
export const tempFolder = (prefix = 'stand-in-') => mkdtempSync(path.join(os.tmpdir(), prefix));

/**
 * A receiver of webhooks that keeps what it got and answers as it is told.
 * @param {(call: number) => number} [answer] status for the nth call, counted from 1
 */
export async function receiver(answer = () => 200) {
  /** @type {Received[]} */
  const received = [];
  const server = createServer((request, response) => {
    let raw = '';
    request.setEncoding('utf8').on('data', (/** @type {string} */ part) => (raw += part));
    request.on('end', () => {
      const status = answer(received.length + 1);
      received.push({
        raw,
        signature: String(request.headers['stripe-signature'] ?? ''),
        event: JSON.parse(raw),
        status,
      });
      response.writeHead(status).end();
    });
  });
  await new Promise((done) => server.listen(0, '127.0.0.1', () => done(undefined)));
  const bound = server.address();
  const port = typeof bound === 'object' && bound !== null ? bound.port : 0;
  return {
    url: `http://127.0.0.1:${port}/hook`,
    received,
    types: () => received.map((r) => r.event.type),
    close: () => new Promise((done) => server.closeAllConnections() ?? server.close(() => done(undefined))),
  };
}

/**
 * The real SDK, pointed at the stand-in by configuration alone.
 * @param {number} port
 * @param {import('stripe').Stripe.StripeConfig} [more]
 */
export const sdk = (port, more = {}) =>
  new Stripe('sk_test_demo_key', {
    host: '127.0.0.1',
    port,
    protocol: 'http',
    telemetry: false,
    maxNetworkRetries: 0,
    ...more,
  });

/**
 * A stand-in with an account that can take payments, in a folder of its own.
 * @param {import('../../stripe/server.mjs').Options} [options] debits settle only when told to, unless it says otherwise
 */
export async function house(options = {}) {
  const dataDir = options.dataDir ?? tempFolder();
  const standIn = await start({
    port: 0,
    dataDir,
    settleAfterMs: -1,
    returnAfterMs: -1,
    retryBaseMs: 20,
    log: () => undefined,
    ...options,
  });
  const stripe = sdk(standIn.port);
  const control = (/** @type {string} */ where, /** @type {object} */ wish = {}, method = 'POST') =>
    call(standIn.url, where, wish, method);
  const account = await stripe.accounts.create({
    type: 'express',
    country: 'US',
    email: 'books@fernhollow.example',
    business_profile: { name: 'Fern Hollow Builders' },
    capabilities: {
      card_payments: { requested: true },
      transfers: { requested: true },
      us_bank_account_ach_payments: { requested: true },
    },
  });
  await control(`accounts/${account.id}/onboard`);
  const on = { stripeAccount: account.id };
  return {
    ...standIn,
    stripe,
    account,
    on,
    control,
    /** @param {Partial<import('stripe').Stripe.Checkout.SessionCreateParams>} [more] */
    checkout: (more = {}) => stripe.checkout.sessions.create(sessionParams(more), on),
    deliveries: async (query = '') => (await call(standIn.url, `deliveries${query}`, undefined, 'GET')).data,
    /** @param {string} id */
    intent: (id) => stripe.paymentIntents.retrieve(id, {}, on),
    async stop() {
      await standIn.close();
      if (options.dataDir === undefined) rmSync(dataDir, { recursive: true, force: true });
    },
  };
}

/**
 * @param {Partial<import('stripe').Stripe.Checkout.SessionCreateParams>} [more]
 * @returns {import('stripe').Stripe.Checkout.SessionCreateParams}
 */
export const sessionParams = (more = {}) => ({
  mode: 'payment',
  allowed_payment_method_types: ['us_bank_account', 'card'],
  line_items: [
    {
      quantity: 1,
      price_data: { currency: 'usd', unit_amount: 1_250_000, product_data: { name: 'Draw 2, your own share' } },
    },
  ],
  customer_email: 'owner@maple.example',
  success_url: 'http://127.0.0.1:4300/paid?session={CHECKOUT_SESSION_ID}',
  cancel_url: 'http://127.0.0.1:4300/not-paid',
  metadata: { attempt: 'attempt-1' },
  payment_intent_data: { metadata: { attempt: 'attempt-1' } },
  ...more,
});

/**
 * @param {string} url
 * @param {string} where
 * @param {object | undefined} wish
 * @param {string} method
 */
export async function call(url, where, wish, method) {
  const response = await fetch(`${url}/_control/${where}`, {
    method,
    ...(wish === undefined || method === 'GET'
      ? {}
      : { body: JSON.stringify(wish), headers: { 'Content-Type': 'application/json' } }),
  });
  const body = /** @type {any} */ (await response.json());
  if (!response.ok) throw new Error(`${where}: ${JSON.stringify(body)}`);
  return body;
}

/**
 * The hosted page's form, as a browser without script sends it.
 * @param {string | null} url
 * @param {Record<string, string>} fields
 */
export const submit = (url, fields) =>
  fetch(String(url), { method: 'POST', body: new URLSearchParams({ step: 'pay', ...fields }), redirect: 'manual' });

/**
 * Waits until a check holds.
 * @template T
 * @param {() => T | Promise<T>} check
 * @param {number} [within] milliseconds
 * @returns {Promise<NonNullable<T>>}
 */
export async function eventually(check, within = 5000) {
  const end = Date.now() + within;
  for (;;) {
    const found = await check();
    if (found) return found;
    if (Date.now() > end) throw new Error(`It didn't happen within ${within} ms: ${check.toString()}`);
    await new Promise((done) => setTimeout(done, 10));
  }
}

/**
 * What a call is refused with.
 * @param {Promise<unknown>} work
 * @returns {Promise<import('stripe').Stripe.errors.StripeError>}
 */
export const refusal = (work) =>
  work.then(
    () => {
      throw new Error('It was not refused');
    },
    (error) => error,
  );
