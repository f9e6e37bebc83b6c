import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import type { Account, Source } from '../ledger/entry.ts';

/** The net of one account in one entry, with what caused it. */
export interface Posting {
  entryId: string;
  cause: string;
  causeId: string;
  memo: string;
  onDate: string;
  account: Account;
  source: Source | null;
  cents: number;
}

export interface MoneyFacts {
  jobId: string;
  jobName: string;
  timeZone: string;
  contractSumCents: number;
  changesApprovedCents: number;
  depositCents: number;
  postings: Posting[];
}

@Injectable()
export class MoneyRepository {
  async facts(tx: Tx, jobId: string): Promise<MoneyFacts | undefined> {
    return (await tx.one<{ facts: MoneyFacts }>(FACTS, [jobId]))?.facts;
  }
}

const FACTS = /* sql */ `
  select json_build_object('jobId', j.id, 'jobName', j.name, 'timeZone', j.time_zone, 'contractSumCents', j.contract_sum_cents,
    'changesApprovedCents', j.changes_approved_cents, 'depositCents', j.deposit_cents,
    'postings', (select coalesce(json_agg(json_build_object('entryId', e.id, 'cause', e.cause, 'causeId', e.cause_id, 'memo', e.memo, 'onDate', e.on_date,
        'account', l.account, 'source', l.source, 'cents', l.cents) order by e.at, e.id, l.account, l.source), '[]')
      from ledger_entry e join (select entry_id, account, source, sum(amount_cents)::bigint as cents from ledger_line where job_id = j.id
        group by entry_id, account, source) l on l.entry_id = e.id where e.job_id = j.id)) as facts
  from job j where j.id = $1`;
