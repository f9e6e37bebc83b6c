import { Inject, Injectable } from '@nestjs/common';
import type { InviteMember, Members } from '@tallypole/shared/schemas/members';
import { INVITATION_DAYS } from '@tallypole/shared/schemas/people';
import type { FirmRole } from '@tallypole/shared/schemas/roles';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import type { Actor, Tx } from '../common/unit-of-work.ts';
import { writtenDate } from '../common/written-date.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { MembersRepository, type LockedFirmInvitation } from './members.repository.ts';

const TASKS: Readonly<Record<FirmRole, string>> = {
  principal: 'You can do everything in the firm.',
  manager: 'You run jobs: price changes, claim milestones, prepare draws.',
  site: 'You see what to build and what not yet, and photograph from your phone.',
  books: 'You send draws and record payments.',
};

/** Invitations into the firm itself. Their mail grants nothing: whoever opens it must prove the address by a code. */
@Injectable()
export class FirmInvitationsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly repository: MembersRepository,
    private readonly notices: NoticeRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  invite(actor: Actor, firmId: string, input: InviteMember, key: string): Promise<Answered<Members>> {
    return this.run(actor, firmId, { operation: 'member.invite', key, input: { ...input } }, async (tx) => {
      const { now, expiresAt } = this.period();
      if (!(await this.repository.invite(tx, firmId, input, now, expiresAt))) {
        throw new Problem('already_exists', { errors: [{ pointer: '/email', code: 'invited', message: 'This address is in the firm, or invited already.' }] });
      }
      await this.mail(tx, firmId, input, expiresAt);
    });
  }

  sendAgain(actor: Actor, firmId: string, invitationId: string, key: string): Promise<Answered<Members>> {
    return this.run(actor, firmId, { operation: 'member.invite_again', key, input: { invitationId } }, async (tx) => {
      const invitation = await this.open(tx, firmId, invitationId);
      const { now, expiresAt } = this.period();
      await this.repository.renewInvitation(tx, invitationId, now, expiresAt);
      await this.mail(tx, firmId, invitation, expiresAt);
    });
  }

  revoke(actor: Actor, firmId: string, invitationId: string, key: string): Promise<Answered<Members>> {
    return this.run(actor, firmId, { operation: 'member.invite_revoke', key, input: { invitationId } }, async (tx) => {
      await this.open(tx, firmId, invitationId);
      await this.repository.revokeInvitation(tx, invitationId, this.clock.now());
    });
  }

  private run(actor: Actor, firmId: string, { operation, key, input }: { operation: string; key: string; input: { readonly [name: string]: string } }, effect: (tx: Tx) => Promise<void>): Promise<Answered<Members>> {
    return this.commands.run<Members>(actor, {
      operation,
      key,
      input: { firmId, ...input },
      authorize: (tx) => requireInFirm(tx, 'firm.invite', firmId),
      act: async (tx) => {
        await effect(tx);
        return await this.repository.members(tx, firmId, this.clock.now());
      },
    });
  }

  private async open(tx: Tx, firmId: string, invitationId: string): Promise<LockedFirmInvitation> {
    const invitation = await this.repository.lockInvitation(tx, firmId, invitationId);
    if (!invitation) throw new Problem('not_found');
    if (invitation.acceptedAt) throw new Problem('wrong_state', { detail: `${invitation.name} has accepted it already.` });
    if (invitation.revokedAt) throw new Problem('wrong_state', { detail: 'This invitation was taken back already.' });
    return invitation;
  }

  private async mail(tx: Tx, firmId: string, { id, email, name, role }: InviteMember, expiresAt: Date): Promise<void> {
    const inviter = await this.repository.actor(tx, firmId);
    if (!inviter) throw new Problem('not_found');
    const { firmName, timeZone, name: inviterName, email: inviterEmail } = inviter;
    const url = `${this.configuration.PUBLIC_URL}/firms/${firmId}?invitation=${id}`;
    const data = { name, email, firmName, inviterName, roleName: role, roleTask: TASKS[role], expires: writtenDate(expiresAt, timeZone), url };
    await this.notices.post(tx, { firmId, kind: 'firm-invitation', to: { email, name }, data: { ...data, replyToName: inviterName, replyToEmail: inviterEmail } });
  }

  private period(): { now: Date; expiresAt: Date } {
    const now = this.clock.now();
    return { now, expiresAt: new Date(now.getTime() + INVITATION_DAYS * 86_400_000) };
  }
}
