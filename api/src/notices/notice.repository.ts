import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Json } from '../common/canonical.ts';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import type { NoticeKind } from './templates.ts';

type Receiver = { personId: string } | { email: string; name: string };

export interface Notice {
  firmId: string;
  jobId?: string;
  kind: NoticeKind;
  to: Receiver;
  /** What the template prints. */
  data: { readonly [name: string]: Json };
}

@Injectable()
export class NoticeRepository {
  constructor(
    private readonly clock: Clock,
    private readonly queue: QueueRepository,
  ) {}

  /** Puts a mail into the outbox, in the transaction of the act that it tells about. */
  async post(tx: Tx, notice: Notice): Promise<void> {
    const id = v7();
    const { to } = notice;
    const address = 'personId' in to ? [to.personId, null, null] : [null, to.email, to.name];
    await tx.rows('insert into notice (id, firm_id, job_id, kind, person_id, to_email, to_name, data, created_at) values ($1, $2, $3, $4, $5, $6, $7, $8, $9)', [
      id,
      notice.firmId,
      notice.jobId ?? null,
      notice.kind,
      ...address,
      JSON.stringify(notice.data),
      this.clock.now(),
    ]);
    await this.queue.enqueue(tx, 'send_notice', { noticeId: id, firmId: notice.firmId }, { key: `notice:${id}` });
  }

  /** Several mails of one act in two statements, however many there are. */
  async postAll(tx: Tx, notices: readonly Notice[]): Promise<void> {
    if (notices.length === 0) return;
    const rows = notices.map(({ firmId, jobId, kind, to, data }) => {
      const address = 'personId' in to ? { person_id: to.personId } : { to_email: to.email, to_name: to.name };
      return { id: v7(), firm_id: firmId, job_id: jobId ?? null, kind, data, ...address };
    });
    await tx.rows(
      `insert into notice (id, firm_id, job_id, kind, person_id, to_email, to_name, data, created_at)
       select id, firm_id, job_id, kind, person_id, to_email, to_name, data, $2 from jsonb_to_recordset($1::jsonb)
         as r (id uuid, firm_id uuid, job_id uuid, kind text, person_id uuid, to_email text, to_name text, data jsonb)`,
      [JSON.stringify(rows), this.clock.now()],
    );
    await this.queue.enqueueMany(tx, 'send_notice', rows.map(({ id, firm_id }) => ({ key: `notice:${id}`, payload: { noticeId: id, firmId: firm_id } })));
  }
}
