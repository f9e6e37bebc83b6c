import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import Stripe from 'stripe';
import { eventually, house, refusal, sdk, sessionParams, submit } from './helpers.mjs';

/** @type {Awaited<ReturnType<typeof house>>} */
let h;
beforeAll(async () => {
  h = await house();
});
afterAll(() => h.stop());

/**
 * A raw call, for what the SDK would not send.
 * @param {string} path
 * @param {RequestInit} [init]
 */
const raw = async (path, init = {}) => {
  const response = await fetch(`${h.url}${path}`, {
    ...init,
    headers: { Authorization: 'Bearer sk_test_demo_key', ...init.headers },
  });
  return { status: response.status, headers: response.headers, body: /** @type {any} */ (await response.json()) };
};
const form = { 'Content-Type': 'application/x-www-form-urlencoded' };

describe('idempotency keys', () => {
  it('give the first answer again, and the act happens once', async () => {
    const options = { ...h.on, idempotencyKey: 'replay-1' };
    const first = await h.stripe.checkout.sessions.create(sessionParams(), options);
    const second = await h.stripe.checkout.sessions.create(sessionParams(), options);
    expect(second).toEqual(first);
    expect(first.lastResponse.headers['idempotent-replayed']).toBeUndefined();
    expect(second.lastResponse.headers['idempotent-replayed']).toBe('true');
    expect(second.lastResponse.headers['original-request']).toBe(first.lastResponse.requestId);
    const sessions = await h.stripe.checkout.sessions.list({ limit: 100 }, h.on);
    expect(sessions.data.filter((s) => s.id === first.id)).toHaveLength(1);
  });

  it('refuse other parameters and another endpoint', async () => {
    const options = { ...h.on, idempotencyKey: 'mismatch-1' };
    await h.stripe.checkout.sessions.create(sessionParams(), options);
    const refused = await refusal(
      h.stripe.checkout.sessions.create(sessionParams({ client_reference_id: 'other' }), options),
    );
    expect(refused).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect(refused).toMatchObject({ rawType: 'idempotency_error', statusCode: 400 });
    const elsewhere = await refusal(h.stripe.refunds.create({ charge: 'ch_none' }, options));
    expect(elsewhere.message).toContain('same endpoint');
  });

  it('stand for one account each, and for a day', async () => {
    const key = { idempotencyKey: 'scoped-1' };
    const here = await h.stripe.checkout.sessions.create(sessionParams(), { ...h.on, ...key });
    const platform = await h.stripe.checkout.sessions.create(sessionParams(), key);
    expect(platform.id).not.toBe(here.id);
    await h.control('clock', { advance_ms: 23 * 3_600_000 });
    expect((await h.stripe.checkout.sessions.create(sessionParams(), { ...h.on, ...key })).id).toBe(here.id);
    await h.control('clock', { advance_ms: 3_600_000 });
    expect((await h.stripe.checkout.sessions.create(sessionParams(), { ...h.on, ...key })).id).not.toBe(here.id);
    await eventually(async () => (await h.stripe.checkout.sessions.retrieve(here.id, {}, h.on)).status === 'expired');
  });

  it('remember a refusal that came after work had begun, not a parameter that was wrong', async () => {
    const wrong = { ...h.on, idempotencyKey: 'validation-1' };
    const tooSmall = sessionParams({
      line_items: [{ quantity: 1, price_data: { currency: 'usd', unit_amount: 1, product_data: { name: 'Nail' } } }],
    });
    expect((await refusal(h.stripe.checkout.sessions.create(tooSmall, wrong))).code).toBe('amount_too_small');
    expect((await h.stripe.checkout.sessions.create(sessionParams(), wrong)).status).toBe('open');
    const late = { ...h.on, idempotencyKey: 'begun-1' };
    const session = await h.checkout();
    await submit(session.url, { outcome: 'settles' });
    const intent = String((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).payment_intent);
    await refusal(h.stripe.refunds.create({ payment_intent: intent }, late));
    await h.control(`payments/${intent}/settle`);
    const replayed = await refusal(h.stripe.refunds.create({ payment_intent: intent }, late));
    expect(replayed.message).toContain('does not have a successful charge');
    expect(replayed.headers?.['idempotent-replayed']).toBe('true');
  });

  it('refuse a second request while the first is at work', async () => {
    await h.control('faults', { mode: 'slow', ms: 300, times: 1 });
    const options = { ...h.on, idempotencyKey: 'busy-1' };
    const first = h.stripe.checkout.sessions.create(sessionParams(), options);
    await eventually(
      async () => /** @type {any} */ (await (await fetch(`${h.url}/_control`)).json()).faults.length === 0,
    );
    const second = await refusal(h.stripe.checkout.sessions.create(sessionParams(), options));
    expect(second).toMatchObject({ code: 'idempotency_key_in_use', statusCode: 409 });
    expect((await first).status).toBe('open');
  });
});

