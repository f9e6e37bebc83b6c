import { faultModes } from '../faults.mjs';
import { sendJson } from '../http.mjs';
import { newId } from '../ids.mjs';
import { StripeFailure } from '../errors.mjs';
import { usual } from '../world.mjs';
import { addRule, listDeliveries, release, sendDelivery, sendEvent } from './deliveries.mjs';
import { moveAccount, moveDispute, movePayment, moveRefund, moveSession, settleAll } from './money.mjs';
import { choiceOf, onlyKnown, readWish, textOf, timesOf, wholeOf, wrong } from './read.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('./read.mjs').Wish} Wish
 */

/**
 * Everything under /_control: what a test does to the stand-in. Bodies and answers are JSON; the real service has none
 * of this.
 * @param {World} world
 * @param {import('node:http').IncomingMessage} request
 * @param {import('node:http').ServerResponse} response
 * @param {string} body
 * @param {() => void} reset forgets all and starts afresh
 */
export async function answerControl(world, request, response, body, reset) {
  const url = new URL(request.url ?? '/', 'http://stand-in');
  const [, , what = '', id = '', step = ''] = url.pathname.split('/');
  try {
    if (body !== '' && !(request.headers['content-type'] ?? '').startsWith('application/json'))
      throw wrong('Send application/json');
    const wish = readWish(body);
    const answer = await control(world, `${request.method ?? 'GET'} ${what}`, {
      id: decodeURIComponent(id),
      step,
      wish,
      query: url.searchParams,
      reset,
    });
    sendJson(response, 200, answer);
  } catch (error) {
    if (!(error instanceof StripeFailure))
      world.log(`${url.pathname}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
    const message = error instanceof Error ? error.message : String(error);
    sendJson(response, error instanceof StripeFailure ? error.status : 500, { error: { message } });
  }
}

/**
 * @param {World} world
 * @param {string} what
 * @param {{ id: string, step: string, wish: Wish, query: URLSearchParams, reset: () => void }} how
 * @returns {object | Promise<object>}
 */
function control(world, what, { id, step, wish, query, reset }) {
  switch (what) {
    case 'GET ':
      return overview(world);
    case 'POST settings':
      return changeSettings(world, wish);
    case 'POST clock':
      return advanceClock(world, wish);
    case 'POST faults':
      return addFault(world, wish);
    case 'DELETE faults':
      return removeAll(world, 'fault');
    case 'POST rules':
      return addRule(world, wish);
    case 'DELETE rules':
      return removeAll(world, 'rule');
    case 'GET deliveries':
      return listDeliveries(world, query);
    case 'POST deliveries':
      return id === 'release' ? release(world, wish) : sendDelivery(world, id, wish);
    case 'POST events':
      return sendEvent(world, id, wish);
    case 'POST payments':
      return id === 'settle-all' ? settleAll(world) : movePayment(world, id, step, wish);
    case 'POST sessions':
      return moveSession(world, id, step, wish);
    case 'POST disputes':
      return moveDispute(world, id, step);
    case 'POST refunds':
      return moveRefund(world, id, step);
    case 'POST accounts':
      return moveAccount(world, id, step);
    case 'POST reset':
      reset();
      return { reset: true };
    default:
      throw new StripeFailure(404, { type: 'control_error', message: `There is no control ${what}` }, false);
  }
}

/** @param {World} world */
function overview(world) {
  const { store } = world;
  const values = (/** @type {import('../types.d.ts').Kind} */ kind) =>
    [...store.ofKind(kind).values()].map((r) => r.value);
  const kinds = /** @type {const} */ ([
    'account',
    'checkout.session',
    'payment_intent',
    'charge',
    'refund',
    'dispute',
    'event',
    'delivery',
  ]);
  return {
    platform: world.platform,
    settings: world.settings(),
    now: new Date(world.nowMs()).toISOString(),
    counts: Object.fromEntries(kinds.map((kind) => [kind, store.ofKind(kind).size])),
    plans: values('plan'),
    faults: values('fault'),
    rules: values('rule'),
  };
}

/**
 * @param {World} world
 * @param {Wish} wish
 */
export function changeSettings(world, wish) {
  const { clock_offset_ms: _clock, ...settable } = usual;
  onlyKnown(wish, Object.keys(settable));
  world.act(world.platform, ({ tx }) => {
    for (const id of Object.keys(wish)) tx.put('setting', world.platform, { id, value: wholeOf(wish, id) ?? 0 });
  });
  return world.settings();
}

/**
 * Moves the stand-in's clock ahead: sessions expire, keys are forgotten, what is due by then happens.
 * @param {World} world
 * @param {Wish} wish
 */
function advanceClock(world, wish) {
  onlyKnown(wish, ['advance_ms']);
  const step = wholeOf(wish, 'advance_ms') ?? 0;
  if (step < 0) throw wrong('The clock goes forward only');
  const value = world.settings().clock_offset_ms + step;
  world.act(world.platform, ({ tx }) => tx.put('setting', world.platform, { id: 'clock_offset_ms', value }));
  return { now: new Date(world.nowMs()).toISOString() };
}

/**
 * @param {World} world
 * @param {Wish} wish
 */
function addFault(world, wish) {
  onlyKnown(wish, ['mode', 'method', 'path', 'status', 'ms', 'times']);
  const mode = choiceOf(wish, 'mode', faultModes);
  if (mode === undefined) throw wrong(`mode is missing: one of ${faultModes.join(', ')}`);
  const method = textOf(wish, 'method');
  const path = textOf(wish, 'path');
  const fault = {
    id: newId('fault'),
    mode,
    status: wholeOf(wish, 'status') ?? 500,
    ms: wholeOf(wish, 'ms') ?? 1000,
    times: timesOf(wish),
    ...(method === undefined ? {} : { method }),
    ...(path === undefined ? {} : { path }),
  };
  return world.act(world.platform, ({ tx }) => tx.put('fault', world.platform, fault));
}

/**
 * @param {World} world
 * @param {'fault' | 'rule'} kind
 */
function removeAll(world, kind) {
  return world.act(world.platform, ({ tx }) => {
    const all = tx.all(kind);
    for (const { value } of all) tx.remove(kind, value.id);
    return { removed: all.length };
  });
}
