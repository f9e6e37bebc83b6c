import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import type { StripeNews } from './stripe-facts.ts';

export interface StoredEvent {
  account: string;
  id: string;
  type: string;
  objectId: string;
  paymentIntent: string | null;
  handledAt: Date | null;
}

@Injectable()
export class StripeEventsRepository {
  constructor(private readonly queue: QueueRepository) {}

  /** From a webhook: nobody is signed in, a definer function stores it. What is stored is handled later, once. */
  async store(tx: Tx, news: StripeNews, now: Date): Promise<void> {
    const { account, id, type, objectId, paymentIntent, createdAt } = news;
    const row = await tx.one<{ firm_id: string | null; is_new: boolean }>('select * from app.store_stripe_event($1, $2, $3, $4, $5, $6, $7)', [account, id, type, objectId, paymentIntent, createdAt, now]);
    if (row?.firm_id && row.is_new) await this.enqueue(tx, row.firm_id, news);
  }

  /** From the sweep: the firm is known, and only what no webhook brought is new. */
  async storeSwept(tx: Tx, firmId: string, news: StripeNews, now: Date): Promise<void> {
    const row = await tx.one(
      `insert into stripe_event (account, id, firm_id, type, object_id, payment_intent, created_at, received_at, via)
       values ($1, $2, $3, $4, $5, $6, $7, $8, 'sweep') on conflict (account, id) do nothing returning id`,
      [news.account, news.id, firmId, news.type, news.objectId, news.paymentIntent, news.createdAt, now],
    );
    if (row) await this.enqueue(tx, firmId, news);
  }

  async find(tx: Tx, account: string, id: string): Promise<StoredEvent | undefined> {
    return await tx.one<StoredEvent>(
      `select account, id, type, object_id as "objectId", payment_intent as "paymentIntent", handled_at as "handledAt" from stripe_event where account = $1 and id = $2`,
      [account, id],
    );
  }

  async markHandled(tx: Tx, account: string, id: string, now: Date): Promise<void> {
    await tx.rows('update stripe_event set handled_at = $3 where account = $1 and id = $2 and handled_at is null', [account, id, now]);
  }

  /** The payment that an event is about, by what we know of it already. */
  async paymentOf(tx: Tx, event: StoredEvent): Promise<string | undefined> {
    const row = await tx.one<{ id: string }>('select id from payment where account = $1 and (intent_id = $2 or session_id = $3)', [event.account, event.paymentIntent, event.objectId]);
    return row?.id;
  }

  async paymentExists(tx: Tx, paymentId: string): Promise<boolean> {
    return (await tx.one('select id from payment where id = $1', [paymentId])) !== undefined;
  }

  /** Asks again for what was stored and never handled, and for payments that nobody has looked at for a while. */
  async remind(tx: Tx, firmId: string, now: Date): Promise<void> {
    const events = await tx.rows<{ account: string; id: string }>(
      `select account, id from stripe_event where firm_id = $1 and handled_at is null and received_at < $2::timestamptz - interval '1 minute' limit 200`,
      [firmId, now],
    );
    for (const { account, id } of events) await this.enqueue(tx, firmId, { account, id });
    const stale = await tx.rows<{ id: string }>(
      `select id from payment where firm_id = $1 and method = 'checkout' and (state in ('started', 'processing') or (state = 'settled' and fee_cents is null))
         and coalesce(checked_at, created_at) < $2::timestamptz - interval '10 minutes' limit 200`,
      [firmId, now],
    );
    await this.queue.enqueueMany(tx, 'check_payment', stale.map(({ id }) => ({ key: `check:${id}`, payload: { firmId, paymentId: id } })));
  }

  private async enqueue(tx: Tx, firmId: string, { account, id }: { account: string; id: string }): Promise<void> {
    await this.queue.enqueue(tx, 'handle_stripe_event', { firmId, account, eventId: id }, { key: `event:${account}:${id}` });
  }
}
