import { newId } from '../ids.mjs';
import { choiceOf, onlyKnown, textOf, timesOf, wholeOf, wrong } from './read.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('../types.d.ts').Delivery} Delivery
 * @typedef {import('../types.d.ts').Rule} Rule
 * @typedef {import('./read.mjs').Wish} Wish
 */

const forges = /** @type {const} */ (['bad_signature', 'old_timestamp', 'no_signature']);
/** @type {Rule['action'][]} */
const actions = ['hold', 'drop', 'twice', 'delay', ...forges];

/**
 * GET /_control/deliveries with `state`, `type`, `event`, `account`: the oldest first.
 * @param {World} world
 * @param {URLSearchParams} query
 */
export function listDeliveries(world, query) {
  const rows = world.store.transaction((tx) => tx.all('delivery'));
  const fits = (/** @type {string} */ name, /** @type {string} */ value) =>
    !query.has(name) || query.get(name) === value;
  const data = rows
    .filter(
      ({ account, value: d }) =>
        fits('state', d.state) && fits('type', d.type) && fits('event', d.event) && fits('account', account),
    )
    .map(({ account, value }) => ({ ...value, account }));
  return { data };
}

/**
 * POST /_control/deliveries/:id/send `{ times?, forge? }`: now, one after another, whatever the state.
 * @param {World} world
 * @param {string} id
 * @param {Wish} wish
 */
export async function sendDelivery(world, id, wish) {
  onlyKnown(wish, ['times', 'forge']);
  if (!world.store.transaction((tx) => tx.find('delivery', id))) throw wrong(`There is no delivery ${id}`);
  const forge = choiceOf(wish, 'forge', forges);
  const attempts = [];
  for (let left = timesOf(wish) ?? 1; left > 0; left -= 1) attempts.push(await world.send(id, forge));
  return { attempts };
}

/**
 * POST /_control/events/:id/send: to every endpoint that the event was meant for.
 * @param {World} world
 * @param {string} id
 * @param {Wish} wish
 */
export async function sendEvent(world, id, wish) {
  const { data } = listDeliveries(world, new URLSearchParams({ event: id }));
  if (data.length === 0) throw wrong(`There is no delivery of event ${id}`);
  const attempts = [];
  for (const delivery of data) attempts.push(...(await sendDelivery(world, delivery.id, wish)).attempts);
  return { attempts };
}

/**
 * POST /_control/deliveries/release `{ order?: 'created' | 'reversed' }`: sends all that is held, one after another.
 * @param {World} world
 * @param {Wish} wish
 */
export async function release(world, wish) {
  onlyKnown(wish, ['order']);
  const { data } = listDeliveries(world, new URLSearchParams({ state: 'held' }));
  if (choiceOf(wish, 'order', ['created', 'reversed']) === 'reversed') data.reverse();
  const sent = [];
  for (const { id, type } of data) {
    const attempt = await world.send(id);
    sent.push({ id, type, ...attempt });
    // What was refused is no longer held back: it is tried again like any other.
    world.act(world.platform, ({ tx }) => {
      if (tx.find('delivery', id)?.state === 'held') tx.change('delivery', id, { state: 'waiting', at: Date.now() });
    });
  }
  return { sent };
}

/**
 * POST /_control/rules `{ type, action, ms?, times?, account? }`, for events that are still to come.
 * @param {World} world
 * @param {Wish} wish
 */
export function addRule(world, wish) {
  onlyKnown(wish, ['type', 'action', 'ms', 'times', 'account']);
  const action = choiceOf(wish, 'action', actions);
  if (action === undefined) throw wrong(`action is missing: one of ${actions.join(', ')}`);
  const ms = wholeOf(wish, 'ms');
  const account = textOf(wish, 'account');
  /** @type {Rule} */
  const rule = {
    id: newId('rule'),
    type: textOf(wish, 'type') ?? '*',
    action,
    times: timesOf(wish),
    ...(ms === undefined ? {} : { ms }),
    ...(account === undefined ? {} : { account }),
  };
  return world.act(world.platform, ({ tx }) => tx.put('rule', world.platform, rule));
}
