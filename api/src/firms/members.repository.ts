import { Injectable } from '@nestjs/common';
import type { InviteMember, Members } from '@tallypole/shared/schemas/members';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class MembersRepository {
  async members(tx: Tx, firmId: string): Promise<Members> {
    const row = await tx.one<{ members: Members }>(MEMBERS, [firmId]);
    return row?.members ?? { members: [], invitations: [] };
  }

  /** False where this address is invited already, or belongs to a member. */
  async invite(tx: Tx, firmId: string, invite: InviteMember, now: Date, expiresAt: Date): Promise<boolean> {
    const row = await tx.one(
      `insert into firm_invitation (id, firm_id, email, name, role, invited_by, created_at, expires_at)
       select $1, $2, $3, $4, $5, app.actor(), $6, $7
       where not exists (select 1 from firm_member m join person p on p.id = m.person_id where m.firm_id = $2 and p.email = $3)
       on conflict (firm_id, email) where accepted_at is null do nothing returning id`,
      [invite.id, firmId, invite.email, invite.name, invite.role, now, expiresAt],
    );
    return row !== undefined;
  }

  async inviter(tx: Tx, firmId: string): Promise<{ firmName: string; timeZone: string; name: string; email: string } | undefined> {
    return await tx.one(`select f.name as "firmName", f.time_zone as "timeZone", coalesce(p.name, p.email) as name, p.email from firm f, person p where f.id = $1 and p.id = app.actor()`, [firmId]);
  }
}

const MEMBERS = /* sql */ `
  select json_build_object(
    'members', (select coalesce(json_agg(json_build_object('personId', p.id, 'name', coalesce(p.name, p.email), 'email', p.email, 'role', m.role) order by m.created_at, p.id), '[]')
      from firm_member m join person p on p.id = m.person_id where m.firm_id = $1),
    'invitations', (select coalesce(json_agg(json_build_object('id', id, 'email', email, 'name', name, 'role', role,
        'expiresAt', to_char(expires_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by created_at), '[]')
      from firm_invitation where firm_id = $1 and accepted_at is null)) as members`;
