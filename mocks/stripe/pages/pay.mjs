import { StripeFailure } from '../errors.mjs';
import { parseFields } from '../forms.mjs';
import { redirect } from '../http.mjs';
import { methodOf, outcomes, pay } from '../payments/checkout.mjs';
import { returnCodes } from '../payments/codes.mjs';
import { dollars, filled, html } from './html.mjs';
import { sendPage, sendProblem } from './layout.mjs';
import { statusPage } from './status.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('../types.d.ts').Outcome} Outcome
 * @typedef {import('stripe').Stripe.Checkout.Session} Session
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */

/** @type {Array<{ outcome: Outcome, label: string, hint: string }>} */
const choices = [
  { outcome: 'settles', label: 'Bank debit that settles later', hint: 'Under way first, then paid.' },
  { outcome: 'fails', label: 'Bank debit that fails', hint: 'Under way first, then the bank refuses it.' },
  { outcome: 'returned', label: 'Bank debit that is returned late', hint: 'Settles, then the bank takes it back.' },
  { outcome: 'disputed', label: 'Bank debit that is disputed', hint: 'Settles, then the payer contests it.' },
  { outcome: 'card_paid', label: 'Card, paid now', hint: 'Test card ending in 4242.' },
  { outcome: 'card_declined', label: 'Card, declined', hint: 'You stay on this page and can try again.' },
  { outcome: 'card_disputed', label: 'Card, paid now and disputed later', hint: 'Test card ending in 0259.' },
];

/** @type {Record<import('../payments/codes.mjs').ReturnCode, string>} */
const reasons = {
  R01: 'insufficient funds',
  R02: 'account closed',
  R03: 'account not found',
  R10: 'not authorized by the customer',
  R16: 'account frozen',
};

/**
 * GET /pay/:session: the form while it is open, else how the payment stands.
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 * @param {{ query?: URLSearchParams, problem?: string, chosen?: Record<string, string> }} [shown]
 */
export function showPay(world, response, id, shown = {}) {
  const found = world.store.transaction((tx) => {
    const row = tx.row('checkout.session', id);
    const session = tx.find('checkout.session', id);
    return row && session
      ? { session, account: tx.find('account', row.account), items: tx.find('session_detail', id)?.line_items ?? [] }
      : undefined;
  });
  if (!found) return sendProblem(response, 404, 'There is no such payment.');
  if (found.session.status !== 'open') return statusPage(world, response, found.session);
  const { session, account, items } = found;
  const { problem, chosen = {}, query } = shown;
  const open = choices.filter((c) => session.payment_method_types.includes(methodOf(c.outcome)));
  sendPage(response, problem ? 402 : 200, {
    title: `${problem ? 'Problem: ' : ''}Pay ${dollars(session.amount_total)}`,
    leadsTo: [session.success_url, session.cancel_url],
    body: html`
<h1>Pay ${account?.business_profile?.name ?? account?.email ?? 'the platform'}</h1>
<p class="sum">${dollars(session.amount_total)}</p>
${problem && refusedTry(problem)}
<ul class="list">${items.map(line)}</ul>
${session.custom_text.submit && html`<p>${session.custom_text.submit.message}</p>`}
<form method="post" action="/pay/${id}">
  <fieldset><legend>What should happen?</legend>
  ${open.map((c, i) => pick(c, chosen['outcome'] ? chosen['outcome'] === c.outcome : i === 0))}</fieldset>
  ${session.payment_method_types.includes('us_bank_account') && bankFields(world, chosen, query)}
  ${textField('name', 'text', 'Name of the account holder', chosen['name'] ?? '')}
  ${textField('email', 'email', 'Email', chosen['email'] ?? session.customer_email ?? '')}
  <div class="row"><button name="step" value="pay">Pay ${dollars(session.amount_total)}</button>
  ${session.cancel_url && goBack}</div>
</form>`,
  });
}

/** @param {string} problem */
const refusedTry = (problem) => html`
<div class="problem" role="alert"><strong>${problem}</strong>
<p>Nothing was paid. Choose another result or go back.</p></div>`;

/** @param {import('stripe').Stripe.LineItem} item */
const line = ({ description, quantity, amount_total }) =>
  html`<li>${description}${(quantity ?? 1) > 1 && ` × ${quantity}`}: ${dollars(amount_total)}</li>`;

