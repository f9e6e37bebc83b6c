import { Injectable } from '@nestjs/common';
import { formatMoney, minus } from '@tallypole/shared/money';
import type { Payment, PaymentProgress, RecordPayment, StartPayment } from '@tallypole/shared/schemas/payments';
import { mayDraw } from '@tallypole/shared/schemas/draw-states';
import { Presence } from '../auth/presence.ts';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import type { Source } from '../ledger/entry.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { AttemptsRepository } from './attempts.repository.ts';
import { Bookkeeper } from './bookkeeper.ts';
import { PaymentsRepository, type DrawToPay, type JobToPay } from './payments.repository.ts';

/** A payment page takes sums within these (Stripe's bounds for US dollars, from memory). */
const LEAST_CENTS = 50;
const MOST_CENTS = 99_999_999;

@Injectable()
export class PaymentsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: PaymentsRepository,
    private readonly attempts: AttemptsRepository,
    private readonly bookkeeper: Bookkeeper,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly presence: Presence,
    private readonly clock: Clock,
  ) {}

  /** The homeowner pays the own part of a draw: the intent is stored, the worker opens the payment page. One at a time per draw. */
  start(actor: Actor, jobId: string, drawId: string, input: StartPayment, key: string): Promise<Answered<PaymentProgress>> {
    return this.commands.run<PaymentProgress>(actor, {
      operation: 'payment.start',
      key,
      input: { jobId, drawId, ...input },
      authorize: (tx) => requireOnJob(tx, 'payment.start', jobId),
      act: async (tx) => {
        await this.presence.require(tx, actor);
        const { job, draw } = await this.lock(tx, jobId, drawId);
        const before = await this.repository.underWay(tx, drawId, this.clock.now());
        if (before) return await this.goOn(tx, job, before);
        const openCents = openPart(draw, 'homeowner');
        if (openCents <= 0) throw new Problem('wrong_state', { detail: `Your part of draw ${draw.number} is paid.` });
        if (openCents !== input.amountCents) throw new Problem('effect_changed', { detail: `Your open part of draw ${draw.number} is ${formatMoney(openCents)} now.` });
        await this.checkCanTake(tx, jobId, openCents);
        return await this.open(tx, actor, job, draw, input);
      },
    });
  }

  progress(actor: Actor, jobId: string, paymentId: string): Promise<PaymentProgress> {
    return this.work.readJob(actor, jobId, 'payment.start', async (tx) => {
      const found = await this.repository.progress(tx, jobId, paymentId, this.clock.now());
      if (!found) throw new Problem('not_found');
      return { payment: { ...found.payment, feeCents: null }, url: found.url };
    });
  }

  /** Books has a check or a wire in hand. */
  recordReceived(actor: Actor, jobId: string, input: RecordPayment, key: string): Promise<Answered<{ payments: Payment[] }>> {
    return this.commands.run<{ payments: Payment[] }>(actor, {
      operation: 'payment.record',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'payment.record', jobId),
      act: async (tx) => {
        if (input.drawId === null) await this.recordDeposit(tx, actor, jobId, input);
        else await this.recordForDraw(tx, actor, jobId, input.drawId, input);
        return { payments: await this.repository.list(tx, jobId, true) };
      },
    });
  }

  /** The lender's money has come by way of the borrower, a joint check or a title company. */
  confirmReceipt(actor: Actor, jobId: string, paymentId: string, receivedOn: string, key: string): Promise<Answered<{ payments: Payment[] }>> {
    return this.commands.run<{ payments: Payment[] }>(actor, {
      operation: 'payment.confirm',
      key,
      input: { jobId, paymentId, receivedOn },
      authorize: (tx) => requireOnJob(tx, 'payment.record', jobId),
      act: async (tx) => {
        const job = await this.lockJob(tx, jobId);
        const waiting = await this.repository.awaitingReceipt(tx, jobId, paymentId);
        if (!waiting) throw new Problem('not_found');
        if (waiting.state !== 'processing') throw new Problem('wrong_state');
        const draw = await this.repository.drawToPay(tx, jobId, waiting.drawId);
        if (!draw) throw new Problem('not_found');
        await this.repository.receive(tx, paymentId, receivedOn);
        const paid = { id: paymentId, source: 'loan', amountCents: waiting.amountCents, receivedOn, reference: '' } as const;
        await this.bookkeeper.bookReceived(tx, job, draw, paid, actor.personId);
        return { payments: await this.repository.list(tx, jobId, true) };
      },
    });
  }

  private async open(tx: Tx, actor: Actor, job: JobToPay, draw: DrawToPay, input: StartPayment): Promise<PaymentProgress> {
    const { firmId, jobId } = job;
    const now = this.clock.now();
    const startedOn = this.clock.today(job.timeZone);
    const payment = { id: input.id, drawId: draw.id, method: 'checkout', source: 'homeowner', state: 'started', amountCents: input.amountCents, keptCents: 0, reference: '', startedOn, settledOn: null } as const;
    await this.repository.insert(tx, job, payment, actor.personId, now);
    const attemptId = await this.attempts.insert(tx, { firmId, jobId, paymentId: input.id }, 1, now);
    await this.queue.enqueue(tx, 'open_checkout', { firmId, attemptId }, { key: `attempt:${attemptId}` });
    await this.record.append(tx, { firmId, jobId, act: 'payment.started', by: actor.personId, data: { payment: input.id, draw: draw.id, amountCents: input.amountCents } });
    const found = await this.repository.progress(tx, jobId, input.id, now);
    if (!found) throw new Error('The payment that was just stored is not there.');
    return found;
  }

  /** A second tab, or the other homeowner: the same payment goes on. */
  private async goOn(tx: Tx, job: JobToPay, before: { payment: Payment; url: string | null; stale: boolean }): Promise<PaymentProgress> {
    const { payment, url, stale } = before;
    if (payment.state === 'processing') throw new Problem('wrong_state', { detail: `${formatMoney(payment.amountCents)} is on its way already.` });
    if (stale) await this.queue.enqueue(tx, 'check_payment', { firmId: job.firmId, paymentId: payment.id }, { key: `check:${payment.id}` });
    return { payment: { ...payment, feeCents: null }, url };
  }

  private async checkCanTake(tx: Tx, jobId: string, cents: number): Promise<void> {
    if (!(await this.repository.takesPayments(tx, jobId))) {
      throw new Problem('wrong_state', { detail: 'Your builder does not take payments here yet. Pay by check or wire, or ask them to finish their set-up. Nothing was charged.' });
    }
    if (cents < LEAST_CENTS || cents > MOST_CENTS) {
      throw new Problem('wrong_state', { detail: `A payment here must lie between ${formatMoney(LEAST_CENTS)} and ${formatMoney(MOST_CENTS)}. Pay by check or wire. Nothing was charged.` });
    }
  }

  private async recordForDraw(tx: Tx, actor: Actor, jobId: string, drawId: string, input: RecordPayment): Promise<void> {
    const { job, draw } = await this.lock(tx, jobId, drawId);
    const openCents = openPart(draw, input.source);
    if (input.amountCents > openCents) throw Problem.field('/amountCents', `Must not be more than the open part of ${formatMoney(openCents)}.`);
    if (input.source === 'homeowner') await this.stopCheckout(tx, job, draw);
    await this.bookkeeper.receive(tx, job, draw, { ...input }, actor.personId);
  }

  /** What is paid by check must not be paid on an open page as well; what is on its way already can't be stopped. */
  private async stopCheckout(tx: Tx, job: JobToPay, draw: DrawToPay): Promise<void> {
    const before = await this.repository.underWay(tx, draw.id, this.clock.now());
    if (!before) return;
    const { payment } = before;
    if (payment.state === 'processing') throw new Problem('wrong_state', { detail: `${formatMoney(payment.amountCents)} is on its way by bank debit. Wait until it has settled or failed.` });
    await this.queue.enqueue(tx, 'close_checkout', { firmId: job.firmId, paymentId: payment.id }, { key: `close:${payment.id}` });
  }

  private async recordDeposit(tx: Tx, actor: Actor, jobId: string, input: RecordPayment): Promise<void> {
    const job = await this.lockJob(tx, jobId);
    const open = minus(job.depositCents, await this.repository.depositReceived(tx, jobId));
    if (input.amountCents > open) throw Problem.field('/amountCents', `Must not be more than the ${formatMoney(open)} open of the deposit.`);
    if (input.source !== 'homeowner') throw Problem.field('/source', 'The deposit is the homeowner\'s.');
    await this.bookkeeper.receiveDeposit(tx, job, { ...input }, actor.personId);
  }

  private async lockJob(tx: Tx, jobId: string): Promise<JobToPay> {
    const job = await this.repository.lockJob(tx, jobId);
    if (!job) throw new Problem('not_found');
    return job;
  }

  private async lock(tx: Tx, jobId: string, drawId: string): Promise<{ job: JobToPay; draw: DrawToPay }> {
    const job = await this.lockJob(tx, jobId);
    const draw = await this.repository.drawToPay(tx, jobId, drawId);
    if (!draw) throw new Problem('not_found');
    if (!mayDraw(draw.state, 'pay')) {
      const detail = draw.state === 'paid' ? `Draw ${draw.number} is paid in full.` : `Draw ${draw.number} is not approved.`;
      throw new Problem('wrong_state', { detail });
    }
    return { job, draw };
  }
}

/** What is still open of a draw from one source. */
function openPart(draw: DrawToPay, source: Source): number {
  return source === 'homeowner' ? minus(draw.homeownerCents, draw.keptHomeownerCents) : minus(draw.loanCents, draw.keptLoanCents);
}
