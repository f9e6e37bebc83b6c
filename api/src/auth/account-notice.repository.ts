import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class AccountNoticeRepository {
  /** False where there is nobody to mail any more. */
  async post(tx: Tx, id: string, personId: string, kind: string, data: string, now: Date): Promise<boolean> {
    return (await tx.one<{ posted: boolean }>('select app.post_account_notice($1, $2, $3, $4::jsonb, $5) as posted', [id, personId, kind, data, now]))?.posted ?? false;
  }
}
