import { newId } from './ids.mjs';
import { newEndpoint } from './resources/webhook-endpoints.mjs';
import { Store } from './store.mjs';
import { Ticker } from './ticker.mjs';
import { Sender } from './webhooks/sender.mjs';

/**
 * @typedef {import('./types.d.ts').Settings} Settings
 * @typedef {import('./types.d.ts').World} World
 */

const dayMs = 86_400_000;

/** @type {Settings} */
export const usual = {
  settle_after_ms: 20_000,
  return_after_ms: 20_000,
  search_lag_ms: 0,
  retry_base_ms: 1000,
  webhook_timeout_ms: 10_000,
  clock_offset_ms: 0,
};

/**
 * The stand-in without its doors: store, clock, settings, timers.
 * @param {{ dataDir: string, log: (line: string) => void }} options
 */
export function openWorld({ dataDir, log }) {
  const store = new Store(dataDir);
  const settings = () =>
    /** @type {Settings} */ ({
      ...usual,
      ...Object.fromEntries(
        [...store.ofKind('setting').values()].map((r) => [r.id, /** @type {{ value: number }} */ (r.value).value]),
      ),
    });
  const nowMs = () => Date.now() + settings().clock_offset_ms;
  /** @type {World} */
  const world = {
    store,
    platform: '',
    application: '',
    url: '',
    settings,
    nowMs,
    log,
    act(account, work, request = { id: null, idempotency_key: null }) {
      const result = store.transaction((tx) => work({ tx, world, account, now: Math.floor(nowMs() / 1000), request }));
      queueMicrotask(look);
      return result;
    },
    send: (delivery, forge) => sender.attempt(delivery, forge),
  };
  const ticker = new Ticker(world);
  const sender = new Sender(world);
  function look() {
    ticker.tick();
    sender.tick();
  }
  foundPlatform(world);
  prune(world);
  return {
    world,
    look,
    close() {
      ticker.stop();
      sender.stop();
      store.close();
    },
  };
}

/** @param {World} world */
export function foundPlatform(world) {
  world.store.transaction((tx) => {
    const known =
      tx.find('platform', 'platform') ??
      tx.put('platform', '', { id: 'platform', account: newId('acct', 16), application: newId('ca', 32) });
    world.platform = known.account;
    world.application = known.application;
  });
}

/**
 * The endpoint that the environment names gets the platform's events and those of every connected account.
 * @param {World} world
 * @param {{ url: string, secret: string } | undefined} hook undefined removes it
 */
export function setEnvironmentEndpoint(world, hook) {
  world.store.transaction((tx) => {
    const before = tx.all('endpoint_detail').find(({ value }) => value.connect === 'both')?.value;
    if (!hook) {
      if (before)
        for (const kind of /** @type {const} */ (['webhook_endpoint', 'endpoint_detail'])) tx.remove(kind, before.id);
      return;
    }
    const fresh = newEndpoint(Math.floor(Date.now() / 1000), hook.url, ['*'], { description: 'From the environment' });
    const endpoint = before
      ? tx.change('webhook_endpoint', before.id, { url: hook.url })
      : tx.put('webhook_endpoint', world.platform, fresh);
    tx.put('endpoint_detail', world.platform, { id: endpoint.id, secret: hook.secret, connect: 'both' });
  });
}

/**
 * Forgets what Stripe forgets too: idempotency keys after a day, events after 30 with their deliveries.
 * @param {World} world
 */
function prune({ store, nowMs }) {
  const now = nowMs();
  store.prune(({ kind, value }) => {
    if (kind === 'key') return now - /** @type {{ at: number }} */ (value).at > dayMs;
    if (kind === 'event') return now - /** @type {{ created: number }} */ (value).created * 1000 > 30 * dayMs;
    if (kind === 'delivery') return now - /** @type {{ created: number }} */ (value).created > 30 * dayMs;
    return false;
  });
}
