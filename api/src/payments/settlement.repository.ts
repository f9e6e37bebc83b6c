import { Injectable } from '@nestjs/common';
import type { DrawState } from '@tallypole/shared/schemas/draw-states';
import type { PaymentState } from '@tallypole/shared/schemas/payments';
import type { Tx } from '../common/unit-of-work.ts';
import { KEPT } from './payment-sql.repository.ts';
import type { Told } from './to-tell.repository.ts';

/** Where Stripe's objects of a payment are. */
export interface PaymentAddress {
  account: string | null;
  sessionId: string | null;
  intentId: string | null;
  state: PaymentState;
}

/** Everything that writing a payment's news needs, read under the job's lock in one statement. */
export interface PaymentToSettle {
  id: string;
  state: PaymentState;
  amountCents: number;
  keptCents: number;
  feeCents: number | null;
  booked: string[];
  firmId: string;
  jobId: string;
  jobName: string;
  firmName: string;
  timeZone: string;
  drawId: string;
  drawNumber: number;
  drawState: DrawState;
  dueCents: number;
  homeownerCents: number;
  keptHomeownerCents: number;
  keptLoanCents: number;
  told: Told[];
}

export interface PaymentNews {
  state: PaymentState;
  keptCents: number;
  feeCents: number | null;
  settledOn: string | null;
  trouble: string | null;
  intentId: string | null;
}

@Injectable()
export class SettlementRepository {
  async address(tx: Tx, paymentId: string): Promise<PaymentAddress | undefined> {
    return await tx.one<PaymentAddress>(
      `select coalesce(p.account, s.account) as account, p.session_id as "sessionId", p.intent_id as "intentId", p.state
       from payment p left join stripe_account s on s.firm_id = p.firm_id where p.id = $1 and p.method = 'checkout'`,
      [paymentId],
    );
  }

  async lockJobOf(tx: Tx, paymentId: string): Promise<void> {
    await tx.rows('select 1 from job where id = (select job_id from payment where id = $1) for no key update', [paymentId]);
  }

  async toSettle(tx: Tx, paymentId: string, causes: readonly string[]): Promise<PaymentToSettle | undefined> {
    return await tx.one<PaymentToSettle>(TO_SETTLE, [paymentId, causes]);
  }

  /** The payment, its draw and the end of its page in one statement. */
  async write(tx: Tx, payment: { id: string; drawId: string }, news: PaymentNews, drawState: DrawState, now: Date): Promise<void> {
    await tx.rows(WRITE, [payment.id, news.state, news.keptCents, news.feeCents, news.settledOn, news.trouble, news.intentId, now, payment.drawId, drawState]);
  }

  async touch(tx: Tx, paymentId: string, intentId: string | null, now: Date): Promise<void> {
    await tx.rows('update payment set checked_at = $2, intent_id = coalesce(intent_id, $3) where id = $1', [paymentId, now, intentId]);
  }

  /** Lets deferred constraints speak while the transaction can still be rolled back in order. */
  async settleConstraints(tx: Tx): Promise<void> {
    await tx.rows('set constraints all immediate');
  }
}

const TO_SETTLE = /* sql */ `
  select p.id, p.state, p.amount_cents as "amountCents", p.kept_cents as "keptCents", p.fee_cents as "feeCents",
    coalesce((select array_agg(e.cause_id) from ledger_entry e where e.job_id = p.job_id and e.cause_id = any($2::text[])), '{}') as booked,
    j.firm_id as "firmId", j.id as "jobId", j.name as "jobName", f.name as "firmName", j.time_zone as "timeZone",
    d.id as "drawId", d.number as "drawNumber", d.state as "drawState", d.due_cents as "dueCents", d.homeowner_cents as "homeownerCents",
    ${KEPT('homeowner')} as "keptHomeownerCents", ${KEPT('loan')} as "keptLoanCents",
    (select coalesce(json_agg(json_build_object('personId', t.person_id, 'role', t.role)), '[]')
      from app.to_tell(j.id, '{homeowner,principal,books}') t) as told
  from payment p join job j on j.id = p.job_id join firm f on f.id = j.firm_id join draw d on d.id = p.draw_id
  where p.id = $1`;

const WRITE = /* sql */ `
  with paid as (
    update payment set state = $2, kept_cents = $3, fee_cents = coalesce($4, fee_cents), settled_on = coalesce(settled_on, $5::date), trouble = $6,
      intent_id = coalesce(intent_id, $7), checked_at = $8, version = version + 1 where id = $1 returning id),
  over as (
    update payment_attempt set state = 'over' where payment_id = $1 and state <> 'over' and $2 <> 'started')
  update draw set state = $10, version = version + 1 where id = $9 and state <> $10`;
