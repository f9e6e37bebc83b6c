import { Injectable } from '@nestjs/common';
import { filePurposes, type FilePurpose, type StoredFile } from '@tallypole/shared/schemas/files';
import type { Tx } from '../common/unit-of-work.ts';

export interface FileRow extends Omit<StoredFile, 'createdAt'> {
  storageKey: string;
}

export interface NewFile extends FileRow {
  firmId: string;
  jobId: string;
  createdBy: string;
  createdAt: Date;
}

@Injectable()
export class FilesRepository {
  /** The firm whose job this is; files are kept under it. */
  async firmOf(tx: Tx, jobId: string): Promise<string> {
    const row = await tx.one<{ firm_id: string }>('select firm_id from job where id = $1', [jobId]);
    if (!row) throw new Error('A job whose roles are known must be visible.');
    return row.firm_id;
  }

  async add(tx: Tx, file: NewFile): Promise<void> {
    await tx.rows(
      `insert into file (firm_id, job_id, id, name, purpose, media_type, bytes, sha256, storage_key, audience, created_by, created_at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)`,
      [
        file.firmId, file.jobId, file.id, file.name, file.purpose, file.mediaType, file.bytes, file.sha256, file.storageKey,
        filePurposes[file.purpose].audience, file.createdBy, file.createdAt,
      ],
    );
  }

  /** One file of a job, if the reader may see it at all. */
  async find(tx: Tx, jobId: string, fileId: string): Promise<FileRow | undefined> {
    return await tx.one<FileRow & { purpose: FilePurpose }>(
      `select id, name, purpose, media_type as "mediaType", bytes, sha256, storage_key as "storageKey" from file where job_id = $1 and id = $2`,
      [jobId, fileId],
    );
  }
}
