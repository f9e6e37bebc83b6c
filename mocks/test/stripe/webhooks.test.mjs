import { afterEach, describe, expect, it } from '@jest/globals';
import { eventually, house, receiver, sdk, webhookSecret } from './helpers.mjs';

describe('webhooks', () => {
  /** @type {Array<() => Promise<unknown>>} */
  let ends = [];
  afterEach(async () => {
    for (const end of ends.reverse()) await end();
    ends = [];
  });

  /**
   * @param {(call: number) => number} [answer]
   * @param {import('../../stripe/server.mjs').Options} [options]
   */
  const setUp = async (answer, options = {}) => {
    const hook = await receiver(answer);
    const h = await house({ webhookUrl: hook.url, webhookSecret, ...options });
    ends.push(hook.close, h.stop);
    await eventually(() => hook.received.length > 0); // account.updated of the onboarding
    await eventually(async () => (await h.deliveries('?state=waiting')).length === 0);
    hook.received.length = 0;
    return { hook, h };
  };
  /** @param {Awaited<ReturnType<typeof house>>} h */
  const payByCard = async (h) => {
    const session = await h.checkout();
    await h.control(`sessions/${session.id}/pay`, { outcome: 'card_paid' });
  };

  it('tries again with longer pauses until the receiver accepts, always the same event', async () => {
    let refusals = 0;
    const { hook, h } = await setUp(() => (refusals > 0 ? ((refusals -= 1), 500) : 200));
    refusals = 3;
    await h.control('rules', { type: 'payment_intent.created', action: 'drop' });
    await h.control('rules', { type: 'charge.*', action: 'drop' });
    await h.control('rules', { type: 'checkout.*', action: 'drop' });
    await payByCard(h);
    await eventually(() => hook.received.length === 4);
    expect(hook.received.map((r) => r.status)).toEqual([500, 500, 500, 200]);
    expect(new Set(hook.received.map((r) => r.event.id)).size).toBe(1);
    const [delivery] = await eventually(async () => {
      const found = await h.deliveries('?state=delivered&type=payment_intent.succeeded');
      return found.length > 0 ? found : undefined;
    });
    expect(delivery.attempts).toHaveLength(4);
    const gaps = delivery.attempts
      .slice(1)
      .map((/** @type {{ at: number }} */ a, /** @type {number} */ i) => a.at - delivery.attempts[i].at);
    expect(gaps[2]).toBeGreaterThan(gaps[0]);
  });

  it('sends an event twice when asked, and the receiver can tell that it is one', async () => {
    const { hook, h } = await setUp();
    await h.control('rules', { type: 'checkout.session.completed', action: 'twice', times: 1 });
    await payByCard(h);
    const completed = () => hook.received.filter((r) => r.event.type === 'checkout.session.completed');
    await eventually(() => completed().length === 2);
    expect(completed()[0]?.event.id).toBe(completed()[1]?.event.id);
    await payByCard(h);
    await eventually(() => completed().length === 3);
  });

  it('holds events back and lets them go in the opposite order', async () => {
    const { hook, h } = await setUp();
    await h.control('rules', { type: '*', action: 'hold' });
    await payByCard(h);
    expect(hook.received).toEqual([]);
    await h.control('deliveries/release', { order: 'reversed' });
    expect(hook.types()).toEqual([
      'checkout.session.completed',
      'payment_intent.succeeded',
      'charge.succeeded',
      'payment_intent.created',
    ]);
    expect(await h.deliveries('?state=held')).toEqual([]);
  });

  it('delays an event, and loses one that can still be asked for', async () => {
    const { hook, h } = await setUp();
    await h.control('rules', { type: 'payment_intent.succeeded', action: 'drop' });
    await h.control('rules', { type: 'checkout.*', action: 'delay', ms: 250 });
    await payByCard(h);
    await eventually(() => hook.types().includes('charge.succeeded'));
    expect(hook.types()).not.toContain('checkout.session.completed');
    await eventually(() => hook.types().includes('checkout.session.completed'));
    expect(hook.types()).not.toContain('payment_intent.succeeded');
    const lost = await h.stripe.events.list({ delivery_success: false, types: ['payment_intent.succeeded'] }, h.on);
    expect(lost.data).toHaveLength(1);
    await h.control(`events/${lost.data[0]?.id}/send`);
    expect(hook.types()).toContain('payment_intent.succeeded');
  });

  it('forges signatures that the SDK refuses, then sends the honest one', async () => {
    // The forged ones are refused with 400, as a careful receiver does.
    const { hook, h } = await setUp((n) => (n <= 1 ? 400 : 200));
    const verify = (/** @type {import('./helpers.mjs').Received | undefined} */ r) => () =>
      sdk(1).webhooks.constructEvent(r?.raw ?? '', r?.signature ?? '', webhookSecret);
    await h.control('rules', { type: 'payment_intent.succeeded', action: 'bad_signature' });
    for (const type of ['payment_intent.created', 'charge.succeeded', 'checkout.session.completed'])
      await h.control('rules', { type, action: 'drop' });
    await payByCard(h);
    await eventually(() => hook.received.length === 2);
    expect(verify(hook.received[0])).toThrow('No signatures found matching the expected signature');
    expect(verify(hook.received[1])()).toMatchObject({ type: 'payment_intent.succeeded' });
    const [delivery] = await h.deliveries('?type=payment_intent.succeeded');
    await h.control(`deliveries/${delivery.id}/send`, { forge: 'old_timestamp' });
    expect(verify(hook.received[2])).toThrow('Timestamp outside the tolerance zone');
    await h.control(`deliveries/${delivery.id}/send`, { forge: 'no_signature' });
    expect(hook.received[3]?.signature).toBe('');
  });

  it('reaches registered endpoints: connected accounts only with connect, own events without', async () => {
    const { h } = await setUp();
    const connected = await receiver();
    const own = await receiver();
    ends.push(connected.close, own.close);
    const made = await h.stripe.webhookEndpoints.create({
      url: connected.url,
      enabled_events: ['payment_intent.succeeded', 'application_fee.created'],
      connect: true,
    });
    await h.stripe.webhookEndpoints.create({ url: own.url, enabled_events: ['*'] });
    const session = await h.checkout({ payment_intent_data: { application_fee_amount: 100 } });
    await h.control(`sessions/${session.id}/pay`, { outcome: 'card_paid' });
    await eventually(() => connected.received.length > 0 && own.received.length > 0);
    expect(connected.types()).toEqual(['payment_intent.succeeded']);
    expect(own.types()).toEqual(['application_fee.created']);
    expect(own.received[0]?.event.account).toBeUndefined();
    const [first] = connected.received;
    expect(sdk(1).webhooks.constructEvent(first?.raw ?? '', first?.signature ?? '', made.secret ?? '').account).toBe(
      h.account.id,
    );
    expect((await h.stripe.webhookEndpoints.retrieve(made.id)).secret).toBeUndefined();
    await h.stripe.webhookEndpoints.del(made.id);
    await payByCard(h);
    await eventually(async () => (await h.deliveries('?state=waiting')).length === 0);
    expect(connected.received).toHaveLength(1);
  });

  it('gives up waiting for a receiver that hangs, and tries again', async () => {
    const { hook, h } = await setUp(undefined, { webhookTimeoutMs: 100 });
    const { createServer } = await import('node:http');
    const mute = createServer(() => undefined);
    await new Promise((done) => mute.listen(0, '127.0.0.1', () => done(undefined)));
    ends.push(async () => {
      mute.closeAllConnections();
      mute.close();
    });
    const bound = mute.address();
    const port = typeof bound === 'object' && bound !== null ? bound.port : 0;
    const made = await h.stripe.webhookEndpoints.create({
      url: `http://127.0.0.1:${port}/`,
      enabled_events: ['charge.succeeded'],
      connect: true,
    });
    await payByCard(h);
    const stuck = async () =>
      (await h.deliveries('?type=charge.succeeded')).find(
        (/** @type {{ endpoint: string }} */ d) => d.endpoint === made.id,
      );
    await eventually(async () => (await stuck()).attempts.length >= 2);
    expect((await stuck()).attempts[0].error).toBe('timed out');
    expect((await stuck()).state).toBe('waiting');
    expect(hook.types()).toContain('charge.succeeded');
  });
});
