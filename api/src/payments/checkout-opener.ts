import { Inject, Injectable } from '@nestjs/common';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Clock } from '../common/clock.ts';
import { UnitOfWork, type Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { AttemptsRepository, type Attempt } from './attempts.repository.ts';
import { PaymentSettlement } from './payment-settlement.ts';
import { StripeClient } from './stripe-client.ts';
import type { SessionFacts, SessionRequest } from './stripe-facts.ts';
import { StripeTrouble } from './stripe-trouble.ts';

/** How long a payment page stays open; counted from when the attempt was stored, so that a repeated call asks for exactly the same. */
const OPEN_HOURS = 20;
const BROKEN = 'stripe_error';

/**
 * Worker: opens the payment page of an attempt. Between any two of its steps the process may die: the attempt is marked before the first
 * call, and a call that was made before is looked for at Stripe before it is made again, with the same key.
 */
@Injectable()
export class CheckoutOpener {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AttemptsRepository,
    private readonly stripe: StripeClient,
    private readonly settlement: PaymentSettlement,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  async open(firmId: string, attemptId: string): Promise<void> {
    const attempt = await this.work.writeAsFirm(firmId, async (tx) => {
      const found = await this.repository.find(tx, attemptId);
      if (found?.state === 'waiting') await this.repository.markTried(tx, attemptId, this.clock.now());
      return found;
    });
    if (attempt?.state !== 'waiting' || attempt.paymentState !== 'started') return;
    if (!attempt.account) {
      await this.refuse(firmId, attempt, 'The builder has no account to be paid on.');
      return;
    }
    const session = await this.sessionOf(firmId, attempt, attempt.account);
    if (!session) return;
    await this.work.writeAsFirm(firmId, (tx) => this.repository.open(tx, attempt, session));
    if (session.status !== 'open') await this.settlement.check(firmId, attempt.paymentId);
  }

  /** Closes the page of a payment that came another way; when it was just paid, that is what is written. */
  async close(firmId: string, paymentId: string): Promise<void> {
    const page = await this.work.writeAsFirm(firmId, (tx) => this.repository.openPage(tx, paymentId));
    if (page) {
      try {
        await this.stripe.expireSession(page.account, page.sessionId);
      } catch (error) {
        // it was paid or has expired in the meantime: the check says which
        if (!(error instanceof StripeTrouble) || error.kind !== 'refused') throw error;
      }
    }
    await this.settlement.check(firmId, paymentId);
  }

  private async sessionOf(firmId: string, attempt: Attempt, account: string): Promise<SessionFacts | undefined> {
    if (attempt.triedAt) {
      const made = await this.stripe.findSession(account, attempt.id, attempt.triedAt);
      if (made) return made;
      // Stripe keeps its own error under the key for a day: this key can only ever answer with it
      if (attempt.trouble === BROKEN) {
        await this.work.writeAsFirm(firmId, (tx) => this.startOver(tx, firmId, attempt));
        return undefined;
      }
    }
    try {
      return await this.stripe.openSession(this.request(attempt, account));
    } catch (error) {
      if (!(error instanceof StripeTrouble)) throw error;
      if (error.kind === 'refused') {
        await this.refuse(firmId, attempt, 'The payment service refused to open a payment page.');
        return undefined;
      }
      await this.work.writeAsFirm(firmId, (tx) => this.repository.markTrouble(tx, attempt.id, error.kind === 'broken' ? BROKEN : error.kind));
      throw error;
    }
  }

  private async startOver(tx: Tx, firmId: string, attempt: Attempt): Promise<void> {
    if (!(await this.repository.end(tx, attempt.id, BROKEN))) return;
    const next = await this.repository.insert(tx, { firmId, jobId: attempt.jobId, paymentId: attempt.paymentId }, attempt.number + 1, this.clock.now());
    await this.queue.enqueue(tx, 'open_checkout', { firmId, attemptId: next }, { key: `attempt:${next}` });
  }

  private async refuse(firmId: string, attempt: Attempt, trouble: string): Promise<void> {
    await this.work.writeAsFirm(firmId, (tx) => this.repository.end(tx, attempt.id, trouble));
    await this.settlement.giveUp(firmId, attempt.paymentId, trouble);
  }

  private request(attempt: Attempt, account: string): SessionRequest {
    const draw = `${this.configuration.PUBLIC_URL}/jobs/${attempt.jobId}/draws/${attempt.drawId}`;
    return {
      account,
      key: attempt.key,
      amountCents: attempt.amountCents,
      title: `Draw ${attempt.drawNumber}, ${attempt.jobName}`,
      email: attempt.email,
      successUrl: `${draw}/payments/${attempt.paymentId}`,
      cancelUrl: draw,
      expiresAt: new Date(attempt.createdAt.getTime() + OPEN_HOURS * 3_600_000),
      ids: { payment_id: attempt.paymentId, attempt_id: attempt.id, job_id: attempt.jobId, draw_id: attempt.drawId },
    };
  }
}
