import { Injectable } from '@nestjs/common';
import type { InviteMember, Members } from '@tallypole/shared/schemas/members';
import type { FirmRole } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

export type MemberOutcome = 'done' | 'unknown' | 'last_principal';

export interface LockedFirmInvitation {
  id: string;
  email: string;
  name: string;
  role: FirmRole;
  acceptedAt: Date | null;
  revokedAt: Date | null;
}

@Injectable()
export class MembersRepository {
  async members(tx: Tx, firmId: string, now: Date): Promise<Members> {
    const row = await tx.one<{ members: Members }>(MEMBERS, [firmId, now]);
    return row?.members ?? { members: [], invitations: [] };
  }

  /** False where this address is invited already, or belongs to a member. */
  async invite(tx: Tx, firmId: string, invite: InviteMember, now: Date, expiresAt: Date): Promise<boolean> {
    const row = await tx.one(
      `insert into firm_invitation (id, firm_id, email, name, role, invited_by, created_at, sent_at, expires_at)
       select $1, $2, $3, $4, $5, app.actor(), $6, $6, $7
       where not exists (select 1 from firm_member m join person p on p.id = m.person_id where m.firm_id = $2 and p.email = $3)
       on conflict (firm_id, email) where accepted_at is null and revoked_at is null do nothing returning id`,
      [invite.id, firmId, invite.email, invite.name, invite.role, now, expiresAt],
    );
    return row !== undefined;
  }

  async lockInvitation(tx: Tx, firmId: string, invitationId: string): Promise<LockedFirmInvitation | undefined> {
    return await tx.one<LockedFirmInvitation>(
      'select id, email, name, role, accepted_at as "acceptedAt", revoked_at as "revokedAt" from firm_invitation where firm_id = $1 and id = $2 for no key update',
      [firmId, invitationId],
    );
  }

  async renewInvitation(tx: Tx, invitationId: string, now: Date, expiresAt: Date): Promise<void> {
    await tx.rows('update firm_invitation set sent_at = $2, expires_at = $3 where id = $1', [invitationId, now, expiresAt]);
  }

  async revokeInvitation(tx: Tx, invitationId: string, now: Date): Promise<void> {
    await tx.rows('update firm_invitation set revoked_at = $2 where id = $1', [invitationId, now]);
  }

  async find(tx: Tx, firmId: string, personId: string): Promise<{ role: FirmRole } | undefined> {
    return await tx.one<{ role: FirmRole }>('select role from firm_member where firm_id = $1 and person_id = $2', [firmId, personId]);
  }

  async setRole(tx: Tx, firmId: string, personId: string, role: FirmRole): Promise<MemberOutcome> {
    return (await tx.one<{ outcome: MemberOutcome }>('select app.set_member_role($1, $2, $3) as outcome', [firmId, personId, role]))?.outcome ?? 'unknown';
  }

  async end(tx: Tx, firmId: string, personId: string, now: Date): Promise<MemberOutcome> {
    return (await tx.one<{ outcome: MemberOutcome }>('select app.end_member($1, $2, $3) as outcome', [firmId, personId, now]))?.outcome ?? 'unknown';
  }

  /** One entry in what each job of the firm shows, in one statement. */
  async recordInAllJobs(tx: Tx, firmId: string, text: string): Promise<void> {
    await tx.rows('select app.record_in_all_jobs($1, $2)', [firmId, text]);
  }

  async actor(tx: Tx, firmId: string): Promise<{ firmName: string; timeZone: string; name: string; email: string } | undefined> {
    return await tx.one(`select f.name as "firmName", f.time_zone as "timeZone", coalesce(p.name, p.email) as name, p.email from firm f, person p where f.id = $1 and p.id = app.actor()`, [firmId]);
  }
}

const MEMBERS = /* sql */ `
  select json_build_object(
    'members', (select coalesce(json_agg(json_build_object('personId', p.id, 'name', coalesce(p.name, p.email), 'email', p.email, 'role', m.role) order by m.created_at, p.id), '[]')
      from firm_member m join person p on p.id = m.person_id where m.firm_id = $1),
    'invitations', (select coalesce(json_agg(json_build_object('id', id, 'email', email, 'name', name, 'role', role,
        'state', case when expires_at <= $2 then 'expired' else 'open' end,
        'expiresAt', to_char(expires_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by created_at), '[]')
      from firm_invitation where firm_id = $1 and accepted_at is null and revoked_at is null)) as members`;
