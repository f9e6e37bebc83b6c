import { dollars, html, moment } from './html.mjs';
import { sendPage, sendProblem } from './layout.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */

const most = 50;

/**
 * GET /: the accounts and the newest payments, each with its page.
 * @param {World} world
 * @param {ServerResponse} response
 */
export function showDesk(world, response) {
  const { accounts, sessions, stuck } = world.store.transaction((tx) => ({
    accounts: tx.all('account').map((r) => r.value),
    sessions: tx
      .all('checkout.session')
      .reverse()
      .slice(0, most)
      .map(({ account, value }) => ({
        session: value,
        name: tx.find('account', account)?.business_profile?.name ?? account,
        intent: typeof value.payment_intent === 'string' ? tx.find('payment_intent', value.payment_intent) : undefined,
      })),
    stuck: tx.all('delivery').filter(({ value: d }) => d.state === 'waiting' && d.attempts.length > 0).length,
  }));
  sendPage(response, 200, {
    title: 'All payments of the stand-in',
    body: html`
<h1>All payments of the stand-in</h1>
${stuck > 0 && refusedDeliveries(stuck)}
<h2>Payments</h2>
${sessions.length === 0 && html`<p class="soft">No payment yet. It appears here when a checkout session is made.</p>`}
<ul class="list">${sessions.map(({ session, name, intent }) => payment(session, name, intent?.status))}</ul>
<h2>Accounts</h2>
${accounts.length === 0 && html`<p class="soft">No account is connected yet.</p>`}
<ul class="list">${accounts.map(connected)}</ul>`,
  });
}

/** @param {number} count */
const refusedDeliveries = (count) => html`
<div class="problem"><strong>${count} webhook ${count === 1 ? 'delivery was' : 'deliveries were'} refused</strong>
<p>They are sent again until they are accepted.</p></div>`;

/**
 * @param {import('stripe').Stripe.Checkout.Session} session
 * @param {string} name
 * @param {string | undefined} status of its PaymentIntent
 */
const payment = (session, name, status) => html`
<li><a href="/pay/${session.id}">${dollars(session.amount_total)} to ${name}</a>
<span class="hint">${(status ?? session.status ?? '').replaceAll('_', ' ')}, ${moment(session.created)}</span></li>`;

/** @param {import('stripe').Stripe.Account} account */
const connected = (account) => html`
<li>${account.business_profile?.name ?? account.email ?? ''}
<span class="hint">${account.id}, can ${account.charges_enabled ? 'take payments' : 'not take payments yet'}</span></li>`;

/**
 * GET /receipt/:charge
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 */
export function showReceipt(world, response, id) {
  const charge = world.store.transaction((tx) => tx.find('charge', id));
  if (charge?.status !== 'succeeded') return sendProblem(response, 404, 'There is no such receipt.');
  const method = charge.payment_method_details?.type === 'card' ? 'Card' : 'Bank debit';
  sendPage(response, 200, {
    title: `Receipt for ${dollars(charge.amount)}`,
    body: html`
<h1>Receipt</h1><p class="sum">${dollars(charge.amount)}</p>
<dl><dt>Paid</dt><dd>${moment(charge.created)}</dd><dt>With</dt><dd>${method}</dd>
<dt>For</dt><dd>${charge.description ?? 'no description'}</dd><dt>Charge</dt><dd>${charge.id}</dd>
${charge.amount_refunded > 0 && html`<dt>Refunded</dt><dd>${dollars(charge.amount_refunded)}</dd>`}</dl>`,
  });
}
