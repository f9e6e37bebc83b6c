import { Inject, Injectable } from '@nestjs/common';
import type { Invite, JobPeople } from '@tallypole/shared/schemas/people';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { requireOnJob } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Clock } from '../common/clock.ts';
import { writtenDate } from '../common/written-date.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { PeopleRepository } from './people.repository.ts';
import { roleNames } from './role-names.ts';

const INVITATION_DAYS = 30;

@Injectable()
export class PeopleService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: PeopleRepository,
    private readonly record: RecordRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  people(actor: Actor, jobId: string): Promise<JobPeople> {
    return this.work.readJob(actor, jobId, 'people.read', (tx, roles) =>
      this.repository.people(tx, jobId, roles.some((role) => (firmRoles as readonly string[]).includes(role))),
    );
  }

  /** Invites an address to a job in one role. The mail grants nothing: whoever opens it must prove the address by a code. */
  invite(actor: Actor, jobId: string, input: Invite, key: string): Promise<Answered<JobPeople>> {
    return this.commands.run<JobPeople>(actor, {
      operation: 'person.invite',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'people.invite', jobId),
      act: (tx) => this.writeInvitation(tx, actor, jobId, input),
    });
  }

  private async writeInvitation(tx: Tx, actor: Actor, jobId: string, input: Invite): Promise<JobPeople> {
    const facts = await this.repository.invitationFacts(tx, jobId);
    if (!facts) throw new Problem('not_found');
    const { firmId, firmName, jobName, inviterName, inviterEmail, timeZone } = facts;
    const now = this.clock.now();
    const expiresAt = new Date(now.getTime() + INVITATION_DAYS * 86_400_000);
    if (!(await this.repository.invite(tx, jobId, firmId, input, now, expiresAt))) {
      throw new Problem('already_exists', { errors: [{ pointer: '/email', code: 'invited', message: 'This address is invited already and has not answered yet.' }] });
    }
    const { name: roleName, task: roleTask } = roleNames[input.role];
    const expires = writtenDate(expiresAt, timeZone);
    const data = { name: input.name, email: input.email, firmName, jobName, inviterName, roleName, roleTask, expires, url: `${this.configuration.PUBLIC_URL}/jobs/${jobId}` };
    const reply = { replyToName: inviterName, replyToEmail: inviterEmail };
    await this.notices.post(tx, { firmId, jobId, kind: 'invitation', to: { email: input.email, name: input.name }, data: { ...data, ...reply } });
    await this.record.append(tx, { firmId, jobId, act: 'person.invited', by: actor.personId, data: { invitation: input.id, role: input.role } });
    return await this.repository.people(tx, jobId, true);
  }
}