const goBack = html`<button class="plain" name="step" value="cancel" formnovalidate>Go back without paying</button>`;

/**
 * @param {{ outcome: Outcome, label: string, hint: string }} choice
 * @param {boolean} checked
 */
const pick = ({ outcome, label, hint }, checked) => html`
<div class="pick"><input type="radio" id="${outcome}" name="outcome" value="${outcome}"
 aria-describedby="${outcome}-hint"${checked && html` checked`}><label for="${outcome}">${label}</label>
<span class="hint" id="${outcome}-hint">${hint}</span></div>`;

/**
 * @param {string} id also the token for autocomplete
 * @param {string} type
 * @param {string} label
 * @param {string} value
 */
const textField = (id, type, label, value) => html`
<div class="field"><label for="${id}">${label}</label>
<input id="${id}" name="${id}" type="${type}" autocomplete="${id}" maxlength="200" value="${value}"></div>`;

/**
 * @param {string} id
 * @param {string} label
 * @param {Array<[string, string]>} options value and words
 * @param {string | undefined} chosen
 * @param {string} [hint]
 */
const select = (id, label, options, chosen, hint) => html`
<div class="field"><label for="${id}">${label}</label>
${hint && html`<span class="hint" id="${id}-hint">${hint}</span>`}
<select id="${id}" name="${id}"${hint && html` aria-describedby="${id}-hint"`}>
${options.map(([v, words]) => html`<option value="${v}"${v === chosen && html` selected`}>${words}</option>`)}
</select></div>`;

/**
 * @param {World} world
 * @param {Record<string, string>} chosen
 * @param {URLSearchParams | undefined} query `settle_after_ms` in the address proposes a delay
 */
function bankFields(world, chosen, query) {
  const asked = query?.get('settle_after_ms');
  const proposed = asked && /^\d{1,9}$/.test(asked) ? Number(asked) : world.settings().settle_after_ms;
  const delays = new Set([...(proposed >= 0 ? [proposed] : []), 0, 10_000, 60_000, 300_000]);
  /** @type {Array<[string, string]>} */
  const options = [...delays].map((ms) => [String(ms), ms === 0 ? 'At once' : `After ${ms / 1000} seconds`]);
  options.push(['-1', 'Only when I say so']);
  const now = chosen['after'] ?? String(Math.max(-1, proposed));
  return [
    select('after', 'When does a bank debit settle or fail?', options, now),
    select(
      'code',
      'Why does the bank refuse or return it?',
      returnCodes.map((code) => [code, `${code}: ${reasons[code]}`]),
      chosen['code'],
      'Only for a debit that fails or is returned.',
    ),
  ];
}

/**
 * POST /pay/:session
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 * @param {string} body
 */
export function submitPay(world, response, id, body) {
  const fields = parseFields(body);
  const row = world.store.transaction((tx) => tx.row('checkout.session', id));
  const session = world.store.transaction((tx) => tx.find('checkout.session', id));
  if (!row || !session) return sendProblem(response, 404, 'There is no such payment.');
  if (fields['step'] === 'cancel' && session.cancel_url) return redirect(response, filled(session.cancel_url, id));
  const outcome = outcomes.find((o) => o === fields['outcome']);
  if (!outcome) return showPay(world, response, id, { problem: 'Choose what should happen.', chosen: fields });
  const after = fields['after'] === undefined ? undefined : Number(fields['after']);
  if (after !== undefined && !Number.isSafeInteger(after))
    return showPay(world, response, id, { problem: 'Choose a delay from the list.', chosen: fields });
  try {
    const done = world.act(row.account, (act) =>
      pay(act, id, {
        outcome,
        after,
        code: fields['code'],
        email: fields['email'] ?? null,
        name: fields['name'] ?? null,
      }),
    );
    if (done.status === 'open')
      return showPay(world, response, id, { problem: 'Your card was declined.', chosen: fields });
    redirect(response, filled(done.success_url ?? `${world.url}/pay/${id}`, id));
  } catch (error) {
    if (!(error instanceof StripeFailure)) throw error;
    showPay(world, response, id, { problem: error.message, chosen: fields });
  }
}