describe('refusals', () => {
  it('come in the published body, with a request id', async () => {
    const { status, headers, body } = await raw('/v1/payment_intents/pi_none');
    expect(status).toBe(404);
    expect(headers.get('request-id')).toMatch(/^req_\w{14}$/);
    expect(body).toEqual({
      error: {
        type: 'invalid_request_error',
        code: 'resource_missing',
        message: "No such payment_intent: 'pi_none'",
        param: 'intent',
        doc_url: 'https://stripe.com/docs/error-codes/resource-missing',
        request_log_url: expect.stringContaining(String(headers.get('request-id'))),
      },
    });
  });

  it('turn away a missing, misshapen or live key', async () => {
    for (const Authorization of ['', 'Bearer pk_test_demo', 'Bearer sk_live_0123456789']) {
      const { status, body } = await raw('/v1/balance', { headers: { Authorization } });
      expect([status, body.error.type]).toEqual([401, 'invalid_request_error']);
    }
    const basic = `Basic ${Buffer.from('sk_test_demo_key:').toString('base64')}`;
    expect((await raw('/v1/balance', { headers: { Authorization: basic } })).status).toBe(200);
  });

  it('name the parameter that is unknown, missing or wrong', async () => {
    const refused = async (/** @type {object} */ more) => {
      const e = await refusal(h.stripe.checkout.sessions.create(/** @type {any} */ (sessionParams(more)), h.on));
      return [e.statusCode, e.code, e.param];
    };
    expect(await refused({ colour: 'red' })).toEqual([400, 'parameter_unknown', 'colour']);
    // The SDK's changelog: API version 2026-10-28 removed it from the creation of a session.
    expect(await refused({ payment_method_types: ['card'] })).toEqual([
      400,
      'parameter_unknown',
      'payment_method_types',
    ]);
    expect(await refused({ success_url: undefined })).toEqual([400, 'parameter_missing', 'success_url']);
    expect(await refused({ success_url: 'nowhere' })).toEqual([400, 'url_invalid', 'success_url']);
    expect(await refused({ customer_email: 'nobody' })).toEqual([400, 'email_invalid', 'customer_email']);
    const item = (/** @type {object} */ change) => ({
      line_items: [
        { quantity: 1, price_data: { currency: 'usd', unit_amount: 5000, product_data: { name: 'x' }, ...change } },
      ],
    });
    expect(await refused(item({ unit_amount: 10.5 }))).toEqual([
      400,
      'parameter_invalid_integer',
      'line_items[0][price_data][unit_amount]',
    ]);
    expect(await refused(item({ unit_amount: 49 }))).toEqual([400, 'amount_too_small', 'line_items']);
    expect(await refused({ line_items: [1, 2].map(() => item({ unit_amount: 99_999_999 }).line_items[0]) })).toEqual([
      400,
      'amount_too_large',
      'line_items',
    ]);
    expect(await refused(item({ product_data: { name: 'x', size: '1' } }))).toEqual([
      400,
      'parameter_unknown',
      'line_items[0][price_data][product_data][size]',
    ]);
    expect(await refused({ metadata: { ['k'.repeat(41)]: 'v' } })).toEqual([400, undefined, 'metadata']);
    expect(await refused({ metadata: { k: 'v'.repeat(501) } })).toEqual([400, undefined, 'metadata[k]']);
    expect(await refused({ expires_at: Math.floor(Date.now() / 1000) })).toEqual([400, undefined, 'expires_at']);
  });

  it('say so for an unknown address, another content type and a property that has nothing to expand', async () => {
    expect((await raw('/v1/teapots')).body.error.message).toContain('Unrecognized request URL (GET: /v1/teapots)');
    const json = await raw('/v1/refunds', {
      method: 'POST',
      body: '{}',
      headers: { 'Content-Type': 'application/json' },
    });
    expect(json).toMatchObject({
      status: 400,
      body: { error: { message: expect.stringContaining('application/x-www-form-urlencoded') } },
    });
    const session = await h.checkout();
    const refused = await refusal(h.stripe.checkout.sessions.retrieve(session.id, { expand: ['amount_total'] }, h.on));
    expect(refused.message).toBe('This property cannot be expanded (amount_total).');
    expect(
      (await refusal(h.stripe.checkout.sessions.retrieve(session.id, { expand: ['a.b.c.d.e'] }, h.on))).message,
    ).toContain('more than 4 levels');
  });

  it('keep odd names and broken nesting from doing harm', async () => {
    const body = 'metadata[__proto__]=x&metadata[constructor]=y&url=http://127.0.0.1:9/&enabled_events[]=*';
    const made = await raw('/v1/webhook_endpoints', { method: 'POST', body, headers: form });
    expect(made.status).toBe(200);
    expect(Object.keys(made.body.metadata).sort()).toEqual(['__proto__', 'constructor']);
    expect(/** @type {any} */ ({}).x).toBeUndefined();
    for (const broken of ['a[b=1', 'a=1&a[b]=2', '[a]=1']) {
      expect((await raw('/v1/refunds', { method: 'POST', body: broken, headers: form })).status).toBe(400);
    }
  });
});

