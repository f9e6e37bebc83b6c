import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Json } from '../common/canonical.ts';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import type { NoticeKind } from '../notices/templates.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { AccountNoticeRepository } from './account-notice.repository.ts';

/** Mails about a person's own account, in the transaction of what they tell about. */
@Injectable()
export class AccountNotices {
  constructor(
    private readonly repository: AccountNoticeRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  async post(tx: Tx, personId: string, kind: NoticeKind, data: { readonly [name: string]: Json }): Promise<void> {
    const id = v7();
    const now = this.clock.now();
    if (await this.repository.post(tx, id, personId, kind, JSON.stringify({ ...data, at: writtenMoment(now) }), now)) {
      await this.queue.enqueue(tx, 'send_account_notice', { noticeId: id }, { key: `account-notice:${id}` });
    }
  }
}

/** People have no time zone here, so the moment names its own: "March 3, 2027 at 2:05 PM UTC". */
export function writtenMoment(instant: Date): string {
  const options = { timeZone: 'UTC', year: 'numeric', month: 'long', day: 'numeric', hour: 'numeric', minute: '2-digit', timeZoneName: 'short' } as const;
  return new Intl.DateTimeFormat('en-US', options).format(instant);
}
