import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import { formatMoney, minus, sum } from '@tallypole/shared/money';
import { mayReview, reviewTransitions, type ReviewAct } from '@tallypole/shared/schemas/draw-states';
import type { AllowDraw, Draw, FundDraw, Inspected } from '@tallypole/shared/schemas/draws';
import type { FundingRoute } from '@tallypole/shared/schemas/loans';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { DrawActs, type Place } from '../draws/draw-acts.ts';
import { splitMoved } from '../draws/draw-entries.ts';
import type { DrawFacts } from '../draws/draw-facts.ts';
import { basisOf, figuresOf } from '../draws/draw-figures.ts';
import { DrawMails } from '../draws/draw-mails.ts';
import { DrawsRepository } from '../draws/draws.repository.ts';
import { LedgerRepository } from '../ledger/ledger.repository.ts';
import { Bookkeeper } from '../payments/bookkeeper.ts';
import { PaymentsRepository } from '../payments/payments.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { ReviewsRepository } from './reviews.repository.ts';

const WAYS: Readonly<Record<FundingRoute, string>> = {
  builder: 'Sent to the builder',
  borrower: 'Sent to the borrower; it counts when you have it',
  joint_check: 'Sent as a joint check; it counts when you have it',
  title_company: 'Sent through the title company; it counts when you have it',
};

