import { Injectable } from '@nestjs/common';
import type { DrawRow } from '@tallypole/shared/schemas/draws';
import type { DrawState, ReviewState } from '@tallypole/shared/schemas/draw-states';
import type { Tx } from '../common/unit-of-work.ts';
import { KEPT } from '../payments/payment-sql.repository.ts';
import type { DrawBasis } from './draw-facts.ts';

export interface LineEntry {
  lineId: string;
  workCents: number;
  onHandCents: number;
}

/** What a draw came to when it was sent. */
export interface Submitted {
  basis: DrawBasis;
  effectHash: string;
  dueCents: number;
  homeownerCents: number;
  loanCents: number;
  reviewState: ReviewState;
}

export interface Approved {
  basis: DrawBasis;
  effectHash: string;
  dueOn: string;
  dueCents: number;
  homeownerCents: number;
  loanCents: number;
  state: DrawState;
}

/** A row as stored: before approval a draw's sums follow from its lines and are not kept. */
export type StoredRow = Omit<DrawRow, 'dueCents' | 'homeownerCents' | 'loanCents' | 'openHomeownerCents' | 'openLoanCents'> & {
  dueCents: number | null;
  homeownerCents: number | null;
  loanCents: number | null;
};

@Injectable()
export class DrawsRepository {
  /** Locks the job and takes its next draw number. */
  async nextNumber(tx: Tx, jobId: string): Promise<{ firmId: string; number: number } | undefined> {
    return await tx.one('update job set last_draw_number = last_draw_number + 1 where id = $1 returning firm_id as "firmId", last_draw_number as number', [jobId]);
  }

  async lockJob(tx: Tx, jobId: string): Promise<void> {
    await tx.rows('select 1 from job where id = $1 for no key update', [jobId]);
  }

  async openDraw(tx: Tx, jobId: string): Promise<number | undefined> {
    return (await tx.one<{ number: number }>(`select number from draw where job_id = $1 and state in ('draft', 'submitted', 'returned')`, [jobId]))?.number;
  }

  async insert(tx: Tx, draw: { firmId: string; jobId: string; id: string; number: number; throughOn: string }, now: Date): Promise<void> {
    const { firmId, jobId, id, number, throughOn } = draw;
    await tx.rows('insert into draw (firm_id, job_id, id, number, through_on, created_by, created_at) values ($1, $2, $3, $4, $5, app.actor(), $6)', [firmId, jobId, id, number, throughOn, now]);
  }

  async setLines(tx: Tx, draw: { firmId: string; jobId: string; id: string }, lines: readonly LineEntry[]): Promise<void> {
    await tx.rows(
      `insert into draw_line (firm_id, job_id, draw_id, line_id, work_cents, on_hand_cents)
       select $1, $2, $3, r."lineId", r."workCents", r."onHandCents" from jsonb_to_recordset($4::jsonb) as r ("lineId" uuid, "workCents" bigint, "onHandCents" bigint)
       on conflict (draw_id, line_id) do update set work_cents = excluded.work_cents, on_hand_cents = excluded.on_hand_cents`,
      [draw.firmId, draw.jobId, draw.id, JSON.stringify(lines)],
    );
  }

  /** With the approval, lines that were objected to fall to what is approved. */
  async lowerLines(tx: Tx, drawId: string, lines: readonly LineEntry[]): Promise<void> {
    if (lines.length === 0) return;
    await tx.rows(
      `update draw_line l set work_cents = r."workCents", on_hand_cents = r."onHandCents"
       from jsonb_to_recordset($2::jsonb) as r ("lineId" uuid, "workCents" bigint, "onHandCents" bigint) where l.draw_id = $1 and l.line_id = r."lineId"`,
      [drawId, JSON.stringify(lines)],
    );
  }

  /** A new version of a draw that is still being written; false where somebody was faster. */
  async edit(tx: Tx, drawId: string, version: number, fields: { throughOn: string; note: string }): Promise<boolean> {
    const row = await tx.one('update draw set through_on = $3, note = $4, version = version + 1 where id = $1 and version = $2 returning id', [drawId, version, fields.throughOn, fields.note]);
    return row !== undefined;
  }

  /** Replaces the photos of a draw; gives back how many of them belong to the job and can be shown. */
  async setPhotos(tx: Tx, draw: { firmId: string; jobId: string; id: string }, photoIds: readonly string[]): Promise<number> {
    await tx.rows('delete from draw_photo where draw_id = $1', [draw.id]);
    const rows = await tx.rows(
      `insert into draw_photo (firm_id, job_id, draw_id, photo_id)
       select $1, $2, $3, p.id from photo p where p.job_id = $2 and p.id = any($4::uuid[]) and p.state <> 'unreadable' returning photo_id`,
      [draw.firmId, draw.jobId, draw.id, photoIds],
    );
    return rows.length;
  }

  async submit(tx: Tx, drawId: string, submitted: Submitted, by: string, now: Date): Promise<void> {
    const { reviewState, ...kept } = submitted;
    await tx.rows(
      `update draw set state = 'submitted', review_state = $2, submitted = $3, submitted_at = $4, submitted_by = $5, return_reason = null, version = version + 1 where id = $1`,
      [drawId, reviewState, JSON.stringify(kept), now, by],
    );
  }

  async setState(tx: Tx, drawId: string, state: DrawState, returnReason: string | null = null): Promise<void> {
    await tx.rows('update draw set state = $2, return_reason = $3, version = version + 1 where id = $1', [drawId, state, returnReason]);
  }

  async approve(tx: Tx, drawId: string, approved: Approved, now: Date): Promise<void> {
    const { basis, effectHash, dueOn, dueCents, homeownerCents, loanCents, state } = approved;
    await tx.rows(
      `update draw set state = $2, basis = $3, effect_hash = $4, approved_at = $5, due_on = $6, due_cents = $7, homeowner_cents = $8, loan_cents = $9, version = version + 1
       where id = $1`,
      [drawId, state, JSON.stringify(basis), effectHash, now, dueOn, dueCents, homeownerCents, loanCents],
    );
  }

  async list(tx: Tx, jobId: string, draws: 'all' | 'sent'): Promise<StoredRow[]> {
    const row = await tx.one<{ rows: StoredRow[] }>(LIST, [jobId, draws === 'all']);
    return row?.rows ?? [];
  }
}

const LIST = /* sql */ `
  select coalesce(json_agg(json_build_object('id', d.id, 'number', d.number, 'state', d.state, 'reviewState', d.review_state, 'throughOn', d.through_on,
    'dueCents', d.due_cents, 'homeownerCents', d.homeowner_cents, 'loanCents', d.loan_cents, 'paidHomeownerCents', ${KEPT('homeowner')},
    'paidLoanCents', ${KEPT('loan')}, 'dueOn', d.due_on, 'submittedAt', to_char(d.submitted_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
    'approvedAt', to_char(d.approved_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by d.number desc), '[]') as rows
  from draw d where d.job_id = $1 and ($2 or d.submitted_at is not null)`;
