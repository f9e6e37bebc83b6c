import { Injectable } from '@nestjs/common';
import type { AllowDraw, FundDraw, Inspected } from '@tallypole/shared/schemas/draws';
import type { ReviewState } from '@tallypole/shared/schemas/draw-states';
import type { FundingRoute } from '@tallypole/shared/schemas/loans';
import type { Tx } from '../common/unit-of-work.ts';

interface OfDraw {
  firmId: string;
  jobId: string;
  drawId: string;
}

@Injectable()
export class ReviewsRepository {
  async insert(tx: Tx, { firmId, jobId, drawId }: OfDraw, step: 'inspected' | 'allowed', review: Inspected & { conditions?: string }, now: Date): Promise<void> {
    await tx.rows(
      `insert into lender_review (firm_id, job_id, id, draw_id, step, on_date, note, conditions, by_person, at) values ($1, $2, $3, $4, $5, $6, $7, $8, app.actor(), $9)`,
      [firmId, jobId, review.id, drawId, step, review.onDate, review.note, review.conditions ?? '', now],
    );
  }

  async allow(tx: Tx, { firmId, jobId }: OfDraw, reviewId: string, lines: AllowDraw['lines']): Promise<void> {
    await tx.rows(
      `insert into lender_allowance (firm_id, job_id, review_id, line_id, percent, reason)
       select $1, $2, $3, r."lineId", r.percent, r.reason from jsonb_to_recordset($4::jsonb) as r ("lineId" uuid, percent integer, reason text)`,
      [firmId, jobId, reviewId, JSON.stringify(lines)],
    );
  }

  async setReviewState(tx: Tx, drawId: string, state: ReviewState): Promise<void> {
    await tx.rows('update draw set review_state = $2, version = version + 1 where id = $1', [drawId, state]);
  }

  async setSplit(tx: Tx, drawId: string, homeownerCents: number, loanCents: number): Promise<void> {
    await tx.rows('update draw set homeowner_cents = $2, loan_cents = $3, version = version + 1 where id = $1', [drawId, homeownerCents, loanCents]);
  }

  async route(tx: Tx, jobId: string): Promise<FundingRoute | undefined> {
    return (await tx.one<{ route: FundingRoute }>('select route from loan where job_id = $1', [jobId]))?.route;
  }

  async fund(tx: Tx, { firmId, jobId, drawId }: OfDraw, funding: FundDraw & { paymentId: string; route: FundingRoute }, now: Date): Promise<void> {
    const { id, paymentId, amountCents, fundedOn, reference, route } = funding;
    await tx.rows(
      `insert into lender_funding (firm_id, job_id, id, draw_id, payment_id, amount_cents, funded_on, reference, route, by_person, at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, app.actor(), $10)`,
      [firmId, jobId, id, drawId, paymentId, amountCents, fundedOn, reference, route, now],
    );
  }

  /** What was sent for a draw so far, on its way or received. */
  async sentCents(tx: Tx, drawId: string): Promise<number> {
    const row = await tx.one<{ cents: number }>('select coalesce(sum(amount_cents), 0)::bigint as cents from lender_funding where draw_id = $1', [drawId]);
    return row?.cents ?? 0;
  }

  async actorName(tx: Tx): Promise<string> {
    return (await tx.one<{ name: string }>(`select coalesce(name, email) as name from person where id = app.actor()`))?.name ?? 'The lender';
  }
}
