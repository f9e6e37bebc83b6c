import { Inject, Injectable } from '@nestjs/common';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Clock } from '../common/clock.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { InvitationsRepository, type AcceptedInvitation } from './invitations.repository.ts';
import { roleNames } from './role-names.ts';

/** A person who has proven an address takes up what was sent to it. Repeatable: what is accepted isn't open any more. */
@Injectable()
export class InvitationAcceptance {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: InvitationsRepository,
    private readonly record: RecordRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  acceptAll(actor: Actor): Promise<number> {
    return this.work.write(actor, async (tx) => {
      await this.repository.acceptFirmInvitations(tx, this.clock.now());
      const accepted = await this.repository.acceptInvitations(tx, this.clock.now());
      for (const invitation of accepted) await this.tell(tx, actor, invitation);
      return accepted.length;
    });
  }

  private async tell(tx: Tx, actor: Actor, invitation: AcceptedInvitation): Promise<void> {
    const { firm_id: firmId, job_id: jobId, role, id } = invitation;
    const facts = await this.repository.acceptedFacts(tx, jobId);
    const url = `${this.configuration.PUBLIC_URL}/jobs/${jobId}/people`;
    const data = { name: facts.name, email: facts.email, jobName: facts.jobName, roleName: roleNames[role].name, url };
    await this.notices.post(tx, { firmId, jobId, kind: 'invitation-accepted', to: { personId: invitation.invited_by }, data });
    await this.record.append(tx, { firmId, jobId, act: 'person.joined', by: actor.personId, data: { invitation: id, role } });
  }
}
