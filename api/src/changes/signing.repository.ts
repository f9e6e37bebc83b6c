import { Injectable } from '@nestjs/common';
import type { SignChange } from '@tallypole/shared/schemas/changes';
import type { Tx } from '../common/unit-of-work.ts';
import type { OfChange } from './changes.repository.ts';

export interface Browser {
  address: string;
  userAgent: string;
}

@Injectable()
export class SigningRepository {
  async sign(tx: Tx, { firmId, jobId, changeId }: OfChange, signature: SignChange, browser: Browser, now: Date): Promise<void> {
    await tx.rows(
      `insert into change_signature (firm_id, job_id, id, change_id, person_id, typed_name, effect_hash, document_sha256, consent_version, at, from_address, user_agent)
       values ($1, $2, $3, $4, app.actor(), $5, $6, $7, $8, $9, $10, $11)`,
      [firmId, jobId, signature.id, changeId, signature.typedName, signature.effectHash, signature.documentSha256, signature.consentVersion, now, browser.address, browser.userAgent.slice(0, 300)],
    );
  }

  /** The contract moves: its changes' sum and its days, computed by the caller under the job's lock. */
  async moveContract(tx: Tx, jobId: string, changesApprovedCents: number, daysApproved: number): Promise<void> {
    await tx.rows('update job set changes_approved_cents = $2, days_approved = $3, version = version + 1 where id = $1', [jobId, changesApprovedCents, daysApproved]);
  }

  async approve(tx: Tx, changeId: string, now: Date): Promise<void> {
    await tx.rows(`update change set state = 'approved', closed_at = $2, version = version + 1 where id = $1`, [changeId, now]);
  }

  /** The change becomes lines of the schedule of values, on its milestone. */
  async addScheduleLines(tx: Tx, { firmId, jobId, changeId }: OfChange, lines: readonly { id: string; number: string; description: string; cents: number }[], now: Date): Promise<void> {
    await tx.rows(
      `insert into schedule_line (firm_id, job_id, id, number, position, phase, description, scheduled_cents, kind, milestone_id, change_id, created_at)
       select $1, $2, (l.value->>'id')::uuid, l.value->>'number', (select coalesce(max(position), 0) from schedule_line where job_id = $2) + l.position,
         coalesce(m.name, 'Changes'), l.value->>'description', (l.value->>'cents')::bigint, 'change', c.milestone_id, c.id, $5
       from jsonb_array_elements($4::jsonb) with ordinality as l (value, position), change c left join milestone m on m.id = c.milestone_id where c.id = $3`,
      [firmId, jobId, changeId, JSON.stringify(lines), now],
    );
  }

  /** Other changes that are out for signature say "before" figures that have just moved: their papers are made anew and asked for again. */
  async askAgain(tx: Tx, jobId: string, butChangeId: string | null, now: Date): Promise<string[]> {
    await tx.rows(
      `update change_signature set superseded_at = $3 where superseded_at is null and change_id in (
         select id from change where job_id = $1 and id is distinct from $2::uuid and state in ('issued', 'partly_signed'))`,
      [jobId, butChangeId, now],
    );
    const rows = await tx.rows<{ id: string }>(
      `update change set state = 'issued', effect_hash = null, document_id = null, version = version + 1
       where job_id = $1 and id is distinct from $2::uuid and state in ('issued', 'partly_signed') returning id`,
      [jobId, butChangeId],
    );
    return rows.map(({ id }) => id);
  }

  /** The revisions of this number that were out before: this one takes their place. */
  async supersede(tx: Tx, jobId: string, number: number, butChangeId: string, now: Date): Promise<void> {
    await tx.rows(
      `update change set state = 'superseded', closed_at = $4, closed_by = app.actor(), version = version + 1
       where job_id = $1 and number = $2 and id <> $3 and state in ('issued', 'partly_signed', 'declined', 'lapsed', 'withdrawn')`,
      [jobId, number, butChangeId, now],
    );
  }
}
