import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';
import { eventually, house, receiver, submit, webhookSecret } from './helpers.mjs';

const published = fileURLToPath(new URL('../../../../shared/references/stripe-schemas.json', import.meta.url));
const there = existsSync(published);

/**
 * Where the SDK's types of 2026-10-28 and the published schemas of 2023-08-16 (github stripe/openapi) part, the types
 * decide. Each difference is listed; any other one fails.
 * @type {Array<{ at: RegExp, why: string }>}
 */
const accepted = [{ at: /payment_intent\/cancellation_reason enum/, why: 'expired is new' }];

/** What no published schema covers: the SDK's types, checked by tsc, are the only measure. */
const uncovered = ['webhook_endpoint', 'balance', 'login_link'];

if (!there) {
  // Jest says nothing of a file in which all is skipped, so the reason is said here.
  console.warn(
    `Skipped: the published schemas are missing beside the repository (${published.split('/').slice(-3).join('/')})`,
  );
  describe('the published schemas', () => {
    it.skip('were not compared: they are missing beside the repository', () => undefined);
  });
}

(there ? describe : describe.skip)('every object that the stand-in emits', () => {
  const require = createRequire(import.meta.url);
  const Ajv = /** @type {any} */ (require('ajv')).default;
  /** @type {Awaited<ReturnType<typeof receiver>>} */
  let hook;
  /** @type {Awaited<ReturnType<typeof house>>} */
  let h;
  /** @type {any} */
  let ajv;
  /** @type {Map<string, object[]>} */
  const seen = new Map();
  /** @param {any} object */
  const note = (object) => {
    const kind = object.object === 'list' || object.object === 'search_result' ? undefined : object.object;
    if (kind === undefined) return object.data.forEach(note);
    seen.set(kind, [...(seen.get(kind) ?? []), object]);
  };
  const differences = (/** @type {string} */ kind, /** @type {object} */ object) => {
    const check = ajv.getSchema(`stripe-subset#/definitions/${kind}`);
    if (check(object)) return [];
    const errors = /** @type {any[]} */ (check.errors);
    // Of several branches the one that fits best is meant: its errors lie deeper than "must be a text" or "must be null".
    const deeper = (/** @type {any} */ e) => errors.some((o) => o.instancePath.startsWith(`${e.instancePath}/`));
    return (
      errors
        .filter((e) => e.keyword !== 'type' || !deeper(e))
        .map(
          (/** @type {any} */ e) => `${kind}${e.instancePath} ${e.keyword}: ${e.message} ${JSON.stringify(e.params)}`,
        )
        // Around every broken branch Ajv reports the branching itself; the branch says more.
        .filter((/** @type {string} */ text) => !/ (anyOf|oneOf):/.test(text))
    );
  };

  /** Wire bodies, not the SDK's objects: it turns some texts into classes. */
  const read = async (/** @type {string} */ path, /** @type {string | undefined} */ account) => {
    const response = await fetch(`${h.url}${path}`, {
      headers: { Authorization: 'Bearer sk_test_demo_key', ...(account ? { 'Stripe-Account': account } : {}) },
    });
    const body = /** @type {any} */ (await response.json());
    expect([path, response.status]).toEqual([path, 200]);
    return body;
  };

  beforeAll(async () => {
    ajv = new Ajv({ strict: false, allErrors: true, validateFormats: false });
    ajv.addSchema(JSON.parse(readFileSync(published, 'utf8')), 'stripe-subset');
    hook = await receiver();
    h = await house({ webhookUrl: hook.url, webhookSecret });
    const link = await h.stripe.accountLinks.create({
      account: h.account.id,
      type: 'account_onboarding',
      refresh_url: 'http://127.0.0.1:4300/a',
      return_url: 'http://127.0.0.1:4300/b',
    });
    note(JSON.parse(JSON.stringify(link)));
    note(JSON.parse(JSON.stringify(await h.stripe.accounts.createLoginLink(h.account.id))));
    await live();
    const inside = [
      '/v1/checkout/sessions?limit=100&expand[]=data.line_items&expand[]=data.payment_intent.latest_charge',
      '/v1/payment_intents?limit=100',
      '/v1/charges?limit=100&expand[]=data.refunds&expand[]=data.balance_transaction',
      '/v1/refunds?limit=100',
      '/v1/disputes?limit=100',
      '/v1/balance_transactions?limit=100',
      '/v1/payouts?limit=100',
      '/v1/events?limit=100',
      '/v1/balance',
    ];
    for (const path of inside) note(await read(path, h.account.id));
    for (const path of ['/v1/accounts', '/v1/application_fees', '/v1/webhook_endpoints', '/v1/balance_transactions'])
      note(await read(path, undefined));
    const methods = new Set((seen.get('charge') ?? []).map((c) => /** @type {any} */ (c).payment_method));
    for (const id of methods) note(await read(`/v1/payment_methods/${id}`, h.account.id));
  });
  afterAll(async () => {
    await h?.stop();
    await hook?.close();
  });

  /** One of each thing that can befall a payment. */
  const live = async () => {
    /** @type {string[]} */
    const intents = [];
    for (const outcome of ['settles', 'fails', 'returned', 'disputed', 'card_paid', 'card_disputed', 'settles']) {
      const session = await h.checkout({
        payment_intent_data: { application_fee_amount: 250, metadata: { attempt: outcome } },
      });
      if (outcome === 'card_paid') await submit(session.url, { outcome: 'card_declined' });
      await submit(session.url, { outcome });
      intents.push(String((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).payment_intent));
    }
    const [settles = '', fails = '', returned = '', disputed = '', card = '', cardDisputed = ''] = intents;
    for (const id of [settles, returned, disputed]) await h.control(`payments/${id}/settle`);
    await h.control(`payments/${fails}/fail`, { code: 'R03' });
    await h.control(`payments/${returned}/return`, { code: 'R01' });
    await h.control(`disputes/${(await h.control(`payments/${disputed}/dispute`)).id}/lost`);
    await h.control(`disputes/${(await h.control(`payments/${cardDisputed}/dispute`)).id}/won`);
    const part = await h.stripe.refunds.create(
      { payment_intent: settles, amount: 100, reason: 'requested_by_customer' },
      h.on,
    );
    await h.control(`refunds/${part.id}/fail`);
    await h.stripe.refunds.create({ payment_intent: card }, h.on);
    await h.stripe.paymentIntents.cancel(fails, {}, h.on);
    const declined = await h.checkout();
    await submit(declined.url, { outcome: 'card_declined' });
    await h.stripe.checkout.sessions.expire(declined.id, {}, h.on);
    await h.checkout();
    await h.stripe.accounts.create({ type: 'standard', business_type: 'company' });
    await h.control(`accounts/${h.account.id}/payout`);
    await eventually(async () => (await h.deliveries('?state=waiting')).length === 0);
    for (const { raw } of hook.received) note(JSON.parse(raw));
  };

  const kinds = [
    'account',
    'account_link',
    'application_fee',
    'balance_transaction',
    'charge',
    'checkout.session',
    'dispute',
    'event',
    'payment_intent',
    'payment_method',
    'payout',
    'refund',
  ];

  it.each(kinds)('%s follows the published schema, but for what is listed', (kind) => {
    const objects = seen.get(kind) ?? [];
    expect(objects.length).toBeGreaterThan(0);
    const found = new Set(objects.flatMap((o) => differences(kind, o)));
    expect([...found].filter((text) => !accepted.some((a) => a.at.test(text)))).toEqual([]);
  });

  it('is of a kind that is compared or known to have no schema', () => {
    expect([...seen.keys()].filter((k) => !kinds.includes(k)).sort()).toEqual([...uncovered].sort());
  });

  it('carried by an event follows its own schema', () => {
    const inside = (seen.get('event') ?? []).map((e) => /** @type {any} */ (e).data.object);
    expect(new Set(inside.map((o) => o.object)).size).toBeGreaterThan(6);
    const found = new Set(inside.flatMap((o) => differences(o.object, o)));
    expect([...found].filter((text) => !accepted.some((a) => a.at.test(text)))).toEqual([]);
  });

  it('differs where it is listed, so that the list holds nothing stale', () => {
    const found = kinds.flatMap((kind) => (seen.get(kind) ?? []).flatMap((o) => differences(kind, o)));
    for (const { at, why } of accepted) expect([why, found.some((text) => at.test(text))]).toEqual([why, true]);
  });

  it('would be caught if it were wrong', () => {
    const [charge] = seen.get('charge') ?? [];
    expect(differences('charge', { ...charge, status: 'gone', amount: '5' })).toHaveLength(2);
  });
});
