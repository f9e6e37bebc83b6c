import { expire } from './payments/checkout.mjs';
import { dispute, returnLate } from './payments/disputes.mjs';
import { finishRefund } from './payments/refunds.mjs';
import { fail, settle } from './payments/settlement.mjs';

/**
 * @typedef {import('./types.d.ts').Act} Act
 * @typedef {import('./types.d.ts').Plan} Plan
 */

/** Performs plans when their time has come, each in a transaction of its own. */
export class Ticker {
  /** @param {import('./types.d.ts').World} world */
  constructor(world) {
    this.world = world;
    this.stopped = false;
    this.busy = false;
    /** @type {NodeJS.Timeout | undefined} */
    this.timer = undefined;
  }

  /** Each act calls this when it is done, also the ones that are performed here. */
  tick() {
    if (this.stopped || this.busy) return;
    clearTimeout(this.timer);
    this.busy = true;
    try {
      while (this.performNext());
    } finally {
      this.busy = false;
    }
    const next = this.earliest();
    if (next?.plan.at != null)
      this.timer = setTimeout(() => this.tick(), Math.min(60_000, Math.max(1, next.plan.at - this.world.nowMs())));
  }

  stop() {
    this.stopped = true;
    clearTimeout(this.timer);
  }

  performNext() {
    const due = this.earliest();
    if (due?.plan.at == null || due.plan.at > this.world.nowMs()) return false;
    try {
      this.world.act(due.account, (act) => perform(act, due.plan));
    } catch (error) {
      this.world.log(
        `could not ${due.plan.step} ${due.plan.id}: ${error instanceof Error ? error.message : String(error)}`,
      );
      this.world.store.transaction((tx) => tx.remove('plan', due.plan.id));
    }
    return true;
  }

  earliest() {
    /** @type {{ account: string, plan: Plan } | undefined} */
    let first;
    for (const { account, value } of this.world.store.ofKind('plan').values()) {
      const plan = /** @type {Plan} */ (value);
      if (plan.at !== null && (first?.plan.at == null || plan.at < first.plan.at)) first = { account, plan };
    }
    return first;
  }
}

/**
 * @param {Act} act
 * @param {Plan} plan
 */
function perform(act, { id, step, code }) {
  switch (step) {
    case 'settle':
      return settle(act, id);
    case 'fail':
      return fail(act, id, code);
    case 'return':
      return void returnLate(act, id, code);
    case 'dispute':
      return void dispute(act, id);
    case 'expire':
      return void expire(act, id);
    case 'refund':
      return void finishRefund(act, id, 'succeeded');
  }
}
