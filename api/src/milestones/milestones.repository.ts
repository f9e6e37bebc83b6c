import { Injectable } from '@nestjs/common';
import type { Milestone, MilestoneDetail, MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

export interface LockedMilestone {
  firmId: string;
  jobName: string;
  timeZone: string;
  jobCreatedBy: string;
  name: string;
  state: MilestoneState;
  percent: number;
  claimedBy: string | null;
  version: number;
}

export interface NewInspection {
  firmId: string;
  jobId: string;
  id: string;
  milestoneId: string;
  result: string;
  percent: number;
  note: string;
  seenOn: string;
  role: JobRole;
  at: Date;
}

/** What an act writes into a milestone; what is left out stays. */
export interface MilestoneChange {
  state?: MilestoneState;
  percent?: number;
  plannedOn?: string | null;
  forecastOn?: string | null;
  actualOn?: string | null;
  startedAt?: Date;
  claimed?: { at: Date; by: string } | null;
  proven?: { at: Date; by: string } | null;
}

@Injectable()
export class MilestonesRepository {
  async timeZone(tx: Tx, jobId: string): Promise<string> {
    return (await tx.one<{ time_zone: string }>('select time_zone from job where id = $1', [jobId]))?.time_zone ?? 'UTC';
  }

  async list(tx: Tx, jobId: string, withSums: boolean): Promise<Milestone[]> {
    const rows = await tx.rows<{ milestone: Milestone }>(`select ${milestoneJson} as milestone from milestone m where m.job_id = $1 order by m.position`, [jobId, withSums]);
    return rows.map(({ milestone }) => milestone);
  }

  async find(tx: Tx, jobId: string, milestoneId: string, withSums: boolean): Promise<MilestoneDetail | undefined> {
    const row = await tx.one<{ milestone: MilestoneDetail }>(
      `select (${milestoneJson})::jsonb || jsonb_build_object('inspections', ${inspectionsJson}) as milestone from milestone m where m.job_id = $1 and m.id = $3`,
      [jobId, withSums, milestoneId],
    );
    return row?.milestone;
  }

  /** Locks the job, then the milestone, and says what an act on it needs to know. */
  async lock(tx: Tx, jobId: string, milestoneId: string): Promise<LockedMilestone | undefined> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
    return await tx.one<LockedMilestone>(
      `select m.firm_id as "firmId", j.name as "jobName", j.time_zone as "timeZone", j.created_by as "jobCreatedBy", m.name, m.state, m.percent,
         m.claimed_by as "claimedBy", m.version
       from milestone m join job j on j.id = m.job_id where m.job_id = $1 and m.id = $2 for no key update of m`,
      [jobId, milestoneId],
    );
  }

  /** Photos that can stand for a claim: those whose picture could not be read don't. */
  async photoCount(tx: Tx, milestoneId: string): Promise<number> {
    return (await tx.one<{ n: number }>(`select count(*)::int as n from photo where milestone_id = $1 and state <> 'unreadable'`, [milestoneId]))?.n ?? 0;
  }

  /** How much the last inspection that saw a part had seen. */
  async lastPartialPercent(tx: Tx, milestoneId: string): Promise<number> {
    const row = await tx.one<{ percent: number }>(`select percent from inspection where milestone_id = $1 and result = 'partial' and independent order by at desc limit 1`, [milestoneId]);
    return row?.percent ?? 0;
  }

  /** Whether an approved draw bills work on one of the milestone's lines. */
  async isBilled(tx: Tx, milestoneId: string): Promise<boolean> {
    const row = await tx.one<{ billed: boolean }>(
      `select exists (select 1 from schedule_line l join draw_line d on d.line_id = l.id join draw w on w.id = d.draw_id
         where l.milestone_id = $1 and d.work_cents > 0 and w.state in ('approved', 'part_paid', 'paid')) as billed`,
      [milestoneId],
    );
    return row?.billed ?? false;
  }

  async change(tx: Tx, milestoneId: string, change: MilestoneChange): Promise<void> {
    const sets: string[] = ['version = version + 1'];
    const bind: unknown[] = [milestoneId];
    const set = (column: string, value: unknown) => sets.push(`${column} = $${bind.push(value)}`);
    if (change.state !== undefined) set('state', change.state);
    if (change.percent !== undefined) set('percent', change.percent);
    if (change.plannedOn !== undefined) set('planned_on', change.plannedOn);
    if (change.forecastOn !== undefined) set('forecast_on', change.forecastOn);
    if (change.actualOn !== undefined) set('actual_on', change.actualOn);
    if (change.startedAt !== undefined) sets.push(`started_at = coalesce(started_at, $${bind.push(change.startedAt)})`);
    for (const name of ['claimed', 'proven'] as const) {
      const given = change[name];
      if (given === undefined) continue;
      set(`${name}_at`, given?.at ?? null);
      set(`${name}_by`, given?.by ?? null);
    }
    await tx.rows(`update milestone set ${sets.join(', ')} where id = $1`, bind);
  }

  async addInspection(tx: Tx, inspection: NewInspection): Promise<void> {
    const { firmId, jobId, id, milestoneId, result, percent, note, seenOn, role, at } = inspection;
    await tx.rows(
      `insert into inspection (firm_id, job_id, id, milestone_id, result, percent, note, seen_on, by_person, role, at)
       values ($1, $2, $3, $4, $5, $6, $7, $8, app.actor(), $9, $10)`,
      [firmId, jobId, id, milestoneId, result, percent, note, seenOn, role, at],
    );
  }

  /** Who outside of the firm looks at what is claimed. */
  async observers(tx: Tx, jobId: string): Promise<string[]> {
    const rows = await tx.rows<{ id: string }>(`select distinct person_id as id from job_member where job_id = $1 and role in ('homeowner', 'lender', 'inspector') and ended_at is null`, [jobId]);
    return rows.map(({ id }) => id);
  }

  async actor(tx: Tx): Promise<{ name: string; email: string }> {
    const row = await tx.one<{ name: string; email: string }>('select coalesce(name, email) as name, email from person where id = app.actor()');
    if (!row) throw new Error('The actor is always visible to itself.');
    return row;
  }
}

