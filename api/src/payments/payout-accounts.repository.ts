import { Injectable } from '@nestjs/common';
import { v4 } from 'uuid';
import type { Tx } from '../common/unit-of-work.ts';
import type { AccountFacts } from './stripe-facts.ts';

export interface PayoutAccount {
  firmId: string;
  firmName: string;
  email: string;
  account: string | null;
  key: string;
  triedAt: Date | null;
  chargesEnabled: boolean;
  payoutsEnabled: boolean;
  linkUrl: string | null;
  linkExpiresAt: Date | null;
  trouble: string | null;
  eventsUntil: Date;
}

@Injectable()
export class PayoutAccountsRepository {
  /** The firm's row, made on the first call with the random key under which the account will be asked for. */
  async ask(tx: Tx, firmId: string, now: Date): Promise<void> {
    await tx.rows(
      `insert into stripe_account (firm_id, stripe_key, events_until, created_by, created_at) values ($1, $2, $3, app.actor(), $3)
       on conflict (firm_id) do update set link_url = null, link_expires_at = null, trouble = null`,
      [firmId, v4(), now],
    );
  }

  async find(tx: Tx, firmId: string): Promise<PayoutAccount | undefined> {
    return await tx.one<PayoutAccount>(
      `select a.firm_id as "firmId", f.name as "firmName", p.email, a.account, a.stripe_key as key, a.tried_at as "triedAt",
         a.charges_enabled as "chargesEnabled", a.payouts_enabled as "payoutsEnabled", a.link_url as "linkUrl", a.link_expires_at as "linkExpiresAt",
         a.trouble, a.events_until as "eventsUntil"
       from stripe_account a join firm f on f.id = a.firm_id join person p on p.id = a.created_by where a.firm_id = $1`,
      [firmId],
    );
  }

  async markTried(tx: Tx, firmId: string, now: Date): Promise<void> {
    await tx.rows('update stripe_account set tried_at = $2 where firm_id = $1 and tried_at is null', [firmId, now]);
  }

  /** Another key, where Stripe keeps its own error under the last one. */
  async newKey(tx: Tx, firmId: string): Promise<void> {
    await tx.rows(`update stripe_account set stripe_key = $2, trouble = 'stripe_error' where firm_id = $1 and account is null`, [firmId, v4()]);
  }

  async setFacts(tx: Tx, firmId: string, facts: AccountFacts, now: Date): Promise<void> {
    await tx.rows(
      `update stripe_account set account = coalesce(account, $2), charges_enabled = $3, payouts_enabled = $4, details_submitted = $5, checked_at = $6, trouble = null
       where firm_id = $1`,
      [firmId, facts.id, facts.chargesEnabled, facts.payoutsEnabled, facts.detailsSubmitted, now],
    );
  }

  async setLink(tx: Tx, firmId: string, url: string, expiresAt: Date): Promise<void> {
    await tx.rows('update stripe_account set link_url = $2, link_expires_at = $3 where firm_id = $1', [firmId, url, expiresAt]);
  }

  async sweptUntil(tx: Tx, firmId: string, until: Date): Promise<void> {
    await tx.rows('update stripe_account set events_until = greatest(events_until, $2) where firm_id = $1', [firmId, until]);
  }

  /** The firms that have an account, for the worker's round. */
  async firms(tx: Tx): Promise<string[]> {
    return (await tx.rows<{ firm_id: string }>('select firm_id from app.stripe_firms()')).map(({ firm_id }) => firm_id);
  }
}
