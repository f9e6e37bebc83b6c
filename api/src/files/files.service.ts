import { Injectable } from '@nestjs/common';
import type { Request, Response } from 'express';
import { AddFile, MOST_FILE_BYTES, filePurposes, type StoredFile } from '@tallypole/shared/schemas/files';
import { may } from '@tallypole/shared/schemas/permissions';
import { requireOnJob, requireRole } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { parsed } from '../common/parsed.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { FilesRepository, type FileRow } from './files.repository.ts';
import { isAcceptedFile } from './media-kind.ts';
import { UploadReceiver, type Received } from './upload-receiver.ts';

@Injectable()
export class FilesService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: FilesRepository,
    private readonly receiver: UploadReceiver,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  /** Keeps a document of the job. Who may not is told so before a byte is read; the sender's id is also the key of the act. */
  async add(actor: Actor, jobId: string, request: Request, response: Response): Promise<Answered<StoredFile>> {
    const firmId = await this.work.readJob(actor, jobId, 'file.add', (tx) => this.repository.firmOf(tx, jobId));
    return await this.receiver.take(request, response, { firmId, jobId, mostBytes: MOST_FILE_BYTES }, (received) => this.write(actor, { firmId, jobId }, received));
  }

  /** What stands under a file's id, for who may open it. */
  find(actor: Actor, jobId: string, fileId: string): Promise<FileRow> {
    return this.work.readJob(actor, jobId, 'file.read', async (tx, roles) => {
      const file = await this.repository.find(tx, jobId, fileId);
      if (!file || !may(roles, filePurposes[file.purpose].read)) throw new Problem('not_found');
      return file;
    });
  }

  private write(actor: Actor, { firmId, jobId }: { firmId: string; jobId: string }, received: Received): Promise<Answered<StoredFile>> {
    const { id, purpose } = parsed(AddFile, received.fields);
    const { name, bytes, sha256, mediaType, storageKey } = received;
    if (!isAcceptedFile(mediaType, name)) {
      throw new Problem('wrong_file_kind', { detail: 'Only PDF, JPEG, PNG, WebP, HEIC, XLSX and DOCX files are accepted, and the name must end accordingly.' });
    }
    return this.commands.run<StoredFile>(actor, {
      operation: 'file.add',
      key: id,
      input: { jobId, purpose, name, sha256 },
      authorize: async (tx) => {
        const roles = await requireOnJob(tx, 'file.add', jobId);
        requireRole(roles, filePurposes[purpose].read);
      },
      act: async (tx) => {
        const createdAt = this.clock.now();
        await this.repository.add(tx, { firmId, jobId, id, name, purpose, mediaType, bytes, sha256, storageKey, createdBy: actor.personId, createdAt });
        const chain = filePurposes[purpose].audience === 'firm' ? 'firm' : 'shared';
        await this.record.append(tx, { firmId, jobId, chain, act: 'file.added', by: actor.personId, data: { file: id, purpose, sha256, bytes } });
        return { id, name, purpose, mediaType, bytes, sha256, createdAt: createdAt.toISOString() };
      },
    });
  }
}
