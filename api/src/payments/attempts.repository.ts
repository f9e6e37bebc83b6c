import { Injectable } from '@nestjs/common';
import { v4, v7 } from 'uuid';
import type { PaymentState } from '@tallypole/shared/schemas/payments';
import type { Tx } from '../common/unit-of-work.ts';
import type { SessionFacts } from './stripe-facts.ts';

export interface Attempt {
  id: string;
  number: number;
  key: string;
  state: 'waiting' | 'open' | 'over';
  triedAt: Date | null;
  trouble: string | null;
  createdAt: Date;
  paymentId: string;
  paymentState: PaymentState;
  amountCents: number;
  jobId: string;
  jobName: string;
  drawId: string;
  drawNumber: number;
  email: string;
  account: string | null;
}

@Injectable()
export class AttemptsRepository {
  /** A try with a random key of its own, stored before anybody is called. */
  async insert(tx: Tx, ids: { firmId: string; jobId: string; paymentId: string }, number: number, now: Date): Promise<string> {
    const id = v7();
    await tx.rows('insert into payment_attempt (firm_id, job_id, id, payment_id, number, stripe_key, created_at) values ($1, $2, $3, $4, $5, $6, $7)', [
      ids.firmId,
      ids.jobId,
      id,
      ids.paymentId,
      number,
      v4(),
      now,
    ]);
    return id;
  }

  async find(tx: Tx, attemptId: string): Promise<Attempt | undefined> {
    return await tx.one<Attempt>(
      `select a.id, a.number, a.stripe_key as key, a.state, a.tried_at as "triedAt", a.trouble, a.created_at as "createdAt", p.id as "paymentId",
         p.state as "paymentState", p.amount_cents as "amountCents", p.job_id as "jobId", j.name as "jobName", d.id as "drawId", d.number as "drawNumber",
         m.email, s.account
       from payment_attempt a join payment p on p.id = a.payment_id join job j on j.id = p.job_id join draw d on d.id = p.draw_id
         join person m on m.id = p.payer_id left join stripe_account s on s.firm_id = p.firm_id
       where a.id = $1`,
      [attemptId],
    );
  }

  /** From now on the object may exist over there. */
  async markTried(tx: Tx, attemptId: string, now: Date): Promise<void> {
    await tx.rows('update payment_attempt set tried_at = $2 where id = $1 and tried_at is null', [attemptId, now]);
  }

  async markTrouble(tx: Tx, attemptId: string, trouble: string): Promise<void> {
    await tx.rows(`update payment_attempt set trouble = $2 where id = $1 and state = 'waiting'`, [attemptId, trouble]);
  }

  /** Ends a try; false where it was over already. */
  async end(tx: Tx, attemptId: string, trouble: string): Promise<boolean> {
    return (await tx.one(`update payment_attempt set state = 'over', trouble = $2 where id = $1 and state <> 'over' returning id`, [attemptId, trouble])) !== undefined;
  }

  async open(tx: Tx, attempt: Attempt, session: SessionFacts): Promise<void> {
    await tx.rows(`update payment_attempt set state = 'open', session_id = $2, url = $3, expires_at = $4, trouble = null where id = $1 and state = 'waiting'`, [
      attempt.id,
      session.id,
      session.url,
      session.expiresAt,
    ]);
    await tx.rows('update payment set account = $2, session_id = $3, version = version + 1 where id = $1 and session_id is null', [attempt.paymentId, attempt.account, session.id]);
  }

  /** The open page of a payment that was started and should not be paid any more. */
  async openPage(tx: Tx, paymentId: string): Promise<{ account: string; sessionId: string } | undefined> {
    return await tx.one(
      `select p.account, p.session_id as "sessionId" from payment p where p.id = $1 and p.state = 'started' and p.account is not null and p.session_id is not null`,
      [paymentId],
    );
  }
}
