import { Injectable } from '@nestjs/common';
import type { JobPeople, MyInvitation } from '@tallypole/shared/schemas/people';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

/** What removing somebody from a job needs to know. */
export interface LeavingFacts {
  firmId: string;
  firmName: string;
  jobName: string;
  homeownersSign: 'one' | 'all';
  actorName: string;
  actorEmail: string;
  /** Who leaves; null where nobody has this role on the job. */
  personName: string | null;
  /** Homeowners who would stay. */
  homeownersLeft: number;
  /** Changes out for signature and draws out for approval. */
  waiting: number;
}

@Injectable()
export class PeopleRepository {
  /** Addresses are for the firm; the others on the job see names and roles. */
  async people(tx: Tx, jobId: string, withAddresses: boolean, now: Date): Promise<JobPeople> {
    const row = await tx.one<{ people: JobPeople }>(PEOPLE, [jobId, withAddresses, now]);
    return row?.people ?? { people: [], invitations: [] };
  }

  async myInvitation(tx: Tx, invitationId: string, now: Date): Promise<MyInvitation | undefined> {
    return await tx.one<MyInvitation>(
      `select firm_name as "firmName", sender_name as "senderName", job_id as "jobId", firm_id as "firmId", state from app.invitation_for_me($1, $2)`,
      [invitationId, now],
    );
  }

  /** Locks the job and says who would leave and who would stay. */
  async lockForLeaving(tx: Tx, jobId: string, personId: string, role: JobRole): Promise<LeavingFacts | undefined> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
    return await tx.one<LeavingFacts>(LEAVING, [jobId, personId, role]);
  }

  async end(tx: Tx, jobId: string, personId: string, role: JobRole, now: Date): Promise<boolean> {
    return (await tx.one<{ ended: boolean }>('select app.end_job_member($1, $2, $3, $4) as ended', [jobId, personId, role, now]))?.ended ?? false;
  }

  /** Approvals of draws that wait for more of them fall: those who stay approve anew. Returns what those draws are called. */
  async askForApprovalAnew(tx: Tx, jobId: string, now: Date): Promise<string[]> {
    const rows = await tx.rows<{ number: number }>(
      `update draw_approval a set superseded_at = $2 from draw d where d.id = a.draw_id and d.job_id = $1 and d.state = 'submitted' and a.superseded_at is null returning d.number`,
      [jobId, now],
    );
    return [...new Set(rows.map(({ number }) => number))].sort((a, b) => a - b).map((number) => `Draw ${number}`);
  }

  async changesOut(tx: Tx, jobId: string): Promise<string[]> {
    const rows = await tx.rows<{ name: string }>(`select 'Change ' || number || revision as name from change where job_id = $1 and state in ('issued', 'partly_signed') order by number`, [jobId]);
    return rows.map(({ name }) => name);
  }

  /** Homeowners and lenders who are on the job now. */
  async outside(tx: Tx, jobId: string): Promise<string[]> {
    const rows = await tx.rows<{ id: string }>(`select distinct person_id as id from job_member where job_id = $1 and role in ('homeowner', 'lender') and ended_at is null`, [jobId]);
    return rows.map(({ id }) => id);
  }
}

const LEAVING = /* sql */ `
  select j.firm_id as "firmId", f.name as "firmName", j.name as "jobName", j.homeowners_sign as "homeownersSign", coalesce(a.name, a.email) as "actorName", a.email as "actorEmail",
    (select coalesce(p.name, p.email) from job_member m join person p on p.id = m.person_id where m.job_id = j.id and m.person_id = $2 and m.role = $3 and m.ended_at is null) as "personName",
    (select count(*)::int from job_member m where m.job_id = j.id and m.role = 'homeowner' and m.ended_at is null and m.person_id <> $2) as "homeownersLeft",
    (select count(*)::int from change c where c.job_id = j.id and c.state in ('issued', 'partly_signed')) + (select count(*)::int from draw d where d.job_id = j.id and d.state = 'submitted') as waiting
  from job j join firm f on f.id = j.firm_id, person a where j.id = $1 and a.id = app.actor()`;

const PEOPLE = /* sql */ `
  with on_job as (
    select m.person_id, m.role, m.created_at, 1 as side from firm_member m join job j on j.firm_id = m.firm_id where j.id = $1
    union all select person_id, role, created_at, 2 from job_member where job_id = $1 and ended_at is null)
  select json_build_object(
    'people', (select coalesce(json_agg(json_build_object('personId', p.id, 'name', coalesce(p.name, p.email),
        'email', case when $2 then p.email end, 'role', o.role) order by o.side, o.created_at, p.id), '[]')
      from on_job o join person p on p.id = o.person_id),
    'invitations', (select coalesce(json_agg(json_build_object('id', id, 'email', email, 'name', name, 'role', role,
        'state', case when expires_at <= $3 then 'expired' else 'open' end,
        'sentAt', to_char(sent_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
        'expiresAt', to_char(expires_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by created_at), '[]')
      from invitation where job_id = $1 and accepted_at is null and revoked_at is null)) as people`;
