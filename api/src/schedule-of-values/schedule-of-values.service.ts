import { Injectable } from '@nestjs/common';
import { minus, sum } from '@tallypole/shared/money';
import { sumProblem } from '@tallypole/shared/schedule-of-values';
import type { ImportSchedule, SchedulePreview, ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import { requireOnJob } from '../common/access.ts';
import { canonicalHash } from '../common/canonical.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { readSchedule, type ContractFacts, type ScheduleFile } from './schedule-reader.ts';
import { ScheduleOfValuesRepository } from './schedule-of-values.repository.ts';

@Injectable()
export class ScheduleOfValuesService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: ScheduleOfValuesRepository,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  /** What a file is compared with; asked before the file is taken, so that whoever may not import sends nothing. */
  contract(actor: Actor, jobId: string): Promise<ContractFacts> {
    return this.work.readJob(actor, jobId, 'schedule_of_values.import', async (tx) => {
      const contract = await this.repository.contract(tx, jobId);
      if (!contract) throw new Problem('not_found');
      return contract;
    });
  }

  preview(file: ScheduleFile, contract: ContractFacts): Promise<SchedulePreview> {
    return readSchedule(file, contract);
  }

  /** Writes the schedule whose lines add up to the contract sum, in place of an earlier one that nothing rests on yet. */
  import(actor: Actor, jobId: string, input: ImportSchedule, key: string): Promise<Answered<ScheduleOfValues>> {
    return this.commands.run<ScheduleOfValues>(actor, {
      operation: 'schedule_of_values.import',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'schedule_of_values.import', jobId),
      act: (tx) => this.write(tx, actor, jobId, input),
    });
  }

  schedule(actor: Actor, jobId: string): Promise<ScheduleOfValues> {
    return this.work.readJob(actor, jobId, 'schedule_of_values.read', (tx) => this.find(tx, jobId));
  }

  private async write(tx: Tx, actor: Actor, jobId: string, input: ImportSchedule): Promise<ScheduleOfValues> {
    const job = await this.repository.lockJob(tx, jobId);
    if (!job) throw new Problem('not_found');
    if (!job.replaceable) {
      throw new Problem('wrong_state', { detail: 'Changes, photos or draws rest on this schedule already. Further work is added by a change.' });
    }
    refuseWrongReferences(input);
    const sumCents = sum(input.lines.map(({ scheduledCents }) => scheduledCents));
    const { contractSumCents, firmId } = job;
    const wrong = sumProblem({ sumCents, contractSumCents, differenceCents: minus(contractSumCents, sumCents) });
    if (wrong) throw new Problem('rule_broken', { detail: wrong, errors: [{ pointer: '/lines', code: 'sum', message: wrong }] });
    await this.repository.replace(tx, firmId, jobId, input, this.clock.now());
    const data = { lines: input.lines.length, milestones: input.milestones.length, sumCents, sha256: canonicalHash({ ...input }) };
    await this.record.append(tx, { firmId, jobId, act: 'schedule_of_values.imported', by: actor.personId, data });
    return await this.find(tx, jobId);
  }

  private async find(tx: Tx, jobId: string): Promise<ScheduleOfValues> {
    const rows = await this.repository.find(tx, jobId);
    if (!rows) throw new Problem('not_found');
    const { contractSumCents, changesApprovedCents, ...schedule } = rows;
    const sumCents = sum(schedule.lines.map(({ scheduledCents }) => scheduledCents));
    const contractSumTodayCents = sum([contractSumCents, changesApprovedCents]);
    return { ...schedule, sumCents, contractSumTodayCents, differenceCents: minus(contractSumTodayCents, sumCents) };
  }
}

function refuseWrongReferences({ milestones, lines }: ImportSchedule): void {
  const ids = new Set(milestones.map(({ id }) => id));
  const unknown = lines.findIndex(({ milestoneId }) => milestoneId !== null && !ids.has(milestoneId));
  if (unknown >= 0) throw Problem.field(`/lines/${unknown}/milestoneId`, 'Choose one of the milestones.');
  const idle = milestones.findIndex(({ id }) => !lines.some(({ milestoneId }) => milestoneId === id));
  if (idle >= 0) throw Problem.field(`/milestones/${idle}/name`, 'No line belongs to this milestone.');
}
