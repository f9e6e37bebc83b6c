import { Injectable } from '@nestjs/common';
import { Clock } from '../common/clock.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { PaymentSettlement, type Hint } from './payment-settlement.ts';
import { PayoutAccounts } from './payout-accounts.ts';
import { StripeClient } from './stripe-client.ts';
import { StripeEventsRepository, type StoredEvent } from './stripe-events.repository.ts';

/** Worker: handles stored events. What an event says is only where to look: the object itself is read again. */
@Injectable()
export class StripeEventsService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: StripeEventsRepository,
    private readonly settlement: PaymentSettlement,
    private readonly accounts: PayoutAccounts,
    private readonly stripe: StripeClient,
    private readonly clock: Clock,
  ) {}

  async handle(firmId: string, account: string, eventId: string): Promise<void> {
    const found = await this.work.writeAsFirm(firmId, async (tx) => {
      const event = await this.repository.find(tx, account, eventId);
      return event && { event, paymentId: await this.repository.paymentOf(tx, event) };
    });
    if (!found || found.event.handledAt) return;
    await this.act(firmId, found.event, found.paymentId);
    await this.work.writeAsFirm(firmId, (tx) => this.repository.markHandled(tx, account, eventId, this.clock.now()));
  }

  private async act(firmId: string, event: StoredEvent, known: string | undefined): Promise<void> {
    if (event.type.startsWith('account.')) {
      await this.accounts.refresh(firmId);
      return;
    }
    const hint: Hint = event.type.startsWith('checkout.session.') ? { sessionId: event.objectId } : { intentId: event.paymentIntent };
    const paymentId = known ?? (await this.ownPayment(firmId, event, hint));
    // an account can also take payments that have nothing to do with us
    if (paymentId) await this.settlement.check(firmId, paymentId, hint);
  }

  /** An event may come before we have stored the answer that it is about: then our id in the object's metadata tells. */
  private async ownPayment(firmId: string, { account }: StoredEvent, { sessionId, intentId }: Hint): Promise<string | undefined> {
    const named = sessionId ? (await this.stripe.session(account, sessionId)).paymentId : intentId ? (await this.stripe.payment(account, intentId)).paymentId : null;
    if (!named || !/^[0-9a-f-]{36}$/i.test(named)) return undefined;
    return (await this.work.writeAsFirm(firmId, (tx) => this.repository.paymentExists(tx, named))) ? named : undefined;
  }
}
