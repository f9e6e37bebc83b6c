import { Inject, Injectable } from '@nestjs/common';
import type { InviteMember, Members } from '@tallypole/shared/schemas/members';
import type { FirmRole } from '@tallypole/shared/schemas/roles';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { writtenDate } from '../common/written-date.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { MembersRepository } from './members.repository.ts';

const INVITATION_DAYS = 30;
const TASKS: Readonly<Record<FirmRole, string>> = {
  principal: 'You can do everything in the firm.',
  manager: 'You run jobs: price changes, claim milestones, prepare draws.',
  site: 'You see what to build and what not yet, and photograph from your phone.',
  books: 'You send draws and record payments.',
};

/** Who belongs to the firm. */
@Injectable()
export class MembersService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: MembersRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  members(actor: Actor, firmId: string): Promise<Members> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.read', firmId);
      return await this.repository.members(tx, firmId);
    });
  }

  invite(actor: Actor, firmId: string, input: InviteMember, key: string): Promise<Answered<Members>> {
    return this.commands.run<Members>(actor, {
      operation: 'member.invite',
      key,
      input: { firmId, ...input },
      authorize: (tx) => requireInFirm(tx, 'firm.invite', firmId),
      act: (tx) => this.write(tx, firmId, input),
    });
  }

  private async write(tx: Tx, firmId: string, input: InviteMember): Promise<Members> {
    const inviter = await this.repository.inviter(tx, firmId);
    if (!inviter) throw new Problem('not_found');
    const now = this.clock.now();
    const expiresAt = new Date(now.getTime() + INVITATION_DAYS * 86_400_000);
    if (!(await this.repository.invite(tx, firmId, input, now, expiresAt))) {
      throw new Problem('already_exists', { errors: [{ pointer: '/email', code: 'invited', message: 'This address is in the firm, or invited already.' }] });
    }
    const { firmName, timeZone, name: inviterName, email: inviterEmail } = inviter;
    const data = { name: input.name, email: input.email, firmName, inviterName, roleName: input.role, roleTask: TASKS[input.role], expires: writtenDate(expiresAt, timeZone), url: `${this.configuration.PUBLIC_URL}/jobs` };
    await this.notices.post(tx, { firmId, kind: 'firm-invitation', to: { email: input.email, name: input.name }, data: { ...data, replyToName: inviterName, replyToEmail: inviterEmail } });
    return await this.repository.members(tx, firmId);
  }
}
