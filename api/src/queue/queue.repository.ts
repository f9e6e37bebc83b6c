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
}
