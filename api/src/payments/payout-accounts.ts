import { Inject, Injectable } from '@nestjs/common';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Clock } from '../common/clock.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { PayoutAccountsRepository, type PayoutAccount } from './payout-accounts.repository.ts';
import { StripeClient } from './stripe-client.ts';
import { StripeEventsRepository } from './stripe-events.repository.ts';
import type { AccountFacts } from './stripe-facts.ts';
import { StripeTrouble } from './stripe-trouble.ts';

/** Worker: the builder's own account at Stripe, made once, and how far it is. */
@Injectable()
export class PayoutAccounts {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: PayoutAccountsRepository,
    private readonly events: StripeEventsRepository,
    private readonly stripe: StripeClient,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** Makes the account where there is none, and a fresh page for the principal to enter the firm's details. */
  async open(firmId: string): Promise<void> {
    const row = await this.work.writeAsFirm(firmId, async (tx) => {
      const found = await this.repository.find(tx, firmId);
      if (found && !found.account) await this.repository.markTried(tx, firmId, this.clock.now());
      return found;
    });
    if (!row) return;
    const facts = row.account ? await this.stripe.account(row.account) : await this.make(row);
    await this.work.writeAsFirm(firmId, (tx) => this.repository.setFacts(tx, firmId, facts, this.clock.now()));
    const page = `${this.configuration.PUBLIC_URL}/payouts`;
    const link = await this.stripe.onboarding(facts.id, { refresh: `${page}?again=1`, return: page });
    await this.work.writeAsFirm(firmId, (tx) => this.repository.setLink(tx, firmId, link.url, link.expiresAt));
  }

  async refresh(firmId: string): Promise<void> {
    const row = await this.work.writeAsFirm(firmId, (tx) => this.repository.find(tx, firmId));
    if (!row?.account) return;
    const facts = await this.stripe.account(row.account);
    await this.work.writeAsFirm(firmId, (tx) => this.repository.setFacts(tx, firmId, facts, this.clock.now()));
  }

  /** Starts a round over all firms, each as a job of its own, so that one account's trouble is nobody else's. */
  async sweepAll(): Promise<void> {
    await this.work.write(undefined, async (tx) => {
      const firms = await this.repository.firms(tx);
      await this.queue.enqueueMany(tx, 'sweep_firm_payments', firms.map((firmId) => ({ key: `sweep:${firmId}`, payload: { firmId } })));
    });
  }

  /** Asks Stripe for the events since the last round: what no webhook brought is handled now. */
  async sweep(firmId: string): Promise<void> {
    const row = await this.work.writeAsFirm(firmId, (tx) => this.repository.find(tx, firmId));
    if (!row?.account) return;
    const until = this.clock.now();
    const news = await this.stripe.news(row.account, row.eventsUntil);
    await this.work.writeAsFirm(firmId, async (tx) => {
      for (const event of news) await this.events.storeSwept(tx, firmId, event, until);
      await this.events.remind(tx, firmId, until);
      await this.repository.sweptUntil(tx, firmId, until);
    });
  }

  private async make(row: PayoutAccount): Promise<AccountFacts> {
    if (row.triedAt) {
      const made = await this.stripe.findAccount(row.firmId, row.triedAt);
      if (made) return made;
    }
    try {
      return await this.stripe.createAccount({ id: row.firmId, name: row.firmName, email: row.email }, row.key);
    } catch (error) {
      if (error instanceof StripeTrouble && error.kind === 'broken') await this.work.writeAsFirm(row.firmId, (tx) => this.repository.newKey(tx, row.firmId));
      throw error;
    }
  }
}
