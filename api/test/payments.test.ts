import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 } from 'uuid';
import { afterPaymentStep, paymentStates, paymentTransitions, type PaymentProgress, type PaymentStep } from '@tallypole/shared/schemas/payments';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { principalWithFirm } from './support/builders.ts';
import { approvedDraw, drawAt, ledgerState, lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';
import { inState, onboard, openPage, progress, startPayment } from './support/payments.ts';
import { StripeStandIn } from './support/stripe-stand-in.ts';
import type { Visitor } from './support/visitor.ts';

describe('the states of a payment', () => {
  it('allow these steps and no others', () => {
    const steps = Object.keys(paymentTransitions) as PaymentStep[];
    const table = Object.fromEntries(paymentStates.map((state) => [state, steps.flatMap((step) => (afterPaymentStep(state, step) ? [`${step} → ${afterPaymentStep(state, step)}`] : [])).join(', ')]));
    expect(table).toEqual({
      started: 'process → processing, settle → settled, fail → failed, cancel → canceled',
      processing: 'settle → settled, fail → failed',
      settled: 'refund → refunded, dispute → disputed, return → returned',
      failed: 'settle → settled',
      canceled: 'settle → settled',
      refunded: 'undo_refund → settled, dispute → disputed',
      returned: '',
      disputed: 'win_dispute → settled, return → returned',
    });
  });
});

describe('paying a draw', () => {
  const counts = path.join(mkdtempSync(path.join(tmpdir(), 'tally-count-')), 'statements');
  let house: House;
  let stripe: StripeStandIn;
  let url: string;
  let second: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let account: string;
  let lent: LentJob;
  let draw: Draw;

  beforeAll(async () => {
    house = await House.open();
    stripe = await StripeStandIn.for(house);
    await house.worker({ preload: path.join(import.meta.dirname, 'support/count-statements.mjs'), env: { COUNT_SQL: 'update payment set state = $2', COUNT_FILE: counts } });
    ({ url } = await house.web());
    ({ url: second } = await house.web());
    await stripe.start(url);
    firm = await principalWithFirm(house, url);
    account = await onboard(stripe, firm.principal, firm.firmId);
  });
  afterAll(async () => {
    await house.close();
    await stripe.close();
    rmSync(path.dirname(counts), { recursive: true, force: true });
  });
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
    draw = await approvedDraw(lent);
  });

  const code = (answer: { body: unknown }) => (answer.body as { code: string }).code;
  const seen = async (who = lent.ann) => made<Draw>(await who.get(drawAt(lent, draw.id)));
  const entries = (cause: string) => house.sql<{ memo: string }>('select memo from ledger_entry where job_id = $1 and cause = $2', [lent.job.id, cause]);
  const pay = (sessionId: string, outcome: string) => stripe.control(`sessions/${sessionId}/pay`, { outcome, after_ms: -1 });
  const settle = (sessionId: string) => stripe.control(`payments/${sessionId}/settle`);
  const handled = () => until(async () => (await house.sql<{ n: number }>('select count(*)::int as n from stripe_event where firm_id is not null and handled_at is null'))[0]?.n === 0, 'all events to be handled');
  const receipts = async (who: Visitor) => {
    await house.mail.wait(who.email, /^Receipt: \$30/);
    await until(async () => (await house.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is null'))[0]?.n === 0, 'all mails to be sent');
    return house.mail.to(who.email).filter(({ subject }) => /^Receipt: \$30/.test(subject ?? '')).length;
  };
  const delivered = () => until(async () => (await stripe.deliveries()).every(({ state }) => state === 'delivered' || state === 'dropped'), 'all webhooks to be delivered');

  it('goes from the page to the receipt, with the same cents everywhere and a ledger that balances', async () => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    expect(await stripe.api(`checkout/sessions/${sessionId}`, account)).toMatchObject({
      amount_total: 3_000_000, payment_method_types: ['us_bank_account'], client_reference_id: paymentId, customer_email: lent.ann.email,
      metadata: { payment_id: paymentId, draw_id: draw.id, job_id: lent.job.id },
    });
    await pay(sessionId, 'settles');
    await inState(lent, lent.ann, paymentId, 'processing');
    expect(await seen()).toMatchObject({ state: 'approved', openHomeownerCents: 3_000_000, payments: [{ state: 'processing', keptCents: 0 }] });
    const meanwhile = await startPayment(lent, lent.ben, draw.id, 3_000_000);
    expect([meanwhile.status, (meanwhile.body as { detail: string }).detail]).toEqual([409, '$30,000.00 is on its way already.']);

    await settle(sessionId);
    await inState(lent, lent.ann, paymentId, 'settled');
    for (const who of [lent.ann, lent.ben, lent.lender, lent.principal]) {
      expect(await seen(who)).toMatchObject({ state: 'part_paid', paidHomeownerCents: 3_000_000, openHomeownerCents: 0, openLoanCents: 9_573_000 });
      const money = made<JobMoney>(await who.get(`/jobs/${lent.job.id}/money`));
      expect([money.paid.cents, money.open.cents, money.openHomeowner.cents, money.openLoan.cents]).toEqual([3_000_000, 9_573_000, 0, 9_573_000]);
      expect(money.payments.find(({ id }) => id === paymentId)?.feeCents).toBe(who === lent.principal ? 500 : null);
    }
    // 0.8 % of the debit, at most 5.00, is what the stand-in takes
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000, accounts: { stripe_clearing: 2_999_500, processing_fees: 500, 'homeowner_receivable/homeowner': 0 } });
    const receipt = await house.mail.wait(lent.ann.email, /^Receipt: \$30,000\.00 for Draw 1, 9 Larkspur Court$/);
    expect(receipt.text).toContain('Still open of Draw 1: $95,730.00.');
    await house.mail.wait(lent.principal.email, /^Draw 1, 9 Larkspur Court: \$30,000\.00 received$/);
    // under way, then settled: each in one transaction of at most 12 statements, however many people are mailed
    const statements = readFileSync(counts, 'utf8').trim().split('\n').map(Number);
    expect(statements).toHaveLength(2);
    expect(Math.max(...statements)).toBeLessThanOrEqual(12);
    const done = await startPayment(lent, lent.ann, draw.id, 3_000_000);
    expect([done.status, code(done)]).toEqual([409, 'wrong_state']);
  });

  it('is one payment for two tabs, two homeowners and two servers, and one page at Stripe', async () => {
    const key = randomUUID();
    const same = v7();
    const answers = await Promise.all([
      startPayment(lent, lent.ann, draw.id, 3_000_000, key, same),
      startPayment(lent, lent.ann.at(second), draw.id, 3_000_000, key, same),
      startPayment(lent, lent.ann.at(second), draw.id, 3_000_000),
      startPayment(lent, lent.ben, draw.id, 3_000_000),
      startPayment(lent, lent.ben.at(second), draw.id, 3_000_000),
    ]);
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201, 201, 201]);
    const ids = new Set(answers.map(({ body }) => (body as PaymentProgress).payment.id));
    expect(ids.size).toBe(1);
    const [paymentId = ''] = ids;
    await until(async () => (await progress(lent, lent.ben, paymentId)).url !== null, 'the page');
    const { data } = await stripe.api<{ data: { metadata: { draw_id: string } }[] }>('checkout/sessions?limit=100', account);
    expect(data.filter(({ metadata }) => metadata.draw_id === draw.id)).toHaveLength(1);
  });

  it('refuses another sum than what is open, somebody absent, and everybody but the homeowners', async () => {
    const other = await startPayment(lent, lent.ann, draw.id, 2_999_999);
    expect([other.status, code(other)]).toEqual([409, 'effect_changed']);
    for (const who of [lent.principal, lent.lender]) expect((await startPayment(lent, who, draw.id, 3_000_000)).status).toBe(403);
    await house.sql(`update session set present_at = now() - interval '11 minutes' where person_id = (select id from person where email = $1)`, [lent.ann.email]);
    expect(code(await startPayment(lent, lent.ann, draw.id, 3_000_000))).toBe('presence_needed');
    const { paymentId } = await openPage(lent, lent.ben, draw.id, 3_000_000);
    expect((await firm.principal.get(`/jobs/${lent.job.id}/payments/${paymentId}`)).status).toBe(403);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/jobs/${lent.job.id}/payments/${paymentId}`)).status).toBe(404);
    expect((await stranger.get(`/firms/${firm.firmId}/payouts`)).status).toBe(404);
  });

  it('says so when the builder does not take payments here', async () => {
    const bare = await lentJob(house, url);
    const { id } = await approvedDraw(bare);
    const answer = await startPayment(bare, bare.ann, id, 3_000_000);
    expect([answer.status, (answer.body as { detail: string }).detail]).toEqual([409, expect.stringMatching(/does not take payments here yet/) as unknown]);
  });

  it('fails, tells everybody, books nothing, and works when it is tried again', async () => {
    const first = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(first.sessionId, 'fails');
    await stripe.control(`payments/${first.sessionId}/fail`, { code: 'R01' });
    await inState(lent, lent.ann, first.paymentId, 'failed');
    expect((await progress(lent, lent.ann, first.paymentId)).payment.trouble).toMatch(/insufficient funds/);
    expect((await house.mail.wait(lent.ben.email, /^Your payment of \$30,000\.00 did not go through$/)).text).toMatch(/insufficient funds/);
    await house.mail.wait(lent.principal.email, /^Draw 1, 9 Larkspur Court: the debit of \$30,000\.00 failed$/);
    expect(await entries('payment')).toEqual([]);
    expect(await seen()).toMatchObject({ state: 'approved', openHomeownerCents: 3_000_000 });

    const again = await openPage(lent, lent.ann, draw.id, 3_000_000);
    expect(again.paymentId).not.toBe(first.paymentId);
    await pay(again.sessionId, 'settles');
    await settle(again.sessionId);
    await inState(lent, lent.ann, again.paymentId, 'settled');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000 });
    expect(await receipts(lent.ann)).toBe(1);
  });

  it('counts once when the webhooks come twice, late and in the wrong order', async () => {
    await stripe.control('rules', { type: '*', action: 'hold' });
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await stripe.control('rules', {}, 'DELETE');
    expect((await progress(lent, lent.ann, paymentId)).payment.state).toBe('started');
    await stripe.control('deliveries/release', { order: 'reversed' });
    await inState(lent, lent.ann, paymentId, 'settled');
    for (const { id } of (await stripe.deliveries()).slice(-6)) await stripe.control(`deliveries/${id}/send`, { times: 2 });
    await handled();
    expect(await entries('payment')).toHaveLength(1);
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000 });
    expect(await receipts(lent.ann)).toBe(1);
    const acts = await house.sql<{ act: string }>(`select data->>'act' as act from record_entry where job_id = $1 and data->>'act' like 'payment.%' order by seq`, [lent.job.id]);
    expect(acts.map(({ act }) => act)).toEqual(['payment.started', 'payment.settle']);
  });

  it('takes one webhook at two servers at once as one', async () => {
    await stripe.control('rules', { type: '*', action: 'hold' });
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await stripe.control('rules', {}, 'DELETE');
    const other = await house.worker();
    // two workers, and every event several times at once
    const held = await stripe.deliveries('?state=held');
    await Promise.all(held.flatMap(({ id }) => [1, 2, 3].map(() => stripe.control(`deliveries/${id}/send`, { times: 2 }))));
    await inState(lent, lent.ann, paymentId, 'settled');
    await handled();
    await house.kill(other, 'SIGTERM');
    expect(await entries('payment')).toHaveLength(1);
    expect(await receipts(lent.ben)).toBe(1);
  });

  it('refuses a webhook with a bad signature, without one, or that is too old, and stores nothing', async () => {
    await delivered();
    await stripe.control('rules', { type: '*', action: 'drop' });
    const { sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await stripe.control('rules', {}, 'DELETE');
    const [dropped] = (await stripe.deliveries('?state=dropped')).slice(-1);
    for (const forge of ['bad_signature', 'no_signature', 'old_timestamp']) {
      const { attempts } = await stripe.control<{ attempts: { status: number }[] }>(`deliveries/${dropped?.id}/send`, { times: 1, forge });
      expect([forge, attempts.map(({ status }) => status)]).toEqual([forge, [400]]);
    }
    expect(await house.sql('select 1 from stripe_event where id = $1', [dropped?.event])).toEqual([]);
    const { attempts } = await stripe.control<{ attempts: { status: number }[] }>(`deliveries/${dropped?.id}/send`, { times: 1 });
    expect(attempts.map(({ status }) => status)).toEqual([204]);
    await handled();
  });

  it('finds by asking Stripe what no webhook told', async () => {
    await stripe.control('rules', { type: '*', action: 'drop' });
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await stripe.control('rules', {}, 'DELETE');
    expect((await progress(lent, lent.ann, paymentId)).payment.state).toBe('started');
    await house.asQueueOwner(`select graphile_worker.add_job('sweep_payments')`);
    await inState(lent, lent.ann, paymentId, 'settled');
    expect(await entries('payment')).toHaveLength(1);
    expect(await house.sql(`select 1 from stripe_event where via = 'sweep' and payment_intent is not null`)).not.toEqual([]);
  });

  it('comes back after it had settled: owed again, told, and paid once more', async () => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await inState(lent, lent.ann, paymentId, 'settled');
    await stripe.control(`payments/${sessionId}/return`, { code: 'R01' });
    await inState(lent, lent.ann, paymentId, 'returned');
    expect(await seen()).toMatchObject({ state: 'approved', openHomeownerCents: 3_000_000, payments: [{ state: 'returned', keptCents: 0 }] });
    const ledger = await ledgerState(house, lent.job.id);
    // the failed debit's fee of 4.00 comes on top, as the stand-in has it
    expect(ledger).toMatchObject({ sum: 0, owed: 12_573_000, byDraws: 12_573_000, accounts: { disputed: 0, stripe_clearing: -900, processing_fees: 900 } });
    expect((await house.mail.wait(lent.ann.email, /^Your payment of \$30,000\.00 came back$/)).text).toContain('insufficient funds');
    const again = await openPage(lent, lent.ben, draw.id, 3_000_000);
    await pay(again.sessionId, 'settles');
    await settle(again.sessionId);
    await inState(lent, lent.ben, again.paymentId, 'settled');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000 });
  });

  it('is disputed, and won', async () => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await inState(lent, lent.ann, paymentId, 'settled');
    const dispute = await stripe.control<{ id: string }>(`payments/${sessionId}/dispute`);
    await inState(lent, lent.ann, paymentId, 'disputed');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, accounts: { disputed: 3_000_000 } });
    await stripe.control(`disputes/${dispute.id}/won`);
    await inState(lent, lent.ann, paymentId, 'settled');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, accounts: { disputed: 0, stripe_clearing: 2_998_000, processing_fees: 2_000 } });
  });

  it('is refunded in part and in whole from the firm\'s own account there, each refund booked once, a failed one booked back', async () => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await pay(sessionId, 'settles');
    await settle(sessionId);
    await inState(lent, lent.ann, paymentId, 'settled');
    const { payment_intent: intent } = await stripe.api<{ payment_intent: string }>(`checkout/sessions/${sessionId}`, account);
    const refund = async (amount: number) => (await stripe.send<{ id: string }>('refunds', account, { payment_intent: intent, amount: String(amount) })).id;
    const kept = (cents: number) => until(async () => (await progress(lent, lent.ann, paymentId)).payment.keptCents === cents, `${cents} to be kept`);
    await refund(500_000);
    await kept(2_500_000);
    expect(await seen()).toMatchObject({ state: 'part_paid', openHomeownerCents: 500_000, payments: [{ state: 'settled' }] });
    const rest = await refund(2_500_000);
    await inState(lent, lent.ann, paymentId, 'refunded');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 12_573_000, byDraws: 12_573_000, accounts: { stripe_clearing: -500 } });
    await stripe.control(`refunds/${rest}/fail`);
    await inState(lent, lent.ann, paymentId, 'settled');
    await kept(2_500_000);
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 10_073_000, byDraws: 10_073_000 });
    expect(await entries('refund')).toHaveLength(3);
  });

  it('is canceled when its page expires or a check comes first, and starts afresh', async () => {
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await stripe.control(`sessions/${sessionId}/expire`);
    await inState(lent, lent.ann, paymentId, 'canceled');
    const next = await openPage(lent, lent.ann, draw.id, 3_000_000);
    made(await lent.principal.post(`/jobs/${lent.job.id}/payments`, { id: v7(), drawId: draw.id, method: 'check', source: 'homeowner', amountCents: 3_000_000, receivedOn: '2026-12-01', reference: 'Check 7' }));
    await inState(lent, lent.ann, next.paymentId, 'canceled');
    expect(await stripe.api(`checkout/sessions/${next.sessionId}`, account)).toMatchObject({ status: 'expired' });
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 9_573_000, byDraws: 9_573_000 });
  });
});
