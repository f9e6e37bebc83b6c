import { Injectable } from '@nestjs/common';
import type { JobPeople, MyInvitation, RemovePerson } from '@tallypole/shared/schemas/people';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { ChangeReissue } from '../changes/change-reissue.ts';
import { requireOnJob } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { PeopleMails } from './people-mails.ts';
import { PeopleRepository } from './people.repository.ts';
import { roleNames } from './role-names.ts';

/** Who is on a job, and who leaves it. */
@Injectable()
export class PeopleService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: PeopleRepository,
    private readonly reissue: ChangeReissue,
    private readonly record: RecordRepository,
    private readonly mails: PeopleMails,
    private readonly clock: Clock,
  ) {}

  people(actor: Actor, jobId: string): Promise<JobPeople> {
    return this.work.readJob(actor, jobId, 'people.read', (tx, roles) =>
      this.repository.people(tx, jobId, roles.some((role) => (firmRoles as readonly string[]).includes(role)), this.clock.now()),
    );
  }

  /** What became of an invitation; "not found" to everybody who doesn't live at its address. */
  myInvitation(actor: Actor, invitationId: string): Promise<MyInvitation> {
    return this.work.read(actor, async (tx) => {
      const invitation = await this.repository.myInvitation(tx, invitationId, this.clock.now());
      if (!invitation) throw new Problem('not_found');
      return invitation;
    });
  }

  /**
   * Ends somebody's access to a job at once. Nothing goes on waiting for a homeowner who left: where all of them must sign or approve,
   * what is out is asked for anew from those who stay, and they are told why.
   */
  remove(actor: Actor, jobId: string, personId: string, { role }: RemovePerson, key: string): Promise<Answered<JobPeople>> {
    return this.commands.run<JobPeople>(actor, {
      operation: 'person.remove',
      key,
      input: { jobId, personId, role },
      authorize: (tx) => requireOnJob(tx, 'people.remove', jobId),
      act: async (tx) => {
        const facts = await this.repository.lockForLeaving(tx, jobId, personId, role);
        if (!facts || facts.personName === null) throw new Problem('not_found');
        if (role === 'homeowner' && facts.homeownersLeft === 0 && facts.waiting > 0) {
          throw new Problem('wrong_state', { detail: 'This is the only homeowner, and something waits for their word. Withdraw it first, or invite the next homeowner and wait until they have joined.' });
        }
        const now = this.clock.now();
        if (!(await this.repository.end(tx, jobId, personId, role, now))) throw new Problem('not_found');
        const anew = role === 'homeowner' && facts.homeownersSign === 'all' ? await this.askAnew(tx, facts.firmId, jobId, now) : [];
        const left = { ...facts, jobId, personName: facts.personName, roleName: roleNames[role].name, anew };
        await this.mails.accessEnded(tx, personId, left);
        await this.mails.toThoseWhoStay(tx, left);
        await this.record.append(tx, { firmId: facts.firmId, jobId, act: 'person.removed', by: actor.personId, data: { person: personId, role, askedAnew: anew } });
        return await this.repository.people(tx, jobId, true, now);
      },
    });
  }

  private async askAnew(tx: Tx, firmId: string, jobId: string, now: Date): Promise<string[]> {
    const changes = await this.repository.changesOut(tx, jobId);
    if (changes.length > 0) await this.reissue.askAgain(tx, { firmId, jobId }, null);
    return [...changes, ...(await this.repository.askForApprovalAnew(tx, jobId, now))];
  }
}
