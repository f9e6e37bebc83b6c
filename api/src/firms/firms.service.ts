import { Injectable } from '@nestjs/common';
import type { Firm, StartFirm } from '@tallypole/shared/schemas/firms';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { defaultPricing } from './default-pricing.ts';
import { FirmsRepository } from './firms.repository.ts';

@Injectable()
export class FirmsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly repository: FirmsRepository,
    private readonly clock: Clock,
  ) {}

  /** Anybody who has proven an address may start a firm and is its principal. */
  start(actor: Actor, input: StartFirm, key: string): Promise<Answered<Firm>> {
    return this.commands.run<Firm>(actor, {
      operation: 'firm.start',
      key,
      input,
      authorize: () => Promise.resolve(),
      act: async (tx) => {
        if (!(await this.repository.start(tx, input, defaultPricing, this.clock.now()))) throw new Problem('already_exists');
        return { id: input.id, name: input.name, timeZone: input.timeZone };
      },
    });
  }
}
