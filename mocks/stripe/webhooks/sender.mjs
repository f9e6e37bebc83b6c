import { present } from '../present.mjs';
import { signatureHeader } from './signature.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('../types.d.ts').Delivery} Delivery
 * @typedef {import('../types.d.ts').Attempt} Attempt
 * @typedef {import('../types.d.ts').Forge} Forge
 */

const mostAtOnce = 8;
const longestPauseMs = 60_000;
const giveUpAfterMs = 3 * 86_400_000;
const attemptsKept = 50;

/** Sends what is due and tries again, with doubling pauses, until it is accepted. All it knows is in the store. */
export class Sender {
  /** @param {World} world */
  constructor(world) {
    this.world = world;
    /** @type {Set<string>} */
    this.flying = new Set();
    this.stopped = false;
    this.abort = new AbortController();
    /** @type {NodeJS.Timeout | undefined} */
    this.timer = undefined;
  }

  /** Starts what is due and sets the clock for what isn't. */
  tick() {
    clearTimeout(this.timer);
    if (this.stopped) return;
    const now = Date.now();
    let next = Infinity;
    for (const { value } of this.world.store.ofKind('delivery').values()) {
      const delivery = /** @type {Delivery} */ (value);
      if (delivery.state !== 'waiting' || this.flying.has(delivery.id)) continue;
      if (delivery.at > now) next = Math.min(next, delivery.at);
      else if (this.flying.size < mostAtOnce) this.start(delivery.id);
    }
    if (next < Infinity) this.timer = setTimeout(() => this.tick(), Math.min(next - now, 60_000));
  }

  /** @param {string} id */
  start(id) {
    this.attempt(id)
      .catch((error) => this.world.log(`delivery ${id}: ${describe(error)}`))
      .finally(() => this.tick());
  }

  stop() {
    this.stopped = true;
    clearTimeout(this.timer);
    this.abort.abort();
  }

  /**
   * One attempt, whatever the delivery's state.
   * @param {string} id
   * @param {Forge} [forge]
   * @returns {Promise<Attempt>}
   */
  async attempt(id, forge) {
    this.flying.add(id);
    try {
      const attempt = await this.post(id, forge);
      if (!this.stopped) this.note(id, attempt);
      return attempt;
    } finally {
      this.flying.delete(id);
    }
  }

  /**
   * @param {string} id
   * @param {Forge} [asked]
   * @returns {Promise<Attempt>}
   */
  async post(id, asked) {
    const { store } = this.world;
    const { body, endpoint, secret, delivery } = store.transaction((tx) => {
      const delivery = tx.find('delivery', id);
      if (!delivery) throw new Error(`There is no delivery ${id}`);
      const event = tx.find('event', delivery.event);
      const now = Math.floor(this.world.nowMs() / 1000);
      return {
        // Indented as Stripe sends it: whoever verifies must take the bytes as they came.
        body: event ? JSON.stringify(present(tx, 'event', event, now), null, 2) : undefined,
        endpoint: tx.find('webhook_endpoint', delivery.endpoint),
        secret: tx.find('endpoint_detail', delivery.endpoint)?.secret,
        delivery,
      };
    });
    const started = Date.now();
    // A forged header goes out once; the attempts after it are honest.
    const forge = asked ?? (delivery.attempts.length === 0 ? delivery.forge : undefined);
    const noted = { at: started, ...(forge ? { forge } : {}) };
    if (!endpoint || secret === undefined || body === undefined)
      return { ...noted, ms: 0, error: 'The endpoint or the event is gone' };
    const signature = signatureHeader(body, secret, forge);
    try {
      const response = await fetch(endpoint.url, {
        method: 'POST',
        body,
        headers: {
          'Content-Type': 'application/json; charset=utf-8',
          'User-Agent': 'Stripe/1.0 (+https://stripe.com/docs/webhooks)',
          ...(signature === undefined ? {} : { 'Stripe-Signature': signature }),
        },
        redirect: 'manual',
        signal: AbortSignal.any([this.abort.signal, AbortSignal.timeout(this.world.settings().webhook_timeout_ms)]),
      });
      await response.arrayBuffer();
      return { ...noted, ms: Date.now() - started, status: response.status };
    } catch (error) {
      return { ...noted, ms: Date.now() - started, error: describe(error) };
    }
  }

  /**
   * @param {string} id
   * @param {Attempt} attempt
   */
  note(id, attempt) {
    const { store } = this.world;
    store.transaction((tx) => {
      const delivery = tx.find('delivery', id);
      if (!delivery) return; // reset while it was under way
      const gone = !tx.find('webhook_endpoint', delivery.endpoint);
      tx.change('delivery', id, {
        ...after(delivery, attempt, this.world.settings().retry_base_ms, gone),
        attempts: [...delivery.attempts, attempt].slice(-attemptsKept),
      });
    });
  }
}

/**
 * @param {Delivery} delivery
 * @param {Attempt} attempt
 * @param {number} pause milliseconds before the first repetition
 * @param {boolean} gone the endpoint was deleted
 * @returns {Partial<Delivery>}
 */
function after(delivery, attempt, pause, gone) {
  const now = Date.now();
  if (gone) return { state: 'gave_up' };
  if (attempt.status !== undefined && attempt.status >= 200 && attempt.status < 300) {
    if (attempt.forge) return {}; // an endpoint that accepts a forgery hasn't had the real one
    const copies = delivery.copies - 1;
    return copies > 0 ? { copies, state: 'waiting', at: now } : { copies: 0, state: 'delivered' };
  }
  if (delivery.state !== 'waiting') return {};
  if (now - delivery.created > giveUpAfterMs) return { state: 'gave_up' };
  return { at: now + Math.min(longestPauseMs, pause * 2 ** Math.min(16, delivery.attempts.length)) };
}

/**
 * By its fields, not by its class: an error may come from another realm.
 * @param {unknown} error
 */
function describe(error) {
  const { name, message, cause } = /** @type {{ name?: unknown, message?: unknown, cause?: { code?: unknown } }} */ (
    error
  );
  return name === 'TimeoutError' ? 'timed out' : String(cause?.code ?? message ?? error);
}
