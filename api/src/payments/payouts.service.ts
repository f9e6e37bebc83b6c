import { Injectable } from '@nestjs/common';
import type { Payouts } from '@tallypole/shared/schemas/payouts';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { PayoutAccountsRepository } from './payout-accounts.repository.ts';

/** How the firm gets paid: its own account at Stripe, which the principal sets up there. */
@Injectable()
export class PayoutsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: PayoutAccountsRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  /** Asks for the account and for a page to enter the firm's details; both are made by the worker. */
  setUp(actor: Actor, firmId: string, key: string): Promise<Answered<Payouts>> {
    return this.commands.run<Payouts>(actor, {
      operation: 'payouts.set_up',
      key,
      input: { firmId },
      authorize: (tx) => requireInFirm(tx, 'payout.setup', firmId),
      act: async (tx) => {
        await this.repository.ask(tx, firmId, this.clock.now());
        await this.queue.enqueue(tx, 'open_payout_account', { firmId }, { key: `payouts:${firmId}` });
        return await this.find(tx, firmId);
      },
    });
  }

  payouts(actor: Actor, firmId: string): Promise<Payouts> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'payout.setup', firmId);
      return await this.find(tx, firmId);
    });
  }

  private async find(tx: Tx, firmId: string): Promise<Payouts> {
    const row = await this.repository.find(tx, firmId);
    if (!row) return { state: 'none', chargesEnabled: false, payoutsEnabled: false, linkUrl: null, trouble: null };
    const { account, chargesEnabled, payoutsEnabled, linkUrl, linkExpiresAt, trouble } = row;
    const good = linkExpiresAt !== null && linkExpiresAt > this.clock.now();
    const state = chargesEnabled ? 'ready' : account === null ? 'opening' : 'incomplete';
    return { state, chargesEnabled, payoutsEnabled, linkUrl: good ? linkUrl : null, trouble: trouble === null ? null : 'The payment service is not answering. We keep trying.' };
  }
}
