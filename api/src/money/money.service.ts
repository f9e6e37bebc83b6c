import { Injectable } from '@nestjs/common';
import { atLeastZero, minus, sum } from '@tallypole/shared/money';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { DrawsService } from '../draws/draws.service.ts';
import { isFirm } from '../draws/draw-acts.ts';
import { PaymentsRepository } from '../payments/payments.repository.ts';
import { moneyFigures } from './money-figures.ts';
import { MoneyRepository } from './money.repository.ts';

@Injectable()
export class MoneyService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: MoneyRepository,
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
}
