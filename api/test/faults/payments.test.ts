import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import path from 'node:path';
import type { ChildProcess } from 'node:child_process';
import { v7 } from 'uuid';
import type { PaymentProgress } from '@tallypole/shared/schemas/payments';
import type { Draw } from '@tallypole/shared/schemas/draws';
import { principalWithFirm } from '../support/builders.ts';
import { approvedDraw, drawAt, ledgerState, lentJob, made, sentDraw, approve, prove, type LentJob } from '../support/draw-builders.ts';
import { House, until } from '../support/house.ts';
import { inState, onboard, openPage, progress, startPayment } from '../support/payments.ts';
import { StripeStandIn } from '../support/stripe-stand-in.ts';

const atAnswer = path.join(import.meta.dirname, 'kill-at-commit.mjs');
const atStatement = path.join(import.meta.dirname, 'kill-at-statement.mjs');
const MOMENTS = ['before', 'after'] as const;
const LONG = 60_000;

describe('paying a draw while things break', () => {
  let house: House;
  let stripe: StripeStandIn;
  let worker: ChildProcess;
  let url: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let account: string;
  let lent: LentJob;
  let draw: Draw;

  beforeAll(async () => {
    house = await House.open();
    stripe = await StripeStandIn.for(house);
    worker = await house.worker();
    ({ url } = await house.web());
    await stripe.start(url);
    firm = await principalWithFirm(house, url);
    account = await onboard(stripe, firm.principal, firm.firmId);
  });
  afterAll(async () => {
    await house.close();
    await stripe.close();
  });
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
    draw = await approvedDraw(lent);
  });

  const page = (paymentId: string) => until(async () => (await progress(lent, lent.ann, paymentId)).url !== null, 'the payment page', LONG);
  const sessions = async () => {
    const { data } = await stripe.api<{ data: { id: string; metadata: { draw_id: string } }[] }>('checkout/sessions?limit=100', account);
    return data.filter(({ metadata }) => metadata.draw_id === draw.id).map(({ id }) => id);
  };
  const settled = async (sessionId: string, paymentId: string) => {
    await stripe.control(`sessions/${sessionId}/pay`, { outcome: 'settles', after_ms: -1 });
    await stripe.control(`payments/${sessionId}/settle`);
    await inState(lent, lent.ann, paymentId, 'settled', LONG);
  };
  /** Paid once: in the ledger, in the mails, on the page. */
  const paidOnce = async () => {
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000 });
    expect(await house.sql(`select 1 from ledger_entry where job_id = $1 and cause = 'payment'`, [lent.job.id])).toHaveLength(1);
    await house.mail.wait(lent.ann.email, /^Receipt: \$30/, LONG);
    await until(async () => (await house.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is null'))[0]?.n === 0, 'all mails to be sent', LONG);
    expect(house.mail.to(lent.ann.email).filter(({ subject }) => /^Receipt: \$30/.test(subject ?? ''))).toHaveLength(1);
  };
  const begin = async () => made<PaymentProgress>(await startPayment(lent, lent.ann, draw.id, 3_000_000)).payment.id;

  it('waits while Stripe is down, and opens one page when it is back', async () => {
    await stripe.stop();
    const paymentId = await begin();
    await until(async () => (await house.sql('select 1 from payment_attempt where payment_id = $1 and tried_at is not null and trouble = $2', [paymentId, 'unclear'])).length === 1, 'the first try');
    expect(await progress(lent, lent.ann, paymentId)).toMatchObject({ url: null, payment: { state: 'started' } });
    // somebody who clicks again meanwhile gets the same payment
    expect(made<PaymentProgress>(await startPayment(lent, lent.ben, draw.id, 3_000_000)).payment.id).toBe(paymentId);
    await stripe.start();
    await page(paymentId);
    const open = await sessions();
    expect(open).toHaveLength(1);
    await settled(open[0] ?? '', paymentId);
    await paidOnce();
  });

  it.each([
    ['the connection breaks before Stripe has done it', { mode: 'drop' }, 1, 0],
    ['the connection breaks after Stripe has done it', { mode: 'drop_after' }, 1, 0],
    ['Stripe answers with an error after it has done it', { mode: 'error_after' }, 1, 0],
    ['Stripe answers with an error and keeps it under the key', { mode: 'error_stored' }, 2, 0],
    // 12 seconds of patience: nobody may take the waiting worker for a dead one and call again beside it
    ['Stripe is silent until our patience ends, having done it', { mode: 'hang_after' }, 1, 11_500],
  ])('has one page when %s', async (_name, fault, attempts, leastMilliseconds) => {
    const started = Date.now();
    await stripe.control('faults', { ...fault, method: 'POST', path: '/v1/checkout/sessions', times: 1 });
    const paymentId = await begin();
    await page(paymentId);
    expect(Date.now() - started).toBeGreaterThan(leastMilliseconds);
    expect((await stripe.control<{ faults: object[] }>('', {}, 'GET')).faults).toEqual([]);
    expect(await sessions()).toHaveLength(1);
    const keys = await house.sql<{ stripe_key: string }>('select stripe_key from payment_attempt where payment_id = $1', [paymentId]);
    expect([keys.length, new Set(keys.map(({ stripe_key: key }) => key)).size]).toEqual([attempts, attempts]);
  });

  it.each(MOMENTS)('has one payment when the server dies %s the commit of its start and the browser sends it again', async (when) => {
    const dying = await house.web({ preload: atAnswer, env: { KILL_OPERATION: 'payment.start', KILL_WHEN: when } });
    const [key, id] = [randomUUID(), v7()];
    await expect(startPayment({ ...lent }, lent.ann.at(dying.url), draw.id, 3_000_000, key, id)).rejects.toThrow();
    const again = await startPayment(lent, lent.ann, draw.id, 3_000_000, key, id);
    expect([again.status, again.headers['idempotency-replayed']]).toEqual([201, when === 'before' ? undefined : 'true']);
    await page(id);
    expect(await sessions()).toHaveLength(1);
  });

  it.each(MOMENTS)('is approved once when the server dies %s the commit of the last approval', async (when) => {
    const other = await lentJob(house, url, { firm });
    await prove(other, 'Foundation');
    const { id } = await sentDraw(other);
    await approve(other, other.ann, id);
    const { effectHash } = made<Draw>(await other.ben.get(drawAt(other, id)));
    const dying = await house.web({ preload: atAnswer, env: { KILL_OPERATION: 'draw.approval_given', KILL_WHEN: when } });
    const [key, approval] = [randomUUID(), { id: v7(), effectHash }];
    await expect(other.ben.at(dying.url).post(drawAt(other, id, 'approvals'), approval, key)).rejects.toThrow();
    expect(made<Draw>(await other.ben.post(drawAt(other, id, 'approvals'), approval, key)).state).toBe('approved');
    expect(await house.sql(`select 1 from ledger_entry where job_id = $1 and cause = 'draw'`, [other.job.id])).toHaveLength(1);
    await house.mail.wait(other.ben.email, /you pay/);
    expect(house.mail.to(other.ben.email).filter(({ subject }) => /you pay/.test(subject ?? ''))).toHaveLength(1);
  });

  it.each(MOMENTS)('has one page when the worker dies %s it has stored Stripe\'s answer', async (when) => {
    await house.kill(worker);
    const dying = await house.worker({ preload: atStatement, env: { KILL_SQL: `update payment_attempt set state = 'open'`, KILL_WHEN: when } });
    const paymentId = await begin();
    await until(() => dying.signalCode !== null, 'the worker to die');
    worker = await house.worker();
    await page(paymentId);
    const open = await sessions();
    expect(open).toHaveLength(1);
    await settled(open[0] ?? '', paymentId);
    await paidOnce();
  });

  it.each(MOMENTS)('is booked once when the worker dies %s the commit of the settlement', async (when) => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await stripe.control(`sessions/${sessionId}/pay`, { outcome: 'settles', after_ms: -1 });
    await inState(lent, lent.ann, paymentId, 'processing', LONG);
    await house.kill(worker);
    const dying = await house.worker({ preload: atStatement, env: { KILL_SQL: 'update payment set state = $2', KILL_WHEN: when } });
    await stripe.control(`payments/${sessionId}/settle`);
    await until(() => dying.signalCode !== null, 'the worker to die');
    worker = await house.worker();
    await inState(lent, lent.ann, paymentId, 'settled', LONG);
    await paidOnce();
  });

  it.each(MOMENTS)('loses no webhook when the server dies %s the commit that stores it', async (when) => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    const dying = await house.web({ preload: atStatement, env: { KILL_SQL: 'app.store_stripe_event', KILL_WHEN: when } });
    await stripe.stop();
    await stripe.start(dying.url);
    await stripe.control(`sessions/${sessionId}/pay`, { outcome: 'settles', after_ms: -1 });
    await until(() => dying.child.signalCode !== null, 'the server to die');
    // Stripe sends again what nobody answered, to where the servers are then
    await stripe.stop();
    await stripe.start(url);
    await inState(lent, lent.ann, paymentId, 'processing', LONG);
    await stripe.control(`payments/${sessionId}/settle`);
    await inState(lent, lent.ann, paymentId, 'settled', LONG);
    await paidOnce();
  });

  it('makes one account when Stripe\'s answer is lost', async () => {
    const other = await principalWithFirm(house, url);
    await stripe.control('faults', { mode: 'drop_after', method: 'POST', path: '/v1/accounts', times: 1 });
    const made = await onboard(stripe, other.principal, other.firmId);
    const { data } = await stripe.api<{ data: { id: string; metadata: { firm_id?: string } }[] }>('accounts?limit=100', '');
    expect(data.filter(({ metadata }) => metadata.firm_id === other.firmId).map(({ id }) => id)).toEqual([made]);
  });
});
