import { Injectable } from '@nestjs/common';
import { RECORD_PAGE, type RecordPart, type RecordQuery } from '@tallypole/shared/schemas/record';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class RecordPagesRepository {
  /** A part of a chain with its head, in one statement; the policies decide which chain somebody may read. */
  async part(tx: Tx, jobId: string, { chain, after }: RecordQuery): Promise<RecordPart | undefined> {
    return (await tx.one<{ part: RecordPart }>(PART, [jobId, chain, after, RECORD_PAGE]))?.part;
  }
}

const PART = /* sql */ `
  select json_build_object('chain', h.chain, 'head', json_build_object('seq', h.seq, 'hash', h.hash),
    'entries', (select coalesce(json_agg(json_build_object('seq', e.seq, 'text', e.text, 'hash', e.hash, 'byName', e.name) order by e.seq), '[]') from (
      select r.seq, r.text, r.hash, coalesce(p.name, case when p.system_of is not null then 'Tallypole' end) as name from record_entry r left join person p on p.id = (r.data->>'by')::uuid
      where r.job_id = h.job_id and r.chain = h.chain and r.seq > $3 order by r.seq limit $4) e)) as part
  from record_head h where h.job_id = $1 and h.chain = $2`;
