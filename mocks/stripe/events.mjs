import { newId } from './ids.mjs';

/**
 * @typedef {import('./types.d.ts').Act} Act
 * @typedef {import('./types.d.ts').Delivery} Delivery
 * @typedef {import('./types.d.ts').Rule} Rule
 * @typedef {import('./types.d.ts').StoredEvent} StoredEvent
 */

/** The version whose shapes the stand-in speaks: the one that SDK 23.1.0 pins. */
export const apiVersion = '2026-10-28.endive';

/**
 * Writes an event and what must be sent about it, in the act's own transaction.
 * @param {Act} act
 * @param {import('stripe').Stripe.Event.Type} type
 * @param {object} object as it stands after the change
 * @param {object} [before] the old values of the fields that changed
 */
export function emit(act, type, object, before) {
  const { tx, world } = act;
  const endpoints = tx.all('webhook_endpoint').filter(({ value, account }) => listens(act, value, account, type));
  /** @type {StoredEvent} */
  const event = {
    id: newId('evt'),
    object: 'event',
    ...(act.account === world.platform ? {} : { account: act.account }),
    api_version: apiVersion,
    created: act.now,
    data: { object, ...(before ? { previous_attributes: before } : {}) },
    livemode: false,
    pending_webhooks: endpoints.length,
    request: act.request,
    type,
  };
  tx.put('event', act.account, event);
  for (const { value } of endpoints) plan(act, event, value.id);
}

/**
 * @param {Act} act
 * @param {import('stripe').Stripe.WebhookEndpoint} endpoint
 * @param {string} owner
 * @param {string} type
 */
function listens(act, endpoint, owner, type) {
  const connect = act.tx.find('endpoint_detail', endpoint.id)?.connect;
  const own = owner === act.account;
  const connected = owner === act.world.platform && act.account !== act.world.platform;
  const reached = connect === 'both' ? own || connected : connect ? connected : own;
  return reached && endpoint.status === 'enabled' && endpoint.enabled_events.some((e) => e === '*' || e === type);
}

/**
 * @param {Act} act
 * @param {StoredEvent} event
 * @param {string} endpoint
 */
function plan(act, event, endpoint) {
  const rule = takeRule(act, event);
  const now = Date.now();
  /** @type {Delivery} */
  const delivery = {
    id: newId('del'),
    event: event.id,
    type: event.type,
    endpoint,
    state: rule?.action === 'hold' ? 'held' : rule?.action === 'drop' ? 'dropped' : 'waiting',
    at: rule?.action === 'delay' ? now + (rule.ms ?? 0) : now,
    created: now,
    copies: rule?.action === 'twice' ? 2 : 1,
    attempts: [],
  };
  if (rule?.action === 'bad_signature' || rule?.action === 'old_timestamp' || rule?.action === 'no_signature') {
    delivery.forge = rule.action;
  }
  act.tx.put('delivery', act.account, delivery);
}

/**
 * The oldest rule that fits, counted down.
 * @param {Act} act
 * @param {StoredEvent} event
 * @returns {Rule | undefined}
 */
function takeRule(act, event) {
  const { tx } = act;
  const rule = tx
    .all('rule')
    .map((r) => r.value)
    .find((r) => fits(r, event));
  if (rule && rule.times !== null) {
    if (rule.times <= 1) tx.remove('rule', rule.id);
    else tx.change('rule', rule.id, { times: rule.times - 1 });
  }
  return rule;
}

/**
 * @param {Rule} rule its type may end in `*`
 * @param {StoredEvent} event
 */
function fits(rule, event) {
  if (rule.account !== undefined && rule.account !== event.account) return false;
  return rule.type.endsWith('*') ? event.type.startsWith(rule.type.slice(0, -1)) : event.type === rule.type;
}
