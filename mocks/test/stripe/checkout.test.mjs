import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { eventually, house, receiver, refusal, submit, webhookSecret } from './helpers.mjs';

describe('a payment by Checkout', () => {
  /** @type {Awaited<ReturnType<typeof receiver>>} */
  let hook;
  /** @type {Awaited<ReturnType<typeof house>>} */
  let h;
  beforeAll(async () => {
    hook = await receiver();
    h = await house({ webhookUrl: hook.url, webhookSecret });
  });
  afterAll(async () => {
    await h.stop();
    await hook.close();
  });

  /** Pays a fresh session on its page; answers with the session as it stands then. */
  const paid = async (/** @type {Record<string, string>} */ fields, /** @type {object} */ more = {}) => {
    const session = await h.checkout(more);
    const answer = await submit(session.url, fields);
    expect(answer.status).toBe(303);
    expect(answer.headers.get('location')).toBe(`http://127.0.0.1:4300/paid?session=${session.id}`);
    const after = await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on);
    return { session: after, intent: String(after.payment_intent) };
  };
  const typesFor = (/** @type {string} */ intent) =>
    hook.received.filter((r) => r.raw.includes(intent)).map((r) => r.event.type);
  /** No order is promised, so none is expected. */
  const arrived = (/** @type {string} */ intent, /** @type {string[]} */ types) =>
    eventually(() => types.every((t) => typesFor(intent).some((got) => got === t)));

  it('opens without a PaymentIntent and shows the sum, the address and when it ends', async () => {
    const session = await h.checkout();
    expect(session).toMatchObject({
      amount_total: 1_250_000,
      payment_intent: null,
      payment_status: 'unpaid',
      status: 'open',
    });
    expect(session.expires_at - session.created).toBe(24 * 60 * 60);
    expect(session.url).toBe(`${h.url}/pay/${session.id}`);
  });

  it('completes a bank debit unpaid, then settles it, each step by a signed event of the account', async () => {
    const { session, intent } = await paid({ outcome: 'settles' });
    expect(session).toMatchObject({ payment_status: 'unpaid', status: 'complete', url: null });
    expect((await h.intent(intent)).status).toBe('processing');
    await arrived(intent, [
      'payment_intent.created',
      'charge.pending',
      'payment_intent.processing',
      'checkout.session.completed',
    ]);
    await h.control(`payments/${intent}/settle`);
    await arrived(intent, ['charge.succeeded', 'payment_intent.succeeded', 'checkout.session.async_payment_succeeded']);
    for (const { raw, signature } of hook.received) {
      const event = h.stripe.webhooks.constructEvent(raw, signature, webhookSecret);
      expect(event).toMatchObject({ account: h.account.id, object: 'event' });
    }
    const after = await h.stripe.checkout.sessions.retrieve(
      session.id,
      { expand: ['payment_intent.latest_charge.balance_transaction'] },
      h.on,
    );
    expect(after).toMatchObject({
      payment_status: 'paid',
      // F07 (secondary pages of 2025 and 2026): 0.8 % of $12,500.00 would be $100.00; the fee is capped at $5.00.
      payment_intent: {
        amount_received: 1_250_000,
        latest_charge: { balance_transaction: { fee: 500, net: 1_249_500, type: 'payment' }, paid: true },
        metadata: { attempt: 'attempt-1' },
      },
    });
  });

  it('settles by itself after the delay that was chosen on the page', async () => {
    const { session } = await paid({ outcome: 'settles', after: '50' });
    await eventually(
      async () => (await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).payment_status === 'paid',
    );
  });

  it('takes a debit that fails back to unpaid and names the reason', async () => {
    const { session, intent } = await paid({ outcome: 'fails', code: 'R02', after: '0' });
    await arrived(intent, ['charge.failed', 'payment_intent.payment_failed', 'checkout.session.async_payment_failed']);
    const found = await h.intent(intent);
    expect(found).toMatchObject({
      amount_received: 0,
      last_payment_error: { code: 'account_closed' },
      status: 'requires_payment_method',
    });
    expect((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).payment_status).toBe('unpaid');
    const fees = await h.stripe.balanceTransactions.list({ type: 'stripe_fee' }, h.on);
    expect(fees.data[0]).toMatchObject({ net: -400 }); // F07: a failed debit costs $4
  });

  it('returns a settled debit late: a dispute lost from the start, the money and a fee gone', async () => {
    const { intent } = await paid({ outcome: 'returned', after: '0' });
    await arrived(intent, ['payment_intent.succeeded']);
    await h.control(`payments/${intent}/return`, { code: 'R10' });
    await arrived(intent, ['charge.dispute.created', 'charge.dispute.funds_withdrawn', 'charge.dispute.closed']);
    const [dispute] = (await h.stripe.disputes.list({ payment_intent: intent }, h.on)).data;
    expect(dispute).toMatchObject({ amount: 1_250_000, reason: 'debit_not_authorized', status: 'lost' });
    expect(dispute?.balance_transactions).toMatchObject([{ amount: -1_250_000, fee: 400, type: 'adjustment' }]);
    expect((await h.intent(intent)).status).toBe('succeeded');
  });

  it('disputes a settled payment and puts the money back when it is won', async () => {
    const { intent } = await paid({ outcome: 'card_paid' });
    const made = await h.control(`payments/${intent}/dispute`, { reason: 'product_not_received' });
    expect(made).toMatchObject({ reason: 'product_not_received', status: 'needs_response' });
    const refused = await refusal(h.stripe.refunds.create({ payment_intent: intent }, h.on));
    expect(refused.code).toBe('charge_disputed');
    await h.control(`disputes/${made.id}/won`);
    const won = await h.stripe.disputes.retrieve(made.id, {}, h.on);
    expect(won.status).toBe('won');
    expect(won.balance_transactions.map((t) => t.net)).toEqual([-1_250_000 - 1500, 1_250_000]); // F07: a dispute costs $15
    await arrived(intent, ['charge.dispute.funds_reinstated', 'charge.dispute.closed']);
    await expect(h.control(`disputes/${made.id}/lost`)).rejects.toThrow('is not open');
  });

  it('pays a card at once, less 2.9 % and 30 cents', async () => {
    const { session, intent } = await paid({ outcome: 'card_paid' });
    expect(session.payment_status).toBe('paid');
    const charge = (await h.stripe.charges.list({ payment_intent: intent, expand: ['data.balance_transaction'] }, h.on))
      .data[0];
    expect(charge?.balance_transaction).toMatchObject({ fee: 36_280, net: 1_213_720 }); // F07
    await arrived(intent, ['charge.succeeded', 'payment_intent.succeeded', 'checkout.session.completed']);
    expect(typesFor(intent)).not.toContain('checkout.session.async_payment_succeeded');
  });

  it('keeps the page open when a card is declined, and the next try uses the same PaymentIntent', async () => {
    const session = await h.checkout();
    const declined = await submit(session.url, { outcome: 'card_declined' });
    expect(declined.status).toBe(402);
    expect(await declined.text()).toContain('Your card was declined.');
    const between = await h.stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent'] }, h.on);
    expect(between).toMatchObject({
      payment_intent: {
        last_payment_error: { code: 'card_declined', type: 'card_error' },
        status: 'requires_payment_method',
      },
      status: 'open',
    });
    await submit(session.url, { outcome: 'card_paid' });
    const after = await h.stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent'] }, h.on);
    expect(after.payment_intent).toMatchObject({
      id: /** @type {any} */ (between.payment_intent).id,
      last_payment_error: null,
      status: 'succeeded',
    });
  });

  it('takes a session once, not twice', async () => {
    const { session, intent } = await paid({ outcome: 'settles' });
    const again = await submit(`${h.url}/pay/${session.id}`, { outcome: 'settles' });
    expect(again.status).toBe(200);
    expect(await again.text()).toContain('bank debit under way');
    expect((await h.stripe.charges.list({ payment_intent: intent }, h.on)).data).toHaveLength(1);
  });

  it('expires by call and by time, and can then not be paid', async () => {
    const first = await h.checkout();
    const expired = await h.stripe.checkout.sessions.expire(first.id, {}, h.on);
    expect(expired).toMatchObject({ status: 'expired', url: null });
    expect((await refusal(h.stripe.checkout.sessions.expire(first.id, {}, h.on))).message).toContain(
      'status of `expired`',
    );
    expect((await submit(first.url, { outcome: 'settles' })).status).toBe(200);
    expect((await h.stripe.checkout.sessions.retrieve(first.id, {}, h.on)).payment_intent).toBeNull();
  });

  it('refunds a part, then the rest, then nothing more; a bank takes days to have it', async () => {
    const { intent } = await paid({ outcome: 'settles', after: '0' });
    await arrived(intent, ['payment_intent.succeeded']);
    const part = await h.stripe.refunds.create(
      { payment_intent: intent, amount: 250_000, metadata: { why: 'overpaid' } },
      h.on,
    );
    expect(part).toMatchObject({ amount: 250_000, metadata: { why: 'overpaid' }, status: 'pending' });
    await arrived(intent, ['refund.created', 'charge.refunded']);
    await h.control(`refunds/${part.id}/succeed`);
    expect((await h.stripe.refunds.retrieve(part.id, {}, h.on)).status).toBe('succeeded');
    const tooMuch = await refusal(h.stripe.refunds.create({ payment_intent: intent, amount: 1_000_001 }, h.on));
    expect(tooMuch).toMatchObject({ param: 'amount', statusCode: 400 });
    const rest = await h.stripe.refunds.create({ payment_intent: intent }, h.on);
    expect(rest.amount).toBe(1_000_000);
    const charge = await h.stripe.charges.retrieve(String(rest.charge), {}, h.on);
    expect(charge).toMatchObject({ amount_refunded: 1_250_000, refunded: true });
    expect((await refusal(h.stripe.refunds.create({ payment_intent: intent }, h.on))).code).toBe(
      'charge_already_refunded',
    );
    await h.control(`refunds/${rest.id}/fail`);
    expect(await h.stripe.charges.retrieve(charge.id, {}, h.on)).toMatchObject({
      amount_refunded: 250_000,
      refunded: false,
    });
    await arrived(intent, ['refund.failed']);
  });

  it('refuses to refund what has not settled', async () => {
    const { intent } = await paid({ outcome: 'settles' });
    expect((await refusal(h.stripe.refunds.create({ payment_intent: intent }, h.on))).message).toContain(
      'does not have a successful charge',
    );
  });

  it("takes the platform's fee from a direct charge", async () => {
    const { intent } = await paid({ outcome: 'card_paid' }, { payment_intent_data: { application_fee_amount: 5000 } });
    const charge = (await h.stripe.charges.list({ payment_intent: intent, expand: ['data.balance_transaction'] }, h.on))
      .data[0];
    expect(charge?.balance_transaction).toMatchObject({ net: 1_250_000 - 36_280 - 5000 });
    const fee = await h.stripe.applicationFees.retrieve(String(charge?.application_fee));
    expect(fee).toMatchObject({ account: h.account.id, amount: 5000, charge: charge?.id });
  });

  it('pays out the balance, and the lines of a payout add up to it', async () => {
    const payout = await h.control(`accounts/${h.account.id}/payout`);
    const lines = await h.stripe.balanceTransactions.list({ payout: payout.id, limit: 100 }, h.on);
    const sum = lines.data.filter((l) => l.type !== 'payout').reduce((total, l) => total + l.net, 0);
    expect(sum).toBe(payout.amount);
    expect((await h.stripe.payouts.retrieve(payout.id, {}, h.on)).status).toBe('paid');
    const balance = await h.stripe.balance.retrieve({}, h.on);
    expect((balance.available[0]?.amount ?? NaN) + (balance.pending[0]?.amount ?? NaN)).toBe(0);
  });

  it('cancels only a PaymentIntent that is not under way', async () => {
    const { intent } = await paid({ outcome: 'settles' });
    const refused = await refusal(h.stripe.paymentIntents.cancel(intent, {}, h.on));
    expect(refused).toMatchObject({ code: 'payment_intent_unexpected_state', statusCode: 400 });
    await h.control(`payments/${intent}/fail`);
    expect((await h.stripe.paymentIntents.cancel(intent, { cancellation_reason: 'abandoned' }, h.on)).status).toBe(
      'canceled',
    );
  });

  it('finds a payment by its metadata, with the lag that search has', async () => {
    const { intent } = await paid({ outcome: 'settles' }, { payment_intent_data: { metadata: { attempt: "it's 7" } } });
    const query = "metadata['attempt']:'it\\'s 7' AND status:'processing'";
    expect((await h.stripe.paymentIntents.search({ query }, h.on)).data.map((p) => p.id)).toEqual([intent]);
    expect((await h.stripe.paymentIntents.search({ query: "metadata['attempt']:'nobody'" }, h.on)).data).toEqual([]);
    await h.control('settings', { search_lag_ms: 60_000 });
    expect((await h.stripe.paymentIntents.search({ query }, h.on)).data).toEqual([]);
    await h.control('settings', { search_lag_ms: 0 });
    expect((await refusal(h.stripe.paymentIntents.search({ query: 'metadata:' }, h.on))).param).toBe('query');
  });

  it('lists sessions by their payment, and pages of payments without gap or repetition', async () => {
    const { session, intent } = await paid({ outcome: 'settles' });
    const found = await h.stripe.checkout.sessions.list({ payment_intent: intent }, h.on);
    expect(found.data.map((s) => s.id)).toEqual([session.id]);
    const all = await h.stripe.paymentIntents.list({ limit: 2 }, h.on).autoPagingToArray({ limit: 500 });
    const once = await h.stripe.paymentIntents.list({ limit: 100 }, h.on);
    expect(all.map((p) => p.id)).toEqual(once.data.map((p) => p.id));
    expect(once.data[0]?.id).toBe(intent);
  });
});
