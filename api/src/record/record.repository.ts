import { Injectable } from '@nestjs/common';
import { canonicalText } from '@tallypole/shared/record';
import type { Json } from '../common/canonical.ts';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';

/** Which chain an entry stands in: what the whole job sees, or what the firm keeps to itself. */
type Chain = 'shared' | 'firm';

export interface RecordEntry {
  firmId: string;
  jobId: string;
  chain?: Chain;
  /** The act, as people name it: `change.signed`. */
  act: string;
  by: string;
  /** Ids, figures, hashes; never a name or an address, so that personal fields can be erased. */
  data: { readonly [name: string]: Json };
}

export interface RecordAnchor {
  seq: number;
  hash: string;
}

@Injectable()
export class RecordRepository {
  constructor(private readonly clock: Clock) {}

  /** Appends one entry, as the last statement but the answer: it locks the head of the chain. Returns the anchor to print. */
  async append(tx: Tx, entry: RecordEntry): Promise<RecordAnchor> {
    const text = this.text(entry);
    const row = await tx.one<RecordAnchor>('select seq, hash from app.append_record($1, $2, $3, $4)', [entry.firmId, entry.jobId, entry.chain ?? 'shared', text]);
    if (!row) throw new Error('The record did not answer.');
    return row;
  }

  /** The exact text of an entry, as it is hashed. */
  text({ act, by, data }: Pick<RecordEntry, 'act' | 'by' | 'data'>): string {
    return canonicalText({ act, at: this.clock.now().toISOString(), by, data, v: 1 });
  }
}
