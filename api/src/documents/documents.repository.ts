import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';

export interface DocumentRow {
  id: string;
  name: string;
  sha256: string;
  bytes: number;
  storageKey: string;
}

export interface NewDocument extends DocumentRow {
  firmId: string;
  jobId: string;
  kind: 'change' | 'signed_change';
  subjectId: string;
  /** What it says is agreed and the hash of that text; null for papers that nobody signs as they are. */
  agreed: { text: string; hash: string } | null;
  createdAt: Date;
}

@Injectable()
export class DocumentsRepository {
  async add(tx: Tx, d: NewDocument): Promise<void> {
    await tx.rows('insert into document (firm_id, job_id, id, kind, subject_id, name, sha256, bytes, storage_key, created_at, effect, effect_hash) values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)', [
      d.firmId, d.jobId, d.id, d.kind, d.subjectId, d.name, d.sha256, d.bytes, d.storageKey, d.createdAt, d.agreed?.text ?? null, d.agreed?.hash ?? null,
    ]);
  }

  /** The effect that a paper of this subject said, found by the paper's SHA-256. */
  async effectShown(tx: Tx, subjectId: string, sha256: string): Promise<{ effect: string | null } | undefined> {
    return await tx.one('select effect from document where subject_id = $1 and sha256 = $2', [subjectId, sha256]);
  }

  async find(tx: Tx, jobId: string, documentId: string): Promise<DocumentRow | undefined> {
    return await tx.one<DocumentRow>('select id, name, sha256, bytes, storage_key as "storageKey" from document where job_id = $1 and id = $2', [jobId, documentId]);
  }
}
