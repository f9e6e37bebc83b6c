import { Injectable } from '@nestjs/common';
import { InjectModel } from '@nestjs/sequelize';
import type { CreateJob, JobRow } from '@tallypole/shared/schemas/jobs';
import type { Tx } from '../common/unit-of-work.ts';
import { JobModel } from './job.model.ts';

export interface JobFacts extends Omit<JobRow, 'contractSumTodayCents' | 'approvedChangesCents'> {
  timeZone: string;
  changesApprovedCents: number;
  daysApproved: number;
  terms: CreateJob['terms'];
  version: number;
}

export type JobRowFacts = Omit<JobRow, 'contractSumTodayCents' | 'approvedChangesCents'> & { changesApprovedCents: number };

@Injectable()
export class JobsRepository {
  constructor(@InjectModel(JobModel) private readonly jobs: typeof JobModel) {}

  async create(tx: Tx, input: CreateJob, createdBy: string, now: Date): Promise<void> {
    const { id, firmId, name, address, timeZone, terms } = input;
    await this.jobs.create({ id, firmId, name, ...address, timeZone, ...terms, createdBy, createdAt: now }, { transaction: tx.transaction });
  }

  async find(tx: Tx, jobId: string): Promise<JobFacts | undefined> {
    return (await tx.one<{ job: JobFacts }>(`select ${JOB} as job from job j join firm f on f.id = j.firm_id where j.id = $1`, [jobId]))?.job;
  }

  /** Newest first, by key: the cursor is the last row's creation instant and id. */
  async list(tx: Tx, limit: number, after: { createdAt: string; id: string } | null): Promise<JobRowFacts[]> {
    const rows = await tx.rows<{ job: JobRowFacts }>(
      `select ${JOB_ROW} as job from job j join firm f on f.id = j.firm_id
       where $2::timestamptz is null or (j.created_at, j.id) < ($2::timestamptz, $3::uuid)
       order by j.created_at desc, j.id desc limit $1`,
      [limit, after?.createdAt ?? null, after?.id ?? null],
    );
    return rows.map(({ job }) => job);
  }
}

const FIELDS = /* sql */ `
  'id', j.id, 'firmId', j.firm_id, 'firmName', f.name, 'name', j.name,
  'address', json_build_object('street', j.street, 'city', j.city, 'state', j.state, 'zip', j.zip),
  'contractSumCents', j.contract_sum_cents, 'changesApprovedCents', j.changes_approved_cents, 'completeBy', j.complete_by,
  'createdAt', to_char(j.created_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;
const JOB_ROW = `json_build_object(${FIELDS})`;
const JOB = /* sql */ `json_build_object(${FIELDS}, 'timeZone', j.time_zone, 'daysApproved', j.days_approved, 'version', j.version,
  'terms', json_build_object('style', j.style, 'contractSumCents', j.contract_sum_cents, 'signedOn', j.signed_on, 'startOn', j.start_on,
    'completeBy', j.complete_by, 'dayKind', j.day_kind, 'retainageRate', j.retainage_rate, 'depositCents', j.deposit_cents,
    'reviewDays', j.review_days, 'paymentDays', j.payment_days, 'lateRate', j.late_rate, 'homeownersSign', j.homeowners_sign,
    'openBook', j.open_book))`;
