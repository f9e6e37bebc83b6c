import { invalid, missing } from '../errors.mjs';
import { apiVersion } from '../events.mjs';
import { newId } from '../ids.mjs';
import { listPage } from '../lists.mjs';
import { address, listOf, metadata, paging, readParams, required, text, yesNo } from '../params.mjs';
import { merged } from './merge.mjs';

/**
 * @typedef {import('../router.mjs').Call} Call
 * @typedef {import('stripe').Stripe.WebhookEndpoint} WebhookEndpoint
 */

const most = 16;

/**
 * The secret is shown here and never again.
 * @param {Call} call
 * @returns {WebhookEndpoint}
 */
export function createEndpoint({ act, form }) {
  const asked = readParams(
    {
      url: required(address()),
      enabled_events: required(listOf(text(255), 500)),
      connect: yesNo(),
      api_version: text(50),
      description: text(),
      metadata: metadata(),
    },
    form,
  );
  if (asked.api_version !== undefined && asked.api_version !== apiVersion) {
    throw invalid(`This stand-in speaks API version ${apiVersion} only.`, { param: 'api_version' });
  }
  if (act.tx.all('webhook_endpoint', act.account).length >= most)
    throw invalid(`You have reached the maximum of ${most} test webhook endpoints.`);
  const secret = newId('whsec', 32);
  const endpoint = act.tx.put(
    'webhook_endpoint',
    act.account,
    newEndpoint(act.now, asked.url, asked.enabled_events, {
      api_version: asked.api_version ?? null,
      description: asked.description ?? null,
      metadata: asked.metadata ?? {},
    }),
  );
  act.tx.put('endpoint_detail', act.account, { id: endpoint.id, secret, connect: asked.connect ?? false });
  return { ...endpoint, secret };
}

/**
 * @param {number} now seconds
 * @param {string} url
 * @param {string[]} events
 * @param {Partial<WebhookEndpoint>} [more]
 * @returns {WebhookEndpoint}
 */
export const newEndpoint = (now, url, events, more = {}) => ({
  id: newId('we'),
  object: 'webhook_endpoint',
  api_version: null,
  application: null,
  created: now,
  description: null,
  enabled_events: events,
  livemode: false,
  metadata: {},
  status: 'enabled',
  url,
  ...more,
});

/** @param {Call} call */
export function listEndpoints({ act, form, path }) {
  return listPage(act, 'webhook_endpoint', path, readParams(paging, form));
}

/** @param {Call} call */
export function updateEndpoint({ act, params, form }) {
  const asked = readParams(
    {
      url: address(),
      enabled_events: listOf(text(255), 500),
      description: text(),
      disabled: yesNo(),
      metadata: metadata(),
    },
    form,
  );
  const endpoint = known(act, params['id'] ?? '');
  return act.tx.change('webhook_endpoint', endpoint.id, {
    ...(asked.url === undefined ? {} : { url: asked.url }),
    ...(asked.enabled_events === undefined ? {} : { enabled_events: asked.enabled_events }),
    ...(asked.description === undefined ? {} : { description: asked.description }),
    ...(asked.disabled === undefined ? {} : { status: asked.disabled ? 'disabled' : 'enabled' }),
    ...(asked.metadata ? { metadata: merged(endpoint.metadata, asked.metadata) } : {}),
  });
}

/** @param {Call} call */
export function deleteEndpoint({ act, params, form }) {
  readParams({}, form);
  const { id } = known(act, params['id'] ?? '');
  act.tx.remove('webhook_endpoint', id);
  act.tx.remove('endpoint_detail', id);
  return { id, object: 'webhook_endpoint', deleted: true };
}

/**
 * @param {import('../types.d.ts').Act} act
 * @param {string} id
 */
function known(act, id) {
  const endpoint = act.tx.find('webhook_endpoint', id, act.account);
  if (!endpoint) throw missing('webhook endpoint', id, 'webhook_endpoint');
  return endpoint;
}
