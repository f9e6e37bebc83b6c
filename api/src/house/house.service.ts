import { Injectable } from '@nestjs/common';
import type { AllWaits, House } from '@tallypole/shared/schemas/house';
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
      // sent together: the second doesn't wait for the first one's answer
      const [facts, waits] = await Promise.all([this.repository.find(tx, jobId), this.waits.ofJob(tx, jobId, actor.personId)]);
      if (!facts) throw new Problem('not_found');
      const prices = may(roles, 'money.read');
      const shown = waits.filter((wait) => prices || wait.kind === 'milestone_to_prove').map((wait) => (prices ? wait : { ...wait, cents: null }));
      const next = facts.milestones.find(({ state }) => state !== 'proven');
      return {
        pole: poleOf(facts, this.clock.today(facts.timeZone), prices),
        next: next ? { id: next.id, name: next.name, on: next.plannedOn } : null,
        waits: shown,
      };
    });
  }

  /** What waits on every job that somebody is on, with sums only where their role may see them. */
  waiting(actor: Actor): Promise<AllWaits> {
    return this.work.read(actor, async (tx) => {
      const items = await this.waits.ofPerson(tx, actor.personId);
      const roles = await this.waits.roles(tx, [...new Set(items.map(({ jobId }) => jobId))]);
      const mayKnow = (jobId: string) => may(roles.get(jobId) ?? [], 'money.read');
      return { items: items.filter(({ jobId, kind }) => mayKnow(jobId) || kind === 'milestone_to_prove').map((item) => (mayKnow(item.jobId) ? item : { ...item, cents: null })) };
    });
  }
}