/** The lender's review of a draw. It runs beside the homeowners' approval and never changes what is owed, only who pays it when. */
@Injectable()
export class ReviewsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly acts: DrawActs,
    private readonly draws: DrawsRepository,
    private readonly repository: ReviewsRepository,
    private readonly payments: PaymentsRepository,
    private readonly bookkeeper: Bookkeeper,
    private readonly ledger: LedgerRepository,
    private readonly record: RecordRepository,
    private readonly mails: DrawMails,
    private readonly clock: Clock,
  ) {}

  inspect(place: Place, input: Inspected): Promise<Answered<Draw>> {
    return this.run(place, 'draw.inspected', 'inspect', input, async (tx, facts) => {
      await this.repository.insert(tx, idsOf(facts), 'inspected', input, this.clock.now());
      await this.repository.setReviewState(tx, facts.draw.id, reviewTransitions.inspect.to);
      return { review: input.id, onDate: input.onDate };
    });
  }

  /** How far the lender takes each line to be, and what must be met first. */
  allow(place: Place, input: AllowDraw): Promise<Answered<Draw>> {
    return this.run(place, 'draw.allowed', 'allow', input, async (tx, facts) => {
      const known = new Set(basisOf(facts).lines.map(({ id }) => id));
      input.lines.forEach(({ lineId }, i) => {
        if (!known.has(lineId)) throw Problem.field(`/lines/${i}/lineId`, 'Must be a line of this draw.');
      });
      await this.repository.insert(tx, idsOf(facts), 'allowed', input, this.clock.now());
      await this.repository.allow(tx, idsOf(facts), input.id, input.lines);
      await this.repository.setReviewState(tx, facts.draw.id, reviewTransitions.allow.to);
      const figures = figuresOf(basisOf(facts), input.lines);
      if (facts.draw.approvedAt !== null) await this.moveSplit(tx, facts, input, figures);
      return { review: input.id, loanCents: figures.loanCents, homeownerCents: figures.homeownerCents, lines: input.lines, conditions: input.conditions };
    });
  }

  /** The lender has sent money. To the builder it counts at once; by way of somebody else when the builder confirms it. */
  fund(place: Place, input: FundDraw): Promise<Answered<Draw>> {
    return this.run(place, 'draw.funded', null, input, async (tx, facts) => {
      const { draw } = facts;
      if (draw.approvedAt === null) throw new Problem('wrong_state', { detail: `Draw ${draw.number} is not approved by the homeowners yet.` });
      const left = minus(draw.loanCents ?? 0, await this.repository.sentCents(tx, draw.id));
      const act = input.amountCents === left ? 'fund_rest' : 'fund_part';
      requireReview(facts, act);
      if (input.amountCents > left) throw Problem.field('/amountCents', `Must not be more than the ${formatMoney(left)} that the loan has left to pay in this draw.`);
      if (input.fundedOn > this.clock.today(facts.job.timeZone)) throw Problem.field('/fundedOn', 'Must not lie in the future.');
      const route = (await this.repository.route(tx, place.jobId)) ?? 'builder';
      const paymentId = v7();
      await this.pay(tx, place, { ...input, id: paymentId }, route);
      await this.repository.fund(tx, idsOf(facts), { ...input, paymentId, route }, this.clock.now());
      await this.repository.setReviewState(tx, draw.id, reviewTransitions[act].to);
      await this.mails.funded(tx, facts, { ...input, by: await this.repository.actorName(tx), way: WAYS[route] });
      return { funding: input.id, payment: paymentId, amountCents: input.amountCents, fundedOn: input.fundedOn, reference: input.reference, route };
    });
  }

  private async pay(tx: Tx, place: Place, input: FundDraw, route: FundingRoute): Promise<void> {
    const job = await this.payments.lockJob(tx, place.jobId);
    const draw = await this.payments.drawToPay(tx, place.jobId, place.drawId);
    if (!job || !draw) throw new Problem('not_found');
    const paid = { id: input.id, method: 'loan_advance', source: 'loan', amountCents: input.amountCents, receivedOn: input.fundedOn, reference: input.reference } as const;
    if (route === 'builder') await this.bookkeeper.receive(tx, job, draw, paid, place.actor.personId);
    else await this.bookkeeper.announce(tx, job, draw, paid, place.actor.personId);
  }

  /** After the approval a new split moves what is owed from one source to the other; what was paid already can't be moved. */
  private async moveSplit(tx: Tx, facts: DrawFacts, input: AllowDraw, figures: ReturnType<typeof figuresOf>): Promise<void> {
    const { draw, job } = facts;
    const toHomeownerCents = minus(figures.homeownerCents, draw.homeownerCents ?? 0);
    if (toHomeownerCents === 0) return;
    if (figures.homeownerCents < draw.paidHomeownerCents) throw new Problem('wrong_state', { detail: `The homeowner has paid ${formatMoney(draw.paidHomeownerCents)} of this draw already.` });
    if (figures.loanCents < sum([await this.repository.sentCents(tx, draw.id)])) throw new Problem('wrong_state', { detail: 'More than that was funded already.' });
    await this.ledger.post(tx, job.firmId, job.id, splitMoved(draw, input.id, toHomeownerCents, this.clock.today(job.timeZone)));
    await this.repository.setSplit(tx, draw.id, figures.homeownerCents, figures.loanCents);
    await this.mails.splitChanged(tx, facts, figures, draw.dueOn ?? draw.throughOn);
  }

  private run(
    { actor, jobId, drawId, key }: Place,
    operation: string,
    act: ReviewAct | null,
    input: Inspected | AllowDraw | FundDraw,
    work: (tx: Tx, facts: DrawFacts) => Promise<{ readonly [name: string]: string | number | readonly { lineId: string; percent: number; reason: string }[] }>,
  ): Promise<Answered<Draw>> {
    return this.commands.run<Draw>(actor, {
      operation,
      key,
      input: { jobId, drawId, ...input },
      authorize: (tx) => requireOnJob(tx, 'draw.fund', jobId),
      act: async (tx) => {
        await this.draws.lockJob(tx, jobId);
        const facts = await this.acts.find(tx, jobId, drawId, ['lender']);
        if (facts.draw.state === 'returned' || facts.draw.state === 'void') throw new Problem('wrong_state', { detail: `Draw ${facts.draw.number} went back to the builder.` });
        if (act) requireReview(facts, act);
        const data = await work(tx, facts);
        await this.record.append(tx, { firmId: facts.job.firmId, jobId, act: operation, by: actor.personId, data: { draw: drawId, number: facts.draw.number, ...data } });
        return await this.acts.view(tx, actor, jobId, drawId, ['lender']);
      },
    });
  }
}

const idsOf = ({ job, draw }: DrawFacts) => ({ firmId: job.firmId, jobId: job.id, drawId: draw.id });

const NEEDED: Readonly<Record<DrawFacts['draw']['reviewState'], string>> = {
  not_needed: 'The loan is not asked for anything in this draw.',
  ordered: 'Record your inspection first.',
  inspected: 'Say first how far you take each line to be.',
  allowed: 'The review is decided already.',
  funded: 'The loan has funded this draw.',
};

function requireReview({ draw }: DrawFacts, act: ReviewAct): void {
  if (!mayReview(draw.reviewState, act)) throw new Problem('wrong_state', { detail: NEEDED[draw.reviewState] });
}
