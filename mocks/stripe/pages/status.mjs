import { StripeFailure } from '../errors.mjs';
import { movePayment, ownerOf } from '../control/money.mjs';
import { close } from '../payments/disputes.mjs';
import { redirect } from '../http.mjs';
import { parseFields } from '../forms.mjs';
import { dollars, filled, html, moment } from './html.mjs';
import { sendPage, sendProblem } from './layout.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('node:http').ServerResponse} ServerResponse
 * @typedef {import('stripe').Stripe.Checkout.Session} Session
 */

/**
 * How a payment stands after its form, with what may still happen to it.
 * @param {World} world
 * @param {ServerResponse} response
 * @param {Session} session
 * @param {string} [problem]
 */
export function statusPage(world, response, session, problem) {
  const { intent, charge, dispute, plan } = world.store.transaction((tx) => {
    const intent =
      typeof session.payment_intent === 'string' ? tx.find('payment_intent', session.payment_intent) : undefined;
    const charge = typeof intent?.latest_charge === 'string' ? tx.find('charge', intent.latest_charge) : undefined;
    const dispute = tx
      .all('dispute')
      .map((r) => r.value)
      .find((d) => d.charge === charge?.id);
    return { intent, charge, dispute, plan: intent ? tx.find('plan', intent.id) : undefined };
  });
  const status = dispute
    ? `${dispute.reason.replaceAll('_', ' ')}: dispute ${dispute.status.replaceAll('_', ' ')}`
    : (words[intent?.status ?? ''] ?? words[session.status ?? ''] ?? 'unknown');
  sendPage(response, problem ? 400 : 200, {
    title: `${dollars(session.amount_total)}: ${status}`,
    body: html`
<h1>${dollars(session.amount_total)}: ${status}</h1>
${problem && html`<div class="problem" role="alert"><strong>${problem}</strong></div>`}
<dl><dt>Started</dt><dd>${moment(session.created)}</dd>
${intent && html`<dt>Payment</dt><dd>${intent.id}</dd>`}
${intent?.last_payment_error && html`<dt>Reason</dt><dd>${intent.last_payment_error.message}</dd>`}
${charge && charge.amount_refunded > 0 && html`<dt>Refunded</dt><dd>${dollars(charge.amount_refunded)}</dd>`}
${plan && html`<dt>Next</dt><dd>${plan.step} ${plan.at === null ? 'when told to' : moment(plan.at / 1000)}</dd>`}</dl>
<div class="row">${possible(intent, charge, dispute).map((step) => button(session.id, step))}</div>
<p>${session.success_url && session.status === 'complete' && wayBack(filled(session.success_url, session.id))}
<a href="/">All payments of the stand-in</a></p>`,
  });
}

/**
 * What may happen to a payment next.
 * @param {import('stripe').Stripe.PaymentIntent | undefined} intent
 * @param {import('stripe').Stripe.Charge | undefined} charge
 * @param {import('stripe').Stripe.Dispute | undefined} dispute
 */
function possible(intent, charge, dispute) {
  if (intent?.status === 'processing') return ['settle', 'fail'];
  if (dispute?.status === 'needs_response') return ['won', 'lost'];
  if (charge?.status !== 'succeeded' || charge.disputed) return [];
  return charge.payment_method_details?.type === 'card' ? ['dispute'] : ['return', 'dispute'];
}

/**
 * @param {string} session
 * @param {string} step
 */
const button = (session, step) => html`
<form method="post" action="/pay/${session}/${step}">
<button class="${step === 'settle' || step === 'won' ? 'go' : 'plain'}">${buttons[step]}</button></form>`;

/** @param {string} url */
const wayBack = (url) => html`<a href="${url}">Back to where you came from</a> · `;

/** @type {Record<string, string>} */
const words = {
  canceled: 'canceled',
  expired: 'expired',
  processing: 'bank debit under way',
  requires_payment_method: 'not paid',
  succeeded: 'paid',
};

/** @type {Record<string, string>} */
const buttons = {
  settle: 'Settle it now',
  fail: 'Let it fail now',
  return: 'Return it late',
  dispute: 'Dispute it',
  won: 'Decide for the payee',
  lost: 'Decide for the payer',
};

/**
 * POST /pay/:session/:step
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 * @param {string} step
 * @param {string} body
 */
export function submitStep(world, response, id, step, body) {
  const session = world.store.transaction((tx) => tx.find('checkout.session', id));
  if (!session || typeof session.payment_intent !== 'string')
    return sendProblem(response, 404, 'There is no such payment.');
  const code = parseFields(body)['code'];
  try {
    if (step === 'won' || step === 'lost') decide(world, session.payment_intent, step);
    else movePayment(world, session.payment_intent, step, code ? { code } : {});
    redirect(response, `/pay/${id}`);
  } catch (error) {
    if (!(error instanceof StripeFailure)) throw error;
    statusPage(world, response, session, error.message);
  }
}

/**
 * @param {World} world
 * @param {string} intent
 * @param {'won' | 'lost'} status
 */
function decide(world, intent, status) {
  world.act(ownerOf(world, 'payment_intent', intent), (act) => {
    const open = act.tx
      .all('dispute', act.account)
      .map((r) => r.value)
      .find((d) => d.payment_intent === intent && d.status === 'needs_response');
    close(act, open?.id ?? '', status);
  });
}
