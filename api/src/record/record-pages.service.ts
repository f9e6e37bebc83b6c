import { Injectable } from '@nestjs/common';
import type { RecordPart, RecordQuery } from '@tallypole/shared/schemas/record';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { RecordPagesRepository } from './record-pages.repository.ts';

@Injectable()
export class RecordPagesService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: RecordPagesRepository,
  ) {}

  part(actor: Actor, jobId: string, query: RecordQuery): Promise<RecordPart> {
    return this.work.readJob(actor, jobId, 'record.read', async (tx) => {
      const part = await this.repository.part(tx, jobId, query);
      if (!part) throw new Problem('not_found');
      return part;
    });
  }
}
