import { Injectable } from '@nestjs/common';
import { atLeastZero, minus, sum } from '@tallypole/shared/money';
import { drawStateByMoney } from '@tallypole/shared/schemas/draw-states';
import { Clock } from '../common/clock.ts';
import { UnitOfWork, type Tx } from '../common/unit-of-work.ts';
import type { LedgerEntry } from '../ledger/entry.ts';
import { LedgerRepository } from '../ledger/ledger.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { checkoutSettled, disputed, disputeWon, failedRefundId, feeKnown, refunded, refundFailed, returned, returnedId, wonDisputeId } from './payment-entries.ts';
import { PaymentMails } from './payment-mails.ts';
import { movesFor, type Held, type Move } from './settlement.ts';
import { SettlementRepository, type PaymentToSettle } from './settlement.repository.ts';
import { StripeClient } from './stripe-client.ts';
import type { PaymentFacts, SessionFacts } from './stripe-facts.ts';

/** Ids of Stripe's objects that an event named, where our row doesn't know them yet. */
export interface Hint {
  sessionId?: string | null;
  intentId?: string | null;
}

/**
 * Worker: asks Stripe how a payment stands and writes what is missing on our side, each thing once. It is what every event, every sweep
 * and every doubt comes down to.
 */
@Injectable()
export class PaymentSettlement {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: SettlementRepository,
    private readonly stripe: StripeClient,
    private readonly ledger: LedgerRepository,
    private readonly record: RecordRepository,
    private readonly mails: PaymentMails,
    private readonly clock: Clock,
  ) {}

  async check(firmId: string, paymentId: string, hint: Hint = {}): Promise<void> {
    const at = await this.work.writeAsFirm(firmId, (tx) => this.repository.address(tx, paymentId));
    if (!at?.account) return;
    const sessionId = at.sessionId ?? hint.sessionId ?? null;
    const session = sessionId === null ? null : await this.stripe.session(at.account, sessionId);
    const intentId = session?.intentId ?? at.intentId ?? hint.intentId ?? null;
    const facts = intentId === null ? null : await this.stripe.payment(at.account, intentId);
    await this.write(firmId, paymentId, session, facts);
  }

  /** A page that could not be opened: the payment is over before it began. */
  async giveUp(firmId: string, paymentId: string, trouble: string): Promise<void> {
    await this.work.writeAsFirm(firmId, async (tx, by) => {
      await this.repository.lockJobOf(tx, paymentId);
      const payment = await this.repository.toSettle(tx, paymentId, []);
      if (payment?.state === 'started') await this.apply(tx, payment, [{ book: 'nothing', step: 'fail', state: 'failed', keptCents: 0, trouble }], null, by);
    });
  }

  private async write(firmId: string, paymentId: string, session: SessionFacts | null, facts: PaymentFacts | null): Promise<void> {
    await this.work.writeAsFirm(firmId, async (tx, by) => {
      await this.repository.lockJobOf(tx, paymentId);
      const payment = await this.repository.toSettle(tx, paymentId, causesOf(facts));
      if (!payment) return;
      const held: Held = payment;
      const moves = movesFor(held, session, facts);
      if (moves.length > 0) await this.apply(tx, payment, moves, facts, by);
      else await this.repository.touch(tx, paymentId, facts?.intentId ?? null, this.clock.now());
    });
  }

  private async apply(tx: Tx, payment: PaymentToSettle, moves: readonly Move[], facts: PaymentFacts | null, by: string): Promise<void> {
    const last = moves.at(-1);
    if (!last) return;
    const today = this.clock.today(payment.timeZone);
    for (const move of moves) {
      const entry = entryOf(payment, move, today);
      if (entry) await this.ledger.post(tx, payment.firmId, payment.jobId, entry);
    }
    const settles = moves.some(({ step }) => step === 'settle');
    const feeCents = moves.map((move) => (move.book === 'payment' || move.book === 'fee' ? move.feeCents : null)).find((fee) => fee !== null) ?? null;
    const kept = sum([minus(payment.keptHomeownerCents, payment.keptCents), last.keptCents, payment.keptLoanCents]);
    const drawState = drawStateByMoney(payment.dueCents, kept);
    const news = { state: last.state, keptCents: last.keptCents, feeCents, settledOn: settles ? today : null, trouble: last.trouble, intentId: facts?.intentId ?? null };
    await this.repository.write(tx, payment, news, drawState, this.clock.now());
    await this.tell(tx, payment, moves, { kept, today, by });
    await this.repository.settleConstraints(tx);
  }

  private async tell(tx: Tx, payment: PaymentToSettle, moves: readonly Move[], now: { kept: number; today: string; by: string }): Promise<void> {
    const { firmId, jobId, amountCents, drawId, told } = payment;
    const title = `Draw ${payment.drawNumber}`;
    for (const { step, state, keptCents, trouble, book } of moves) {
      if (step === null && book !== 'refund') continue;
      const data = { payment: payment.id, draw: drawId, amountCents, state, keptCents };
      const anchor = await this.record.append(tx, { firmId, jobId, act: `payment.${step ?? 'refund_part'}`, by: now.by, data });
      const troubled = { amountCents, title, drawId, trouble: trouble ?? '' };
      if (step === 'settle') {
        const money = { amountCents, source: 'homeowner', receivedOn: now.today, reference: 'bank debit', title, drawId, anchor, paidCents: now.kept, dueCents: payment.dueCents } as const;
        await this.mails.received(tx, payment, money, told);
      } else if (step === 'fail') await this.mails.failed(tx, payment, troubled, told);
      else if (step === 'return') await this.mails.returned(tx, payment, troubled, told);
    }
  }
}

/** What could be booked of this payment, to be looked up in the ledger at once. */
function causesOf(facts: PaymentFacts | null): string[] {
  if (!facts) return [];
  return [
    ...facts.refunds.flatMap(({ id }) => [id, failedRefundId(id)]),
    ...facts.disputes.flatMap(({ id }) => [id, wonDisputeId(id), returnedId(id)]),
  ];
}

function entryOf(payment: PaymentToSettle, move: Move, onDate: string): LedgerEntry | undefined {
  const paid = { id: payment.id, title: `Draw ${payment.drawNumber}`, onDate };
  const owed = atLeastZero(minus(payment.homeownerCents, payment.keptHomeownerCents));
  switch (move.book) {
    case 'nothing':
      return undefined;
    case 'payment':
      return checkoutSettled(paid, payment.amountCents, owed, move.feeCents);
    case 'fee':
      return feeKnown(paid, move.feeCents);
    case 'refund':
      return refunded(paid, move.id, move.amountCents, atLeastZero(minus(payment.keptHomeownerCents, payment.homeownerCents)));
    case 'failed_refund':
      return refundFailed(paid, move.id, move.amountCents);
    case 'dispute':
      return disputed(paid, move.id, move.amountCents, move.feeCents);
    case 'won':
      return disputeWon(paid, move.id, move.amountCents);
    case 'return':
      return returned(paid, move.id, move.amountCents);
  }
}
