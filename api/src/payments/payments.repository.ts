import { Injectable } from '@nestjs/common';
import type { DrawState } from '@tallypole/shared/schemas/draw-states';
import type { Payment, PaymentState } from '@tallypole/shared/schemas/payments';
import type { Source } from '../ledger/entry.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { KEPT, PAYMENT_JSON } from './payment-sql.repository.ts';

/** A draw as far as paying it goes. */
export interface DrawToPay {
  id: string;
  number: number;
  state: DrawState;
  dueCents: number;
  homeownerCents: number;
  loanCents: number;
  keptHomeownerCents: number;
  keptLoanCents: number;
}

export interface JobToPay {
  firmId: string;
  jobId: string;
  jobName: string;
  firmName: string;
  timeZone: string;
  depositCents: number;
}

export interface NewPayment {
  id: string;
  drawId: string | null;
  method: Payment['method'];
  source: Source;
  state: PaymentState;
  amountCents: number;
  keptCents: number;
  reference: string;
  startedOn: string;
  settledOn: string | null;
}

@Injectable()
export class PaymentsRepository {
  /** Locks the job, as every act on its money does first. */
  async lockJob(tx: Tx, jobId: string): Promise<JobToPay | undefined> {
    return await tx.one<JobToPay>(
      `select j.firm_id as "firmId", j.id as "jobId", j.name as "jobName", f.name as "firmName", j.time_zone as "timeZone",
         j.deposit_cents as "depositCents" from job j join firm f on f.id = j.firm_id where j.id = $1 for no key update of j`,
      [jobId],
    );
  }

  async drawToPay(tx: Tx, jobId: string, drawId: string): Promise<DrawToPay | undefined> {
    return await tx.one<DrawToPay>(
      `select d.id, d.number, d.state, d.due_cents as "dueCents", d.homeowner_cents as "homeownerCents", d.loan_cents as "loanCents",
         ${KEPT('homeowner')} as "keptHomeownerCents", ${KEPT('loan')} as "keptLoanCents" from draw d where d.job_id = $1 and d.id = $2`,
      [jobId, drawId],
    );
  }

  async depositReceived(tx: Tx, jobId: string): Promise<number> {
    const row = await tx.one<{ cents: number }>('select coalesce(sum(kept_cents), 0)::bigint as cents from payment where job_id = $1 and draw_id is null', [jobId]);
    return row?.cents ?? 0;
  }

  /** The checkout payment of a draw that is started or on its way, with the address of its page while that is good. */
  async underWay(tx: Tx, drawId: string, now: Date): Promise<{ payment: Payment; url: string | null; stale: boolean } | undefined> {
    return await tx.one(
      `select ${PAYMENT_JSON} as payment, case when a.state = 'open' and a.expires_at > $2 then a.url end as url, coalesce(a.expires_at <= $2, false) as stale
       from payment p join draw d on d.id = p.draw_id left join payment_attempt a on a.payment_id = p.id and a.state <> 'over'
       where p.draw_id = $1 and p.method = 'checkout' and p.state in ('started', 'processing')`,
      [drawId, now],
    );
  }

  async progress(tx: Tx, jobId: string, paymentId: string, now: Date): Promise<{ payment: Payment; url: string | null } | undefined> {
    return await tx.one(
      `select ${PAYMENT_JSON} as payment, case when p.state = 'started' and a.state = 'open' and a.expires_at > $3 then a.url end as url
       from payment p left join draw d on d.id = p.draw_id left join payment_attempt a on a.payment_id = p.id and a.state <> 'over'
       where p.job_id = $1 and p.id = $2`,
      [jobId, paymentId, now],
    );
  }

  async takesPayments(tx: Tx, jobId: string): Promise<boolean> {
    return (await tx.one<{ takes: boolean }>('select app.takes_payments($1) as takes', [jobId]))?.takes ?? false;
  }

  async insert(tx: Tx, job: JobToPay, payment: NewPayment, payerId: string, now: Date): Promise<void> {
    const { id, drawId, method, source, state, amountCents, keptCents, reference, startedOn, settledOn } = payment;
    await tx.rows(
      `insert into payment (firm_id, job_id, id, draw_id, method, source, state, amount_cents, kept_cents, reference, started_on, settled_on, payer_id, created_at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14)`,
      [job.firmId, job.jobId, id, drawId, method, source, state, amountCents, keptCents, reference, startedOn, settledOn, payerId, now],
    );
  }

  /** Locks the lender's payment that waits for the builder's word. */
  async awaitingReceipt(tx: Tx, jobId: string, paymentId: string): Promise<{ drawId: string; amountCents: number; state: PaymentState } | undefined> {
    return await tx.one(
      `select draw_id as "drawId", amount_cents as "amountCents", state from payment where job_id = $1 and id = $2 and method = 'loan_advance' for no key update`,
      [jobId, paymentId],
    );
  }

  async receive(tx: Tx, paymentId: string, receivedOn: string): Promise<void> {
    await tx.rows(`update payment set state = 'settled', kept_cents = amount_cents, settled_on = $2, version = version + 1 where id = $1`, [paymentId, receivedOn]);
  }

  async setDrawState(tx: Tx, drawId: string, state: DrawState): Promise<void> {
    await tx.rows('update draw set state = $2, version = version + 1 where id = $1 and state <> $2', [drawId, state]);
  }

  /** Newest first. What the firm pays for processing is the firm's own. */
  async list(tx: Tx, jobId: string, forFirm: boolean): Promise<Payment[]> {
    const row = await tx.one<{ payments: Payment[] }>(
      `select coalesce(json_agg(${PAYMENT_JSON} order by p.created_at desc, p.id desc), '[]') as payments
       from payment p left join draw d on d.id = p.draw_id where p.job_id = $1`,
      [jobId],
    );
    return (row?.payments ?? []).map((payment) => (forFirm ? payment : { ...payment, feeCents: null }));
  }
}
