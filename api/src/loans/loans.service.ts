import { Injectable } from '@nestjs/common';
import type { JobLoan, SetLoan } from '@tallypole/shared/schemas/loans';
import { ChangeReissue } from '../changes/change-reissue.ts';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { LoansRepository } from './loans.repository.ts';

@Injectable()
export class LoansService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: LoansRepository,
    private readonly record: RecordRepository,
    private readonly changes: ChangeReissue,
    private readonly clock: Clock,
  ) {}

  loan(actor: Actor, jobId: string): Promise<JobLoan> {
    return this.work.readJob(actor, jobId, 'draw.read', (tx) => this.find(tx, jobId));
  }

  /** Enters or corrects the terms, until a draw was approved on them. */
  set(actor: Actor, jobId: string, input: SetLoan, key: string): Promise<Answered<JobLoan>> {
    return this.commands.run<JobLoan>(actor, {
      operation: 'loan.set',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'loan.terms', jobId),
      act: async (tx) => {
        const firmId = await this.repository.lockJob(tx, jobId);
        if (!firmId) throw new Problem('not_found');
        if (await this.repository.isDrawnOn(tx, jobId)) throw new Problem('wrong_state', { detail: 'A draw was approved on these terms; they stay as they are.' });
        const before = await this.repository.find(tx, jobId);
        await this.repository.set(tx, firmId, jobId, input, this.clock.now());
        // who funds a change, and whether the lender is asked, is part of what is signed
        if (before?.consentLimitCents !== input.consentLimitCents) await this.changes.askAgain(tx, { firmId, jobId }, null);
        await this.record.append(tx, { firmId, jobId, act: 'loan.set', by: actor.personId, data: { ...input } });
        return await this.find(tx, jobId);
      },
    });
  }

  private async find(tx: Tx, jobId: string): Promise<JobLoan> {
    return { loan: (await this.repository.find(tx, jobId)) ?? null };
  }
}
