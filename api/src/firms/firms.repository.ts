import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Json } from '../common/canonical.ts';
import type { StartFirm } from '@tallypole/shared/schemas/firms';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class FirmsRepository {
  /** False where the id is taken already. */
  async start(tx: Tx, firm: StartFirm, pricing: Json, now: Date): Promise<boolean> {
    const bind = [firm.id, firm.name, firm.timeZone, v7(), JSON.stringify(pricing), now];
    return (await tx.one<{ started: boolean }>('select app.start_firm($1, $2, $3, $4, $5::jsonb, $6) as started', bind))?.started ?? false;
  }
}
