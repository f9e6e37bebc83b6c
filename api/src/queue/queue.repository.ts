import { Injectable } from '@nestjs/common';
import type { Json } from '../common/canonical.ts';
import type { Tx } from '../common/unit-of-work.ts';

export interface QueueOptions {
  /** Makes the enqueue repeatable: a waiting job with this key is replaced. */
  key?: string;
  runAt?: Date;
}

@Injectable()
export class QueueRepository {
  /** Asks the worker for something, inside the business transaction: committed together or not at all. */
  async enqueue(tx: Tx, task: string, payload: { readonly [name: string]: Json }, options: QueueOptions = {}): Promise<void> {
    await tx.rows('select graphile_worker.enqueue($1, $2::json, $3, $4)', [task, JSON.stringify(payload), options.key ?? null, options.runAt ?? null]);
  }

  /** The same for many jobs of one task in one statement, each with a key of its own. */
  async enqueueMany(tx: Tx, task: string, jobs: readonly { key: string; payload: { readonly [name: string]: Json } }[]): Promise<void> {
    if (jobs.length === 0) return;
    await tx.rows(`select graphile_worker.enqueue($1, (j->'payload')::json, j->>'key') from jsonb_array_elements($2::jsonb) j`, [task, JSON.stringify(jobs)]);
  }
}
