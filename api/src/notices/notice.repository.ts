import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Json } from '../common/canonical.ts';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import type { NoticeKind } from './templates.ts';

export type Receiver = { personId: string } | { email: string; name: string };

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
}
