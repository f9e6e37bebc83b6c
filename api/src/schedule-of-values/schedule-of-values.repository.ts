import { Injectable } from '@nestjs/common';
import type { ImportSchedule, ScheduleLine } from '@tallypole/shared/schemas/schedule-of-values';
import type { Tx } from '../common/unit-of-work.ts';
import type { ContractFacts } from './schedule-reader.ts';

export interface LockedJob extends ContractFacts {
  firmId: string;
  /** Whether nothing rests on the schedule yet. */
  replaceable: boolean;
}

export interface ScheduleRows {
  lines: ScheduleLine[];
  milestones: { id: string; name: string }[];
  importedAt: string | null;
  replaceable: boolean;
  contractSumCents: number;
  changesApprovedCents: number;
}

@Injectable()
export class ScheduleOfValuesRepository {
  async contract(tx: Tx, jobId: string): Promise<ContractFacts | undefined> {
    return await tx.one<ContractFacts>('select contract_sum_cents as "contractSumCents", start_on as "startOn", complete_by as "completeBy" from job where id = $1', [jobId]);
  }

  async lockJob(tx: Tx, jobId: string): Promise<LockedJob | undefined> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
    return await tx.one<LockedJob>(
      `select j.firm_id as "firmId", j.contract_sum_cents as "contractSumCents", j.start_on as "startOn", j.complete_by as "completeBy",
         ${REPLACEABLE} as replaceable from job j where j.id = $1`,
      [jobId],
    );
  }

  /** Puts a schedule in the place of the one before. */
  async replace(tx: Tx, firmId: string, jobId: string, schedule: ImportSchedule, now: Date): Promise<void> {
    await tx.rows('delete from schedule_line where job_id = $1', [jobId]);
    await tx.rows('delete from milestone where job_id = $1', [jobId]);
    await tx.rows(
      `insert into milestone (firm_id, job_id, id, position, name, planned_on, forecast_on, created_at)
       select $1, $2, m.id, m.position, m.name, m."plannedOn", m."plannedOn", $4
       from json_to_recordset($3::json) as m (id uuid, position integer, name text, "plannedOn" date)`,
      [firmId, jobId, JSON.stringify(placed(schedule.milestones)), now],
    );
    await tx.rows(
      `insert into schedule_line (firm_id, job_id, id, number, position, phase, description, scheduled_cents, kind, milestone_id, created_at)
       select $1, $2, l.id, l.number, l.position, l.phase, l.description, l."scheduledCents", l.kind, l."milestoneId", $4
       from json_to_recordset($3::json) as l (id uuid, number text, position integer, phase text, description text, "scheduledCents" bigint, kind text, "milestoneId" uuid)`,
      [firmId, jobId, JSON.stringify(placed(schedule.lines)), now],
    );
  }

  async find(tx: Tx, jobId: string): Promise<ScheduleRows | undefined> {
    return (await tx.one<{ schedule: ScheduleRows }>(SCHEDULE, [jobId]))?.schedule;
  }
}

const placed = <T extends object>(items: T[]) => items.map((item, i) => ({ ...item, position: i + 1 }));

// no draw, no change's line, no milestone that has moved, no photo
const REPLACEABLE = /* sql */ `(j.last_draw_number = 0
  and not exists (select 1 from schedule_line where job_id = j.id and kind = 'change')
  and not exists (select 1 from milestone where job_id = j.id and state <> 'upcoming')
  and not exists (select 1 from photo where job_id = j.id))`;

const SCHEDULE = /* sql */ `
  select json_build_object(
    'replaceable', ${REPLACEABLE}, 'contractSumCents', j.contract_sum_cents, 'changesApprovedCents', j.changes_approved_cents,
    'importedAt', (select to_char(min(created_at) at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') from schedule_line where job_id = j.id),
    'milestones', (select coalesce(json_agg(json_build_object('id', id, 'name', name) order by position), '[]') from milestone where job_id = j.id),
    'lines', (select coalesce(json_agg(json_build_object('id', id, 'number', number, 'position', position, 'phase', phase, 'description', description,
        'scheduledCents', scheduled_cents, 'kind', kind, 'milestoneId', milestone_id, 'changeId', change_id) order by position), '[]')
      from schedule_line where job_id = j.id)) as schedule
  from job j where j.id = $1`;
