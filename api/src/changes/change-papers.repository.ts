import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import type { Anchor } from './change-paper.ts';

/** What only the worker does to a change. */
@Injectable()
export class ChangePapersRepository {
  async setDocument(tx: Tx, changeId: string, documentId: string, effectHash: string): Promise<void> {
    await tx.rows('update change set document_id = $2, effect_hash = $3 where id = $1', [changeId, documentId, effectHash]);
  }

  async setSignedDocument(tx: Tx, changeId: string, documentId: string): Promise<void> {
    await tx.rows('update change set signed_document_id = $2 where id = $1', [changeId, documentId]);
  }

  async head(tx: Tx, jobId: string): Promise<Anchor> {
    const row = await tx.one<Anchor>(`select seq, hash from record_head where job_id = $1 and chain = 'shared'`, [jobId]);
    if (!row) throw new Error('The job has no record.');
    return row;
  }

  async lenders(tx: Tx, jobId: string): Promise<string[]> {
    const rows = await tx.rows<{ id: string }>(`select person_id as id from job_member where job_id = $1 and role = 'lender' and ended_at is null`, [jobId]);
    return rows.map(({ id }) => id);
  }
}
