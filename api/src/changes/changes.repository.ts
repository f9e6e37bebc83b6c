import { Injectable } from '@nestjs/common';
import type { OwnersLine } from '@tallypole/shared/pricing';
import type { AttachReview, ChangeRow, CostLine, DraftChange, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import type { Tx } from '../common/unit-of-work.ts';

export interface OfChange {
  firmId: string;
  jobId: string;
  changeId: string;
}

/** A draft with everything that its price came to. */
export interface PricedDraft extends Omit<DraftChange, 'terms' | 'id'> {
  terms: PricingTermsInput;
  ownTerms: boolean;
  chargedCents: number;
  /** What a review looks at: changes with what is built, not with its price. */
  scopeSha256: string;
  ownersLines: readonly OwnersLine[];
}

@Injectable()
export class ChangesRepository {
  /** Whether the firm lets its site people see prices. */
  async siteSeesPrices(tx: Tx, jobId: string): Promise<boolean> {
    return (await tx.one<{ sees: boolean }>('select f.site_sees_prices as sees from job j join firm f on f.id = j.firm_id where j.id = $1', [jobId]))?.sees ?? false;
  }

  async lockJob(tx: Tx, jobId: string): Promise<void> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
  }

  async lock(tx: Tx, changeId: string): Promise<void> {
    await tx.rows('select id from change where id = $1 for no key update', [changeId]);
  }

  async nextNumber(tx: Tx, jobId: string): Promise<{ firmId: string; number: number } | undefined> {
    return await tx.one('update job set last_change_number = last_change_number + 1 where id = $1 returning firm_id as "firmId", last_change_number as number', [jobId]);
  }

  async insert(tx: Tx, { firmId, jobId, changeId }: OfChange, numbered: { number: number; revision: string }, draft: PricedDraft, now: Date): Promise<void> {
    await tx.rows(
      `insert into change (firm_id, job_id, id, number, revision, title, reason, origin, structural, presentation, no_charge, charged_cents, days, milestone_id,
         good_until, scope_sha256, created_by, created_at) values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, app.actor(), $17)`,
      [firmId, jobId, changeId, numbered.number, numbered.revision, ...fields(draft), now],
    );
    await this.setParts(tx, { firmId, jobId, changeId }, draft);
  }

  /** False where somebody else has edited it in the meantime. */
  async edit(tx: Tx, of: OfChange, version: number, draft: PricedDraft): Promise<boolean> {
    const row = await tx.one(
      `update change set state = 'draft', title = $3, reason = $4, origin = $5, structural = $6, presentation = $7, no_charge = $8, charged_cents = $9, days = $10,
         milestone_id = $11, good_until = $12, scope_sha256 = $13, version = version + 1 where id = $1 and version = $2 returning id`,
      [of.changeId, version, ...fields(draft)],
    );
    if (!row) return false;
    await this.setParts(tx, of, draft);
    return true;
  }

  /** Sets the pictures; gives back how many of them are photos of this job that can be shown. */
  async setPhotos(tx: Tx, { firmId, jobId, changeId }: OfChange, photoIds: readonly string[]): Promise<number> {
    await tx.rows('delete from change_photo where change_id = $1', [changeId]);
    const set = await tx.rows(
      `insert into change_photo (firm_id, job_id, change_id, position, photo_id)
       select $1, $2, $3, i.position, p.id from unnest($4::uuid[]) with ordinality as i (id, position) join photo p on p.id = i.id where p.job_id = $2 and p.state = 'ready' returning photo_id`,
      [firmId, jobId, changeId, photoIds],
    );
    return set.length;
  }

  private async setParts(tx: Tx, { firmId, jobId, changeId }: OfChange, draft: PricedDraft): Promise<void> {
    await tx.rows('delete from change_line where change_id = $1', [changeId]);
    await tx.rows(
      `insert into change_line (firm_id, job_id, change_id, position, description, effect, cents)
       select $1, $2, $3, l.position, l.value->>'description', l.value->>'effect', (l.value->>'cents')::bigint from jsonb_array_elements($4::jsonb) with ordinality as l (value, position)`,
      [firmId, jobId, changeId, JSON.stringify(draft.ownersLines)],
    );
    await tx.rows('delete from change_scope where change_id = $1', [changeId]);
    await tx.rows(
      `insert into change_scope (firm_id, job_id, change_id, position, description, effect, quantity, unit)
       select $1, $2, $3, l.position, l.value->>'description', l.value->>'effect', l.value->>'quantity', l.value->>'unit' from jsonb_array_elements($4::jsonb) with ordinality as l (value, position)`,
      [firmId, jobId, changeId, JSON.stringify(draft.lines.filter((line) => line.class !== 'labor' && line.class !== 'fee'))],
    );
    await tx.rows(
      `insert into change_cost (firm_id, job_id, change_id, lines, terms, own_terms, terms_reason) values ($1, $2, $3, $4::jsonb, $5::jsonb, $6, $7)
       on conflict (change_id) do update set lines = excluded.lines, terms = excluded.terms, own_terms = excluded.own_terms, terms_reason = excluded.terms_reason`,
      [firmId, jobId, changeId, JSON.stringify(draft.lines satisfies CostLine[]), JSON.stringify(draft.terms), draft.ownTerms, draft.termsReason],
    );
  }

  async addReview(tx: Tx, { firmId, jobId, changeId }: OfChange, review: AttachReview, now: Date): Promise<void> {
    await tx.rows(
      `insert into change_review (firm_id, job_id, id, change_id, kind, file_id, reviewer_name, license, reviewed_on, note, by_person, at, scope_sha256)
       select $1, $2, $3, c.id, $5, $6, $7, $8, $9, $10, app.actor(), $11, c.scope_sha256 from change c where c.id = $4`,
      [firmId, jobId, review.id, changeId, review.kind, review.fileId, review.reviewerName, review.license, review.reviewedOn, review.note, now],
    );
    await tx.rows(`update change set state = 'in_review', version = version + 1 where id = $1`, [changeId]);
  }

  async setState(tx: Tx, changeId: string, state: ChangeState): Promise<void> {
    await tx.rows('update change set state = $2, version = version + 1 where id = $1', [changeId, state]);
  }

  async issue(tx: Tx, changeId: string, now: Date): Promise<void> {
    await tx.rows(`update change set state = 'issued', issued_at = $2, version = version + 1 where id = $1`, [changeId, now]);
  }

  /** An end: declined, lapsed, withdrawn, superseded. */
  async close(tx: Tx, changeId: string, state: ChangeState, reason: string, now: Date): Promise<void> {
    await tx.rows('update change set state = $2, closed_reason = $3, closed_at = $4, closed_by = app.actor(), version = version + 1 where id = $1', [changeId, state, reason, now]);
  }

  async list(tx: Tx, jobId: string, states: readonly ChangeState[]): Promise<ChangeRow[]> {
    const rows = await tx.rows<{ row: ChangeRow }>(
      `select json_build_object('id', c.id, 'number', c.number, 'revision', c.revision, 'title', c.title, 'state', c.state, 'structural', c.structural,
         'chargedCents', c.charged_cents, 'days', c.days, 'milestoneId', c.milestone_id, 'milestoneName', m.name, 'goodUntil', c.good_until) as row
       from change c left join milestone m on m.id = c.milestone_id where c.job_id = $1 and c.state = any($2) order by c.number, c.revision`,
      [jobId, states],
    );
    return rows.map(({ row }) => row);
  }

  async firmTerms(tx: Tx, jobId: string): Promise<PricingTermsInput | undefined> {
    return (await tx.one<{ terms: PricingTermsInput }>('select p.terms from firm_pricing p join job j on j.firm_id = p.firm_id where j.id = $1', [jobId]))?.terms;
  }

  async designers(tx: Tx, jobId: string): Promise<string[]> {
    const rows = await tx.rows<{ id: string }>(`select person_id as id from job_member where job_id = $1 and role = 'designer' and ended_at is null`, [jobId]);
    return rows.map(({ id }) => id);
  }

  async milestoneState(tx: Tx, jobId: string, milestoneId: string): Promise<string | undefined> {
    return (await tx.one<{ state: string }>('select state from milestone where job_id = $1 and id = $2', [jobId, milestoneId]))?.state;
  }
}

const fields = (d: PricedDraft): unknown[] => [d.title, d.reason, d.origin, d.structural, d.presentation, d.noCharge, d.chargedCents, d.days, d.milestoneId, d.goodUntil, d.scopeSha256];
