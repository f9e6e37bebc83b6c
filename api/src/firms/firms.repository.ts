import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Json } from '../common/canonical.ts';
import type { FirmPricing, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import type { StartFirm } from '@tallypole/shared/schemas/firms';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class FirmsRepository {
  /** False where the id is taken already. */
  async start(tx: Tx, firm: StartFirm, pricing: Json, now: Date): Promise<boolean> {
    const bind = [firm.id, firm.name, firm.timeZone, v7(), JSON.stringify(pricing), now];
    return (await tx.one<{ started: boolean }>('select app.start_firm($1, $2, $3, $4, $5::jsonb, $6) as started', bind))?.started ?? false;
  }

  async pricing(tx: Tx, firmId: string): Promise<FirmPricing | undefined> {
    return await tx.one<FirmPricing>('select terms, version from firm_pricing where firm_id = $1', [firmId]);
  }

  /** Nothing where somebody else has set them in the meantime. */
  async setPricing(tx: Tx, firmId: string, terms: PricingTermsInput, version: number, now: Date): Promise<FirmPricing | undefined> {
    return await tx.one<FirmPricing>('update firm_pricing set terms = $2::jsonb, version = version + 1, updated_at = $4 where firm_id = $1 and version = $3 returning terms, version', [
      firmId,
      JSON.stringify(terms),
      version,
      now,
    ]);
  }
}
