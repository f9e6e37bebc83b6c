import { Injectable } from '@nestjs/common';
import { priceChange } from '@tallypole/shared/pricing';
import type { FirmPricing, SetFirmPricing } from '@tallypole/shared/schemas/changes';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { computed } from '../common/computed.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { FirmsRepository } from './firms.repository.ts';

/** How the firm prices changes; each change keeps the terms it was priced by. */
@Injectable()
export class PricingService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: FirmsRepository,
    private readonly clock: Clock,
  ) {}

  terms(actor: Actor, firmId: string): Promise<FirmPricing> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.pricing', firmId);
      const pricing = await this.repository.pricing(tx, firmId);
      if (!pricing) throw new Problem('not_found');
      return pricing;
    });
  }

  set(actor: Actor, firmId: string, { terms, version }: SetFirmPricing, key: string): Promise<Answered<FirmPricing>> {
    return this.commands.run(actor, {
      operation: 'firm.pricing',
      key,
      input: { firmId, terms, version },
      authorize: (tx) => requireInFirm(tx, 'firm.pricing', firmId),
      act: async (tx) => {
        // terms that no change can be priced by are refused here, not at the next change
        computed(() => priceChange({ lines: [], terms }));
        const next = await this.repository.setPricing(tx, firmId, terms, version, this.clock.now());
        if (!next) throw new Problem('stale');
        return next as FirmPricing & Record<string, never>;
      },
    });
  }
}
