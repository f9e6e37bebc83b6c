import { Injectable } from '@nestjs/common';
import type { Members, SetMemberRole } from '@tallypole/shared/schemas/members';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { MembersRepository, type MemberOutcome } from './members.repository.ts';

/** Who belongs to the firm, as what, and who leaves it. */
@Injectable()
export class MembersService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: MembersRepository,
    private readonly record: RecordRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
  ) {}

  members(actor: Actor, firmId: string): Promise<Members> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.read', firmId);
      return await this.repository.members(tx, firmId, this.clock.now());
    });
  }

  setRole(actor: Actor, firmId: string, personId: string, { role }: SetMemberRole, key: string): Promise<Answered<Members>> {
    return this.onMember(actor, firmId, personId, { act: 'member.role_set', key, data: { role } }, async (tx) => {
      ensureDone(await this.repository.setRole(tx, firmId, personId, role));
    });
  }

  /** Ends somebody's access to the firm and all of its jobs at once. What they did stays, with their name. */
  end(actor: Actor, firmId: string, personId: string, key: string): Promise<Answered<Members>> {
    return this.onMember(actor, firmId, personId, { act: 'member.left', key, data: {} }, async (tx, { role }) => {
      if (personId === actor.personId) throw new Problem('rule_broken', { detail: 'Another principal has to end your own access.' });
      const by = await this.repository.actor(tx, firmId);
      ensureDone(await this.repository.end(tx, firmId, personId, this.clock.now()));
      if (!by) throw new Problem('not_found');
      const data = { place: by.firmName, roleName: role, actorName: by.name, firmName: by.firmName, replyToName: by.name, replyToEmail: by.email };
      await this.notices.post(tx, { firmId, kind: 'access-ended', to: { personId }, data });
    });
  }

  private onMember(
    actor: Actor,
    firmId: string,
    personId: string,
    { act, key, data }: { act: string; key: string; data: { readonly [name: string]: string } },
    effect: (tx: Tx, member: { role: string }) => Promise<void>,
  ): Promise<Answered<Members>> {
    return this.commands.run<Members>(actor, {
      operation: act,
      key,
      input: { firmId, personId, ...data },
      authorize: (tx) => requireInFirm(tx, 'firm.members', firmId),
      act: async (tx) => {
        const member = await this.repository.find(tx, firmId, personId);
        if (!member) throw new Problem('not_found');
        await effect(tx, member);
        await this.repository.recordInAllJobs(tx, firmId, this.record.text({ act, by: actor.personId, data: { person: personId, ...data } }));
        return await this.repository.members(tx, firmId, this.clock.now());
      },
    });
  }
}

function ensureDone(outcome: MemberOutcome): void {
  if (outcome === 'unknown') throw new Problem('not_found');
  if (outcome === 'last_principal') throw new Problem('rule_broken', { detail: 'A firm needs a principal. Make somebody else a principal first.' });
}
