import { Injectable } from '@nestjs/common';
import { InvalidInput } from '@tallypole/shared/arithmetic';
import { cashAhead } from '@tallypole/shared/forecast';
import { atLeastZero, minus, sum } from '@tallypole/shared/money';
import type { JobCashAhead, JobMoney } from '@tallypole/shared/schemas/money';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { DrawsService } from '../draws/draws.service.ts';
import { isFirm } from '../draws/draw-acts.ts';
import { PaymentsRepository } from '../payments/payments.repository.ts';
import { aheadInput } from './ahead.ts';
import { AheadRepository } from './ahead.repository.ts';
import { moneyFigures } from './money-figures.ts';
import { MoneyRepository } from './money.repository.ts';

@Injectable()
export class MoneyService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: MoneyRepository,
    private readonly aheadRepository: AheadRepository,
    private readonly payments: PaymentsRepository,
    private readonly draws: DrawsService,
    private readonly clock: Clock,
  ) {}

  money(actor: Actor, jobId: string): Promise<JobMoney> {
    return this.work.readJob(actor, jobId, 'money.read', async (tx, roles) => {
      const facts = await this.repository.facts(tx, jobId);
      if (!facts) throw new Problem('not_found');
      const payments = await this.payments.list(tx, jobId, isFirm(roles));
      const deposit = sum(payments.filter(({ drawId }) => drawId === null).map(({ keptCents }) => keptCents));
      const draws = await this.draws.rows(tx, jobId, roles);
      return { asOf: this.clock.today(facts.timeZone), ...moneyFigures(facts, isFirm(roles)), depositDueCents: atLeastZero(minus(facts.depositCents, deposit)), draws, payments };
    });
  }

  /** What has still to be paid, month by month; null before there is a schedule of values, or where it can't be said. */
  ahead(actor: Actor, jobId: string): Promise<JobCashAhead> {
    return this.work.readJob(actor, jobId, 'money.read', async (tx, roles) => {
      const facts = await this.aheadRepository.facts(tx, jobId);
      if (!facts) throw new Problem('not_found');
      const draws = await this.draws.rows(tx, jobId, roles);
      const asOf = this.clock.today(facts.timeZone);
      if (facts.next.lines.length === 0) return { asOf, ahead: null };
      try {
        return { asOf, ahead: cashAhead(aheadInput(facts, draws, asOf)) };
      } catch (error) {
        if (error instanceof InvalidInput) return { asOf, ahead: null };
        throw error;
      }
    });
  }
}
