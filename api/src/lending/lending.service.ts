import { Injectable } from '@nestjs/common';
import { seenOfBilled } from '@tallypole/shared/draw';
import { minus, sum } from '@tallypole/shared/money';
import type { Lending } from '@tallypole/shared/schemas/lending';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { blockerOf } from './blocker.ts';
import { LendingRepository, type LendingFacts } from './lending.repository.ts';

/** The lender's queue: what can be funded today, and for the rest the one thing that blocks it. */
@Injectable()
export class LendingService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: LendingRepository,
  ) {}

  queue(actor: Actor): Promise<Lending> {
    return this.work.read(actor, async (tx) => ({ items: (await this.repository.queue(tx)).map(rowOf).filter(({ loanOpenCents }) => loanOpenCents > 0) }));
  }
}

function rowOf(facts: LendingFacts): Lending['items'][number] {
  const { approved, given, homeowners, invited, sign, lines, ...rest } = facts;
  const seen = lines.map(([scheduledCents, workCents, seenRate]) => ({ scheduledCents, workCents, seenRate }));
  const row = { ...rest, provenCents: seenOfBilled(seen), billedCents: sum(seen.map(({ workCents }) => workCents)) };
  const needed = sign === 'one' ? 1 : homeowners + invited;
  return { ...row, loanOpenCents: minus(rest.loanCents, rest.sentCents), approvals: { given: approved ? needed : given, needed }, blocker: blockerOf({ ...row, approved }) };
}
