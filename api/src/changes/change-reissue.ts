import { Injectable } from '@nestjs/common';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { SigningRepository } from './signing.repository.ts';

/** What signing does has moved for the changes that are out: signatures given so far fall, their papers are made anew and asked for again. */
@Injectable()
export class ChangeReissue {
  constructor(
    private readonly signing: SigningRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  /** All that are out on the job, but the one that moved the others. The job is locked by the caller. */
  async askAgain(tx: Tx, { firmId, jobId }: { firmId: string; jobId: string }, butChangeId: string | null): Promise<void> {
    for (const changeId of await this.signing.askAgain(tx, jobId, butChangeId, this.clock.now())) {
      await this.queue.enqueue(tx, 'render_change', { firmId, jobId, changeId }, { key: `render_change:${changeId}` });
    }
  }
}
