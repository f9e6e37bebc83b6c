import { emit } from '../events.mjs';
import { onboarded, restricted } from '../objects/account.mjs';
import { expire, outcomes, pay } from '../payments/checkout.mjs';
import { close, dispute, returnLate } from '../payments/disputes.mjs';
import { payOut } from '../payments/payouts.mjs';
import { finishRefund } from '../payments/refunds.mjs';
import { fail, settle } from '../payments/settlement.mjs';
import { choiceOf, onlyKnown, textOf, wholeOf, wrong } from './read.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('../types.d.ts').Kind} Kind
 * @typedef {import('./read.mjs').Wish} Wish
 */

/**
 * The account that an object belongs to.
 * @param {World} world
 * @param {Kind} kind
 * @param {string} id
 */
export function ownerOf(world, kind, id) {
  const row = world.store.transaction((tx) => tx.row(kind, id));
  if (!row) throw wrong(`There is no ${kind} ${id}`);
  return row.account;
}

/**
 * A payment is named by its PaymentIntent or by its session.
 * @param {World} world
 * @param {string} id
 */
function intentId(world, id) {
  if (!id.startsWith('cs_')) return id;
  const session = world.store.transaction((tx) => tx.find('checkout.session', id));
  if (typeof session?.payment_intent !== 'string') throw wrong(`Session ${id} has no payment yet`);
  return session.payment_intent;
}

/**
 * POST /_control/payments/:id/:step with an optional `code` (R01 …) or, for a dispute, `reason`.
 * @param {World} world
 * @param {string} id
 * @param {string} step
 * @param {Wish} wish
 */
export function movePayment(world, id, step, wish) {
  onlyKnown(wish, ['code', 'reason']);
  const intent = intentId(world, id);
  const code = textOf(wish, 'code');
  return world.act(ownerOf(world, 'payment_intent', intent), (act) => {
    if (step === 'settle') settle(act, intent);
    else if (step === 'fail') fail(act, intent, code);
    else if (step === 'return') return returnLate(act, intent, code);
    else if (step === 'dispute') return dispute(act, intent, textOf(wish, 'reason'));
    else throw wrong(`A payment can't ${step}; it can settle, fail, return, dispute`);
    return act.tx.find('payment_intent', intent) ?? {};
  });
}

/**
 * Settles every debit that is under way.
 * @param {World} world
 */
export function settleAll(world) {
  const open = [...world.store.ofKind('payment_intent').values()].filter(
    ({ value }) => 'status' in value && value.status === 'processing',
  );
  for (const { id, account } of open) world.act(account, (act) => settle(act, id));
  return { settled: open.map(({ id }) => id) };
}

/**
 * POST /_control/sessions/:id/pay `{ outcome, after_ms?, code?, email?, name? }` as the hosted page does; or …/expire.
 * @param {World} world
 * @param {string} id
 * @param {string} step
 * @param {Wish} wish
 */
export function moveSession(world, id, step, wish) {
  const account = ownerOf(world, 'checkout.session', id);
  if (step === 'expire') return world.act(account, (act) => expire(act, id));
  if (step !== 'pay') throw wrong(`A session can't ${step}; it can pay, expire`);
  onlyKnown(wish, ['outcome', 'after_ms', 'code', 'email', 'name']);
  const outcome = choiceOf(wish, 'outcome', outcomes);
  if (outcome === undefined) throw wrong(`outcome is missing: one of ${outcomes.join(', ')}`);
  const choice = {
    outcome,
    after: wholeOf(wish, 'after_ms'),
    code: textOf(wish, 'code'),
    email: textOf(wish, 'email') ?? null,
    name: textOf(wish, 'name') ?? null,
  };
  return world.act(account, (act) => pay(act, id, choice));
}

/**
 * @param {World} world
 * @param {string} id
 * @param {string} step
 */
export function moveDispute(world, id, step) {
  if (step !== 'won' && step !== 'lost') throw wrong(`A dispute can't be ${step}; it can be won or lost`);
  return world.act(ownerOf(world, 'dispute', id), (act) => close(act, id, step));
}

/**
 * @param {World} world
 * @param {string} id
 * @param {string} step
 */
export function moveRefund(world, id, step) {
  if (step !== 'succeed' && step !== 'fail') throw wrong(`A refund can't ${step}; it can succeed or fail`);
  return world.act(ownerOf(world, 'refund', id), (act) =>
    finishRefund(act, id, step === 'succeed' ? 'succeeded' : 'failed'),
  );
}

/**
 * @param {World} world
 * @param {string} id
 * @param {string} step
 */
export function moveAccount(world, id, step) {
  ownerOf(world, 'account', id);
  return world.act(id, (act) => {
    const account = act.tx.find('account', id);
    if (!account) throw wrong(`There is no account ${id}`);
    if (step === 'payout') return payOut(act);
    if (step !== 'onboard' && step !== 'restrict')
      throw wrong(`An account can't ${step}; it can onboard, restrict, payout`);
    const after = act.tx.change('account', id, step === 'onboard' ? onboarded(account, act.now) : restricted(account));
    emit(act, 'account.updated', after, {
      charges_enabled: account.charges_enabled,
      payouts_enabled: account.payouts_enabled,
    });
    return after;
  });
}