describe('accounts', () => {
  it('see only what is theirs', async () => {
    const session = await h.checkout();
    await submit(session.url, { outcome: 'card_paid' });
    const intent = String((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).payment_intent);
    const other = await h.stripe.accounts.create({ type: 'express' });
    const there = { stripeAccount: other.id };
    const calls = (/** @type {{ stripeAccount: string } | undefined} */ on) => [
      h.stripe.checkout.sessions.retrieve(session.id, {}, on),
      h.stripe.paymentIntents.retrieve(intent, {}, on),
      h.stripe.refunds.create({ payment_intent: intent }, on),
    ];
    for (const on of [there, undefined]) {
      for (const work of calls(on))
        expect(await refusal(work)).toMatchObject({ code: 'resource_missing', statusCode: 404 });
      expect((await h.stripe.charges.list({}, on)).data).toEqual([]);
      expect((await h.stripe.events.list({ types: ['charge.succeeded'] }, on)).data).toEqual([]);
    }
    const unknown = await refusal(h.stripe.balance.retrieve({}, { stripeAccount: 'acct_unknown' }));
    expect(unknown).toMatchObject({ code: 'account_invalid', statusCode: 403 });
    expect(await refusal(h.stripe.accounts.retrieve(h.account.id, {}, there))).toMatchObject({ statusCode: 403 });
  });

  it('take payments only after onboarding, whose link works once', async () => {
    const fresh = await h.stripe.accounts.create({
      controller: {
        fees: { payer: 'application' },
        losses: { payments: 'application' },
        stripe_dashboard: { type: 'express' },
      },
      capabilities: { us_bank_account_ach_payments: { requested: true } },
    });
    expect(fresh).toMatchObject({
      capabilities: { us_bank_account_ach_payments: 'inactive' },
      charges_enabled: false,
      details_submitted: false,
      type: 'none',
    });
    const on = { stripeAccount: fresh.id };
    const early = await refusal(h.stripe.checkout.sessions.create(sessionParams(), on));
    expect(early.message).toContain('cannot currently make charges');
    const link = await h.stripe.accountLinks.create({
      account: fresh.id,
      type: 'account_onboarding',
      refresh_url: 'http://127.0.0.1:4300/again',
      return_url: 'http://127.0.0.1:4300/back',
    });
    expect(await (await fetch(link.url)).text()).toContain('Stand-in payment page. No money moves.');
    const done = await submit(link.url, { step: 'finish' });
    expect([done.status, done.headers.get('location')]).toEqual([303, 'http://127.0.0.1:4300/back']);
    expect(await h.stripe.accounts.retrieve(fresh.id)).toMatchObject({
      charges_enabled: true,
      details_submitted: true,
      payouts_enabled: true,
    });
    const again = await fetch(link.url, { redirect: 'manual' });
    expect(again.headers.get('location')).toBe('http://127.0.0.1:4300/again');
    const [event] = (await h.stripe.events.list({ type: 'account.updated' }, on)).data;
    expect(event).toMatchObject({
      account: fresh.id,
      data: { object: { charges_enabled: true }, previous_attributes: { charges_enabled: false } },
    });
    const session = await h.stripe.checkout.sessions.create(sessionParams(), on);
    expect(session.payment_method_types).toEqual(['us_bank_account']); // it never asked for cards
    await h.control(`accounts/${fresh.id}/restrict`);
    expect((await h.stripe.accounts.retrieve(fresh.id)).charges_enabled).toBe(false);
  });
});

