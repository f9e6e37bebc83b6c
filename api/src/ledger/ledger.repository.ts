import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import type { LedgerEntry } from './entry.ts';

@Injectable()
export class LedgerRepository {
  constructor(private readonly clock: Clock) {}

  /** Books an entry with its lines in one statement; false where this cause is booked already. Lines of zero are left out. */
  async post(tx: Tx, firmId: string, jobId: string, entry: LedgerEntry): Promise<boolean> {
    const lines = entry.lines.filter(({ amountCents }) => amountCents !== 0);
    const row = await tx.one(POST, [v7(), firmId, jobId, entry.cause, entry.causeId, entry.memo, this.clock.now(), entry.onDate, JSON.stringify(lines)]);
    return row !== undefined;
  }
}

const POST = /* sql */ `
  with entry as (
    insert into ledger_entry (id, firm_id, job_id, cause, cause_id, memo, at, on_date) values ($1, $2, $3, $4, $5, $6, $7, $8)
    on conflict (job_id, cause, cause_id) do nothing returning id)
  insert into ledger_line (firm_id, job_id, entry_id, position, account, source, amount_cents)
    select $2, $3, entry.id, l.position, l.value->>'account', l.value->>'source', (l.value->>'amountCents')::bigint
    from entry, jsonb_array_elements($9::jsonb) with ordinality as l (value, position)
  returning entry_id`;
