import { Injectable } from '@nestjs/common';
import type { House } from '@tallypole/shared/schemas/house';
import { may } from '@tallypole/shared/schemas/permissions';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { HouseRepository } from './house.repository.ts';
import { poleOf } from './pole-of.ts';
import { WaitsRepository } from './waits.repository.ts';

@Injectable()
export class HouseService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: HouseRepository,
    private readonly waits: WaitsRepository,
    private readonly clock: Clock,
  ) {}

  /** The pole and what waits for whom: what every page of a job shows. */
  house(actor: Actor, jobId: string): Promise<House> {
    return this.work.readJob(actor, jobId, 'job.read', async (tx, roles) => {
      const facts = await this.repository.find(tx, jobId);
      if (!facts) throw new Problem('not_found');
      const prices = may(roles, 'money.read');
      const waits = await this.waits.ofJob(tx, jobId, actor.personId);
      const shown = waits.filter((wait) => prices || wait.kind === 'milestone_to_prove').map((wait) => (prices ? wait : { ...wait, cents: null }));
      return { pole: poleOf(facts, this.clock.today(facts.timeZone), prices), waits: shown };
    });
  }
}