const instant = (column: string) => `to_char(${column} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;
const personJson = (column: string) => `(select json_build_object('id', p.id, 'name', coalesce(p.name, p.email)) from person p where p.id = ${column})`;

const milestoneJson = /* sql */ `json_build_object('id', m.id, 'position', m.position, 'name', m.name, 'state', m.state, 'plannedOn', m.planned_on,
  'forecastOn', m.forecast_on, 'actualOn', m.actual_on, 'percent', m.percent,
  'scheduledCents', case when $2 then (select coalesce(sum(scheduled_cents), 0) from schedule_line where milestone_id = m.id) end,
  'photos', (select json_build_object('ready', count(*) filter (where state = 'ready'), 'waiting', count(*) filter (where state = 'stored'),
      'unreadable', count(*) filter (where state = 'unreadable')) from photo where milestone_id = m.id),
  'claimedAt', ${instant('m.claimed_at')}, 'claimedBy', ${personJson('m.claimed_by')},
  'provenAt', ${instant('m.proven_at')}, 'provenBy', ${personJson('m.proven_by')}, 'version', m.version)`;

const inspectionsJson = /* sql */ `(select coalesce(json_agg(json_build_object('id', i.id, 'result', i.result, 'percent', i.percent, 'note', i.note,
  'seenOn', i.seen_on, 'by', ${personJson('i.by_person')}, 'role', i.role, 'independent', i.independent,
  'guest', (select json_build_object('onBehalf', b.on_behalf, 'senderSide', l.sender_side, 'company', g.company, 'license', g.license)
     from guest_inspection g join guest_link l on l.id = g.link_id join guest_link_inspector b on b.link_id = l.id where g.inspection_id = i.id), 'at', ${instant('i.at')}) order by i.at desc), '[]')
  from inspection i where i.milestone_id = m.id)`;
