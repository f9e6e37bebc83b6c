import { Injectable } from '@nestjs/common';
import type { Loan, SetLoan } from '@tallypole/shared/schemas/loans';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class LoansRepository {
  async find(tx: Tx, jobId: string): Promise<Loan | undefined> {
    return (await tx.one<{ loan: Loan }>(LOAN, [jobId]))?.loan;
  }

  async lockJob(tx: Tx, jobId: string): Promise<string | undefined> {
    return (await tx.one<{ firm_id: string }>('select firm_id from job where id = $1 for no key update', [jobId]))?.firm_id;
  }

  /** Whether a draw was approved, which rests on the terms as they were. */
  async isDrawnOn(tx: Tx, jobId: string): Promise<boolean> {
    return (await tx.one('select 1 from draw where job_id = $1 and approved_at is not null limit 1', [jobId])) !== undefined;
  }

  async set(tx: Tx, firmId: string, jobId: string, loan: SetLoan, now: Date): Promise<void> {
    const { id, lenderName, amountCents, constructionCents, equityFirstCents, holdbackRate, consentLimitCents, shortfall, route } = loan;
    await tx.rows(
      `insert into loan (firm_id, job_id, id, lender_name, amount_cents, construction_cents, equity_first_cents, holdback_rate, consent_limit_cents, shortfall, route, created_by, created_at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, app.actor(), $12)
       on conflict (job_id) do update set lender_name = $4, amount_cents = $5, construction_cents = $6, equity_first_cents = $7, holdback_rate = $8,
         consent_limit_cents = $9, shortfall = $10, route = $11, version = loan.version + 1`,
      [firmId, jobId, id, lenderName, amountCents, constructionCents, equityFirstCents, holdbackRate, consentLimitCents, shortfall, route, now],
    );
  }
}

const LOAN = /* sql */ `
  select json_build_object('id', o.id, 'lenderName', o.lender_name, 'amountCents', o.amount_cents, 'constructionCents', o.construction_cents,
    'equityFirstCents', o.equity_first_cents, 'holdbackRate', o.holdback_rate, 'consentLimitCents', o.consent_limit_cents, 'shortfall', o.shortfall,
    'route', o.route, 'version', o.version,
    'disbursedCents', (select coalesce(sum(kept_cents), 0)::bigint from payment p where p.job_id = o.job_id and p.source = 'loan')) as loan
  from loan o where o.job_id = $1`;
