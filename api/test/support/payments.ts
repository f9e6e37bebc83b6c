import { v7 } from 'uuid';
import type { PaymentProgress } from '@tallypole/shared/schemas/payments';
import type { Payouts } from '@tallypole/shared/schemas/payouts';
import { drawAt, made, type LentJob } from './draw-builders.ts';
import { until } from './house.ts';
import type { StripeStandIn } from './stripe-stand-in.ts';
import type { Visitor } from './visitor.ts';

/** The principal sets up the firm's account at Stripe, and its onboarding is finished there. Gives back the account's id. */
export async function onboard(stripe: StripeStandIn, principal: Visitor, firmId: string): Promise<string> {
  made(await principal.post(`/firms/${firmId}/payouts`));
  const payouts = async () => made<Payouts>(await principal.get(`/firms/${firmId}/payouts`));
  await until(async () => (await payouts()).linkUrl !== null, 'the onboarding link');
  const [row] = await principal.house.sql<{ account: string }>('select account from stripe_account where firm_id = $1', [firmId]);
  const account = row?.account ?? '';
  await stripe.control(`accounts/${account}/onboard`);
  await until(async () => (await payouts()).state === 'ready', 'the account to be ready');
  return account;
}

export const startPayment = (lent: LentJob, who: Visitor, drawId: string, amountCents: number, key?: string, id = v7()) =>
  who.post(drawAt(lent, drawId, 'payments'), { id, amountCents }, key);

export const progress = async (lent: LentJob, who: Visitor, paymentId: string): Promise<PaymentProgress> => made<PaymentProgress>(await who.get(`/jobs/${lent.job.id}/payments/${paymentId}`));

/** Starts paying and waits for the payment page. Gives back the payment's id and the session's. */
export async function openPage(lent: LentJob, who: Visitor, drawId: string, amountCents: number): Promise<{ paymentId: string; sessionId: string; url: string }> {
  const { payment } = made<PaymentProgress>(await startPayment(lent, who, drawId, amountCents));
  await until(async () => (await progress(lent, who, payment.id)).url !== null, 'the payment page');
  const { url } = await progress(lent, who, payment.id);
  return { paymentId: payment.id, url: url ?? '', sessionId: (url ?? '').split('/').at(-1) ?? '' };
}

export const inState = (lent: LentJob, who: Visitor, paymentId: string, state: string, milliseconds?: number) =>
  until(async () => (await progress(lent, who, paymentId)).payment.state === state, `the payment to be ${state}`, milliseconds);
