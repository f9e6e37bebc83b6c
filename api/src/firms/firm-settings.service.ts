import { Injectable } from '@nestjs/common';
import type { FirmSettings, FirmSettingsInput } from '@tallypole/shared/schemas/firms';
import { requireInFirm } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { FirmSettingsRepository } from './firm-settings.repository.ts';

/** What stands on the firm's papers, and what its site people see. */
@Injectable()
export class FirmSettingsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: FirmSettingsRepository,
  ) {}

  settings(actor: Actor, firmId: string): Promise<FirmSettings> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.settings', firmId);
      return await this.found(tx, firmId);
    });
  }

  set(actor: Actor, firmId: string, input: FirmSettingsInput, key: string): Promise<Answered<FirmSettings>> {
    return this.commands.run<FirmSettings>(actor, {
      operation: 'firm.settings',
      key,
      input: { firmId, ...input },
      authorize: (tx) => requireInFirm(tx, 'firm.settings', firmId),
      act: async (tx) => {
        if (!(await this.repository.set(tx, firmId, input))) throw new Problem('stale', { version: (await this.found(tx, firmId)).version });
        return await this.found(tx, firmId);
      },
    });
  }

  async found(tx: Tx, firmId: string): Promise<FirmSettings> {
    const settings = await this.repository.settings(tx, firmId);
    if (!settings) throw new Problem('not_found');
    return settings;
  }
}
