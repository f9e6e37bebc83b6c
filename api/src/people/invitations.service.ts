import { Inject, Injectable } from '@nestjs/common';
import { INVITATION_DAYS, type Invite, type JobPeople } from '@tallypole/shared/schemas/people';
import { requireOnJob } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import type { Actor, Tx } from '../common/unit-of-work.ts';
import { writtenDate } from '../common/written-date.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { InvitationsRepository, type InvitationFacts, type LockedInvitation } from './invitations.repository.ts';
import { PeopleMails } from './people-mails.ts';
import { PeopleRepository } from './people.repository.ts';
import { roleNames } from './role-names.ts';

/** Invitations to a job. Their mail grants nothing and carries no token: whoever opens it must prove the address by a code. */
@Injectable()
export class InvitationsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly repository: InvitationsRepository,
    private readonly people: PeopleRepository,
    private readonly mails: PeopleMails,
    private readonly record: RecordRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  invite(actor: Actor, jobId: string, input: Invite, key: string): Promise<Answered<JobPeople>> {
    return this.commands.run<JobPeople>(actor, {
      operation: 'person.invite',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'people.invite', jobId),
      act: async (tx) => {
        const facts = await this.repository.facts(tx, jobId);
        if (!facts) throw new Problem('not_found');
        const { now, expiresAt } = this.period();
        if (!(await this.repository.invite(tx, jobId, facts.firmId, input, now, expiresAt))) {
          throw new Problem('already_exists', { errors: [{ pointer: '/email', code: 'invited', message: 'This address is invited already and has not answered yet. Send the invitation again instead.' }] });
        }
        await this.mail(tx, jobId, facts, input, expiresAt);
        await this.record.append(tx, { firmId: facts.firmId, jobId, act: 'person.invited', by: actor.personId, data: { invitation: input.id, role: input.role } });
        return await this.people.people(tx, jobId, true, now);
      },
    });
  }

  /** Mails it once more; its time begins anew. */
  sendAgain(actor: Actor, jobId: string, invitationId: string, key: string): Promise<Answered<JobPeople>> {
    return this.onInvitation(actor, jobId, invitationId, { act: 'invitation.sent_again', key }, async (tx, facts, invitation) => {
      const { now, expiresAt } = this.period();
      await this.repository.renew(tx, invitationId, now, expiresAt);
      await this.mail(tx, jobId, facts, invitation, expiresAt);
    });
  }

  /** Takes it back. Where all homeowners must approve, a draw that waited for this one is asked for anew. */
  revoke(actor: Actor, jobId: string, invitationId: string, key: string): Promise<Answered<JobPeople>> {
    return this.onInvitation(actor, jobId, invitationId, { act: 'invitation.revoked', key }, async (tx, facts, { role, name }) => {
      const now = this.clock.now();
      await this.repository.revoke(tx, invitationId, now);
      const anew = role === 'homeowner' ? await this.people.askForApprovalAnew(tx, jobId, now) : [];
      const { inviterName: actorName, inviterEmail: actorEmail, ...names } = facts;
      if (anew.length > 0) await this.mails.toThoseWhoStay(tx, { ...names, jobId, actorName, actorEmail, personName: name, roleName: roleNames[role].name, anew }, true);
    });
  }

  private onInvitation(
    actor: Actor,
    jobId: string,
    invitationId: string,
    { act, key }: { act: string; key: string },
    effect: (tx: Tx, facts: InvitationFacts, invitation: LockedInvitation) => Promise<void>,
  ): Promise<Answered<JobPeople>> {
    return this.commands.run<JobPeople>(actor, {
      operation: act,
      key,
      input: { jobId, invitationId },
      authorize: (tx) => requireOnJob(tx, 'people.invite', jobId),
      act: async (tx) => {
        const invitation = await this.repository.lock(tx, jobId, invitationId);
        const facts = await this.repository.facts(tx, jobId);
        if (!invitation || !facts) throw new Problem('not_found');
        if (invitation.acceptedAt) throw new Problem('wrong_state', { detail: `${invitation.name} has accepted it already.` });
        if (invitation.revokedAt) throw new Problem('wrong_state', { detail: 'This invitation was taken back already.' });
        await effect(tx, facts, invitation);
        await this.record.append(tx, { firmId: facts.firmId, jobId, act, by: actor.personId, data: { invitation: invitationId, role: invitation.role } });
        return await this.people.people(tx, jobId, true, this.clock.now());
      },
    });
  }

  private async mail(tx: Tx, jobId: string, facts: InvitationFacts, { id, email, name, role }: Invite, expiresAt: Date): Promise<void> {
    const { firmId, firmName, jobName, inviterName, inviterEmail, timeZone } = facts;
    const { name: roleName, task: roleTask } = roleNames[role];
    const url = `${this.configuration.PUBLIC_URL}/jobs/${jobId}?invitation=${id}`;
    const data = { name, email, firmName, jobName, inviterName, roleName, roleTask, expires: writtenDate(expiresAt, timeZone), url };
    await this.notices.post(tx, { firmId, jobId, kind: 'invitation', to: { email, name }, data: { ...data, replyToName: inviterName, replyToEmail: inviterEmail } });
  }

  private period(): { now: Date; expiresAt: Date } {
    const now = this.clock.now();
    return { now, expiresAt: new Date(now.getTime() + INVITATION_DAYS * 86_400_000) };
  }
}