describe('an outage', () => {
  it('answers 500 without acting, and the key is free for another try', async () => {
    await h.control('faults', { mode: 'error', path: '/v1/checkout', times: 1 });
    const key = { ...h.on, idempotencyKey: 'outage-1' };
    expect(await refusal(h.stripe.checkout.sessions.create(sessionParams(), key))).toMatchObject({
      statusCode: 500,
      rawType: 'api_error',
    });
    expect((await h.stripe.checkout.sessions.create(sessionParams(), key)).status).toBe('open');
  });

  it('stores a 500 under the key although the session was made, which a look-up finds', async () => {
    await h.control('faults', { mode: 'error_after', method: 'POST', times: 1 });
    const key = { ...h.on, idempotencyKey: 'outage-3' };
    const params = sessionParams({ client_reference_id: 'unclear-1' });
    for (let i = 0; i < 2; i += 1)
      expect((await refusal(h.stripe.checkout.sessions.create(params, key))).statusCode).toBe(500);
    const found = (await h.stripe.checkout.sessions.list({ limit: 100 }, h.on)).data.filter(
      (s) => s.client_reference_id === 'unclear-1',
    );
    expect(found).toHaveLength(1);
  });

  it('drops the connection after acting; the SDK tries once more and gets the first answer', async () => {
    await h.control('faults', { mode: 'drop_after', method: 'POST', times: 1 });
    const session = await h.stripe.checkout.sessions.create(sessionParams({ client_reference_id: 'dropped-1' }), h.on);
    expect(session.lastResponse.headers['idempotent-replayed']).toBe('true');
    const found = (await h.stripe.checkout.sessions.list({ limit: 100 }, h.on)).data.filter(
      (s) => s.client_reference_id === 'dropped-1',
    );
    expect(found.map((s) => s.id)).toEqual([session.id]);
  });

  it('hangs until the caller gives up, with and without having acted', async () => {
    const patient = sdk(h.port, { timeout: 150 });
    const sessions = async (/** @type {string} */ reference) =>
      (await h.stripe.checkout.sessions.list({ limit: 100 }, h.on)).data.filter(
        (s) => s.client_reference_id === reference,
      ).length;
    for (const [mode, made] of /** @type {const} */ ([
      ['hang', 0],
      ['hang_after', 1],
    ])) {
      await h.control('faults', { mode, method: 'POST', times: 1 });
      const late = await refusal(patient.checkout.sessions.create(sessionParams({ client_reference_id: mode }), h.on));
      expect(late).toBeInstanceOf(Stripe.errors.StripeConnectionError);
      expect(await sessions(mode)).toBe(made);
    }
  });

  it('ends when it is lifted, and misspelled controls are refused', async () => {
    await h.control('faults', { mode: 'error', status: 503 });
    expect((await refusal(h.stripe.balance.retrieve({}, h.on))).statusCode).toBe(503);
    await h.control('faults', {}, 'DELETE');
    expect((await h.stripe.balance.retrieve({}, h.on)).object).toBe('balance');
    await expect(h.control('faults', { mode: 'eror' })).rejects.toThrow('mode must be one of');
    await expect(h.control('faults', { mode: 'error', time: 1 })).rejects.toThrow('Unknown field time');
    await expect(h.control('payments/pi_none/settle')).rejects.toThrow('There is no payment_intent pi_none');
  });

  it('leaves nothing behind after a reset but the settings it was started with', async () => {
    await h.control('settings', { search_lag_ms: 5 });
    await h.control('reset');
    expect((await h.stripe.accounts.list()).data).toEqual([]);
    const after = await (await fetch(`${h.url}/_control`)).json();
    expect(after).toMatchObject({
      counts: { charge: 0, event: 0 },
      settings: { search_lag_ms: 0, settle_after_ms: -1 },
    });
  });
});
