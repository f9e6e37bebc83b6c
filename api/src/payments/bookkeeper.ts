import { Injectable } from '@nestjs/common';
import { sum } from '@tallypole/shared/money';
import { drawStateByMoney } from '@tallypole/shared/schemas/draw-states';
import type { Payment } from '@tallypole/shared/schemas/payments';
import { Clock } from '../common/clock.ts';
import type { Tx } from '../common/unit-of-work.ts';
import type { Source } from '../ledger/entry.ts';
import { LedgerRepository } from '../ledger/ledger.repository.ts';
import { RecordRepository, type RecordAnchor } from '../record/record.repository.ts';
import { bankReceived, depositReceived } from './payment-entries.ts';
import { PaymentMails } from './payment-mails.ts';
import { PaymentsRepository, type DrawToPay, type JobToPay, type NewPayment } from './payments.repository.ts';

export interface BankPayment {
  id: string;
  method: Extract<Payment['method'], 'check' | 'wire' | 'loan_advance'>;
  source: Source;
  amountCents: number;
  receivedOn: string;
  reference: string;
}

/** Money that came by the bank: payment, ledger, draw and receipt in one transaction of the act that tells of it. */
@Injectable()
export class Bookkeeper {
  constructor(
    private readonly repository: PaymentsRepository,
    private readonly ledger: LedgerRepository,
    private readonly record: RecordRepository,
    private readonly mails: PaymentMails,
    private readonly clock: Clock,
  ) {}

  async receive(tx: Tx, job: JobToPay, draw: DrawToPay, paid: BankPayment, by: string): Promise<void> {
    await this.repository.insert(tx, job, { ...newPayment(paid), drawId: draw.id, state: 'settled', keptCents: paid.amountCents, settledOn: paid.receivedOn }, by, this.clock.now());
    await this.bookReceived(tx, job, draw, paid, by);
  }

  /** Sent by way of somebody else: it counts when the builder has it. */
  async announce(tx: Tx, job: JobToPay, draw: DrawToPay, paid: BankPayment, by: string): Promise<void> {
    await this.repository.insert(tx, job, { ...newPayment(paid), drawId: draw.id, state: 'processing', keptCents: 0, settledOn: null }, by, this.clock.now());
  }

  async bookReceived(tx: Tx, job: JobToPay, draw: DrawToPay, paid: Omit<BankPayment, 'method'>, by: string): Promise<void> {
    const title = `Draw ${draw.number}`;
    await this.ledger.post(tx, job.firmId, job.jobId, bankReceived({ id: paid.id, title, onDate: paid.receivedOn }, paid.source, paid.amountCents));
    const kept = sum([draw.keptHomeownerCents, draw.keptLoanCents, paid.amountCents]);
    await this.repository.setDrawState(tx, draw.id, drawStateByMoney(draw.dueCents, kept));
    const data = { payment: paid.id, draw: draw.id, amountCents: paid.amountCents, source: paid.source, receivedOn: paid.receivedOn, reference: paid.reference };
    const anchor = await this.record.append(tx, { firmId: job.firmId, jobId: job.jobId, act: 'payment.received', by, data });
    await this.mails.received(tx, job, { ...paid, title, drawId: draw.id, anchor, paidCents: kept, dueCents: draw.dueCents });
  }

  async receiveDeposit(tx: Tx, job: JobToPay, paid: BankPayment, by: string): Promise<void> {
    await this.repository.insert(tx, job, { ...newPayment(paid), drawId: null, state: 'settled', keptCents: paid.amountCents, settledOn: paid.receivedOn }, by, this.clock.now());
    await this.ledger.post(tx, job.firmId, job.jobId, depositReceived({ id: paid.id, title: 'Deposit', onDate: paid.receivedOn }, paid.amountCents));
    const data = { payment: paid.id, amountCents: paid.amountCents, receivedOn: paid.receivedOn, reference: paid.reference };
    const anchor: RecordAnchor = await this.record.append(tx, { firmId: job.firmId, jobId: job.jobId, act: 'deposit.received', by, data });
    await this.mails.received(tx, job, { ...paid, title: 'Deposit', drawId: null, anchor, paidCents: null, dueCents: null });
  }
}

const newPayment = (paid: BankPayment): Pick<NewPayment, 'id' | 'method' | 'source' | 'amountCents' | 'reference' | 'startedOn'> => ({
  id: paid.id,
  method: paid.method,
  source: paid.source,
  amountCents: paid.amountCents,
  reference: paid.reference,
  startedOn: paid.receivedOn,
});
