import { Injectable } from '@nestjs/common';
import type { Invite, JobPeople } from '@tallypole/shared/schemas/people';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

export interface AcceptedInvitation {
  id: string;
  firm_id: string;
  job_id: string;
  role: JobRole;
  invited_by: string;
}

export interface InvitationFacts {
  firmId: string;
  firmName: string;
  jobName: string;
  inviterName: string;
  inviterEmail: string;
  timeZone: string;
}

@Injectable()
export class PeopleRepository {
  async acceptInvitations(tx: Tx, now: Date): Promise<AcceptedInvitation[]> {
    return await tx.rows<AcceptedInvitation>('select * from app.accept_invitations($1)', [now]);
  }

  /** Into firms that invited this address. */
  async acceptFirmInvitations(tx: Tx, now: Date): Promise<void> {
    await tx.rows('select app.accept_firm_invitations($1)', [now]);
  }

  async acceptedFacts(tx: Tx, jobId: string): Promise<{ name: string; email: string; jobName: string }> {
    const row = await tx.one<{ name: string; email: string; jobName: string }>(
      'select coalesce(p.name, p.email) as name, p.email, j.name as "jobName" from person p, job j where p.id = app.actor() and j.id = $1',
      [jobId],
    );
    if (!row) throw new Error('The job of an accepted invitation is not visible.');
    return row;
  }

  async invitationFacts(tx: Tx, jobId: string): Promise<InvitationFacts | undefined> {
    return await tx.one<InvitationFacts>(
      `select j.firm_id as "firmId", f.name as "firmName", j.name as "jobName", coalesce(p.name, p.email) as "inviterName",
         p.email as "inviterEmail", j.time_zone as "timeZone"
       from job j join firm f on f.id = j.firm_id, person p where j.id = $1 and p.id = app.actor()`,
      [jobId],
    );
  }

  /** Inserts an invitation; false where the same address is already invited in this role and hasn't answered. */
  async invite(tx: Tx, jobId: string, firmId: string, invite: Invite, now: Date, expiresAt: Date): Promise<boolean> {
    const row = await tx.one(
      `insert into invitation (id, firm_id, job_id, email, name, role, invited_by, created_at, expires_at)
       values ($1, $2, $3, $4, $5, $6, app.actor(), $7, $8)
       on conflict (job_id, email, role) where accepted_at is null and revoked_at is null do nothing returning id`,
      [invite.id, firmId, jobId, invite.email, invite.name, invite.role, now, expiresAt],
    );
    return row !== undefined;
  }

  /** Addresses are for the firm; the others on the job see names and roles. */
  async people(tx: Tx, jobId: string, withAddresses: boolean): Promise<JobPeople> {
    const row = await tx.one<{ people: JobPeople }>(PEOPLE, [jobId, withAddresses]);
    return row?.people ?? { people: [], invitations: [] };
  }
}

const PEOPLE = /* sql */ `
  with on_job as (
    select m.person_id, m.role, m.created_at, 1 as side from firm_member m join job j on j.firm_id = m.firm_id where j.id = $1
    union all select person_id, role, created_at, 2 from job_member where job_id = $1 and ended_at is null)
  select json_build_object(
    'people', (select coalesce(json_agg(json_build_object('personId', p.id, 'name', coalesce(p.name, p.email),
        'email', case when $2 then p.email end, 'role', o.role) order by o.side, o.created_at, p.id), '[]')
      from on_job o join person p on p.id = o.person_id),
    'invitations', (select coalesce(json_agg(json_build_object('id', id, 'email', email, 'name', name, 'role', role,
        'invitedAt', to_char(created_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
        'expiresAt', to_char(expires_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by created_at), '[]')
      from invitation where job_id = $1 and accepted_at is null and revoked_at is null)) as people`;
