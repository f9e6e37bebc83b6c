import { Inject, Injectable } from '@nestjs/common';
import { atLeastZero, formatMoney, minus } from '@tallypole/shared/money';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { writtenBusinessDate } from '../common/written-date.ts';
import type { Source } from '../ledger/entry.ts';
import { NoticeRepository, type Notice } from '../notices/notice.repository.ts';
import type { RecordAnchor } from '../record/record.repository.ts';
import { ToTellRepository, type Told } from './to-tell.repository.ts';
import type { JobToPay } from './payments.repository.ts';

type Job = Pick<JobToPay, 'firmId' | 'jobId' | 'jobName' | 'firmName'>;

export interface ReceivedMoney {
  amountCents: number;
  source: Source;
  receivedOn: string;
  reference: string;
  /** "Draw 3" or "Deposit". */
  title: string;
  drawId: string | null;
  anchor: RecordAnchor;
  /** Of the draw: what the builder has now, and what is due in all. */
  paidCents: number | null;
  dueCents: number | null;
}

export interface TroubledPayment {
  amountCents: number;
  title: string;
  drawId: string;
  trouble: string;
}

const sourceNames: Readonly<Record<Source, string>> = { homeowner: 'the homeowner', loan: 'the loan' };

/** The mails about money. Receipts go to the homeowners and to the firm's office; each says why it comes. */
@Injectable()
export class PaymentMails {
  constructor(
    private readonly notices: NoticeRepository,
    private readonly toTell: ToTellRepository,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  async received(tx: Tx, job: Job, money: ReceivedMoney, told?: readonly Told[]): Promise<void> {
    const people = told ?? (await this.toTell.people(tx, job.jobId, ['homeowner', 'principal', 'books']));
    const open = money.dueCents === null || money.paidCents === null ? null : atLeastZero(minus(money.dueCents, money.paidCents));
    const data = {
      jobName: job.jobName,
      firmName: job.firmName,
      title: money.title,
      amount: formatMoney(money.amountCents),
      source: sourceNames[money.source],
      receivedOn: writtenBusinessDate(money.receivedOn),
      reference: money.reference,
      openLine: open === null ? '' : open === 0 ? `${money.title} is paid in full.` : `Still open of ${money.title}: ${formatMoney(open)}.`,
      recordSeq: money.anchor.seq,
      recordHash: money.anchor.hash,
      url: this.url(job.jobId, money.drawId),
    };
    await this.notices.postAll(tx, people.map((to) => this.notice(job, to.role === 'homeowner' ? 'payment-receipt' : 'payment-received', to, data)));
  }

  async failed(tx: Tx, job: Job, payment: TroubledPayment, told: readonly Told[]): Promise<void> {
    await this.notices.postAll(tx, told.map((to) => this.notice(job, to.role === 'homeowner' ? 'payment-failed' : 'payment-failed-office', to, this.troubleData(job, payment))));
  }

  async returned(tx: Tx, job: Job, payment: TroubledPayment, told: readonly Told[]): Promise<void> {
    await this.notices.postAll(tx, told.map((to) => this.notice(job, to.role === 'homeowner' ? 'payment-returned' : 'payment-returned-office', to, this.troubleData(job, payment))));
  }

  private troubleData(job: Job, { amountCents, title, drawId, trouble }: TroubledPayment) {
    return { jobName: job.jobName, firmName: job.firmName, title, amount: formatMoney(amountCents), trouble, url: this.url(job.jobId, drawId) };
  }

  private notice(job: Job, kind: Notice['kind'], to: Told, data: Notice['data']): Notice {
    return { firmId: job.firmId, jobId: job.jobId, kind, to: { personId: to.personId }, data };
  }

  private url(jobId: string, drawId: string | null): string {
    return `${this.configuration.PUBLIC_URL}/jobs/${jobId}/${drawId === null ? 'money' : `draws/${drawId}`}`;
  }
}
