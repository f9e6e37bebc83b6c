import { Injectable } from '@nestjs/common';
import type { PeopleWhoLeft } from '@tallypole/shared/schemas/firms';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { FirmSettingsRepository } from './firm-settings.repository.ts';

/** Name and address of people who left are erased when a principal asks for it. The record refers to them by id and goes on verifying. */
@Injectable()
export class ErasureService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: FirmSettingsRepository,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  whoLeft(actor: Actor, firmId: string): Promise<PeopleWhoLeft> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.members', firmId);
      return await this.repository.whoLeft(tx, firmId);
    });
  }

  erase(actor: Actor, firmId: string, personId: string, key: string): Promise<Answered<PeopleWhoLeft>> {
    return this.commands.run<PeopleWhoLeft>(actor, {
      operation: 'person.erase',
      key,
      input: { firmId, personId },
      authorize: (tx) => requireInFirm(tx, 'firm.members', firmId),
      act: async (tx) => {
        const outcome = await this.repository.erase(tx, firmId, personId, this.clock.now());
        if (outcome === 'unknown') throw new Problem('not_found');
        if (outcome === 'elsewhere') throw new Problem('wrong_state', { detail: 'They still use Tallypole, here or elsewhere. End their access here first; what they use elsewhere is theirs to give up.' });
        await this.repository.recordWhereTheyWere(tx, firmId, personId, this.record.text({ act: 'person.erased', by: actor.personId, data: { person: personId } }));
        return await this.repository.whoLeft(tx, firmId);
      },
    });
  }
}
