import { Injectable } from '@nestjs/common';
import { sum } from '@tallypole/shared/money';
import type { ListQuery } from '@tallypole/shared/schemas/common';
import type { CreateJob, Job, JobList } from '@tallypole/shared/schemas/jobs';
import type { Role } from '@tallypole/shared/schemas/roles';
import { requireInFirm } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { completionDate } from './completion-date.ts';
import { Clock } from '../common/clock.ts';
import { decodeCursor, encodeCursor } from '../common/cursor.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { JobsRepository } from './jobs.repository.ts';

@Injectable()
export class JobsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: JobsRepository,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  create(actor: Actor, input: CreateJob, key: string): Promise<Answered<Job>> {
    return this.commands.run<Job>(actor, {
      operation: 'job.create',
      key,
      input,
      authorize: (tx) => requireInFirm(tx, 'job.create', input.firmId),
      act: async (tx) => {
        await this.repository.create(tx, input, actor.personId, this.clock.now());
        const { id: jobId, firmId, terms } = input;
        await this.record.append(tx, { firmId, jobId, act: 'job.created', by: actor.personId, data: { terms } });
        return await this.find(tx, jobId, await requireInFirm(tx, 'job.read', firmId));
      },
    });
  }

  job(actor: Actor, jobId: string): Promise<Job> {
    return this.work.readJob(actor, jobId, 'job.read', (tx, roles) => this.find(tx, jobId, roles));
  }

  list(actor: Actor, query: ListQuery): Promise<JobList> {
    return this.work.read(actor, async (tx) => {
      const rows = await this.repository.list(tx, query.limit + 1, decodeCursor(query.cursor));
      const items = rows.slice(0, query.limit).map(({ contractSumCents, changesApprovedCents, ...row }) => ({
        ...row,
        contractSumCents,
        approvedChangesCents: changesApprovedCents,
        contractSumTodayCents: sum([contractSumCents, changesApprovedCents]),
      }));
      const last = items.at(-1);
      return { items, next: rows.length > query.limit && last ? encodeCursor(last) : null };
    });
  }

  private async find(tx: Tx, jobId: string, roles: Role[]): Promise<Job> {
    const facts = await this.repository.find(tx, jobId);
    if (!facts) throw new Problem('not_found');
    const { contractSumCents, changesApprovedCents, daysApproved, ...job } = facts;
    return {
      ...job,
      contractSumCents,
      contractSumTodayCents: sum([contractSumCents, changesApprovedCents]),
      approvedChangesCents: changesApprovedCents,
      approvedDays: daysApproved,
      completionDate: completionDate(job.terms, daysApproved),
      today: this.clock.today(job.timeZone),
      roles,
    };
  }
}
