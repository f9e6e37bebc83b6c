import { Inject, Injectable } from '@nestjs/common';
import { formatChange, formatMoney, sum } from '@tallypole/shared/money';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { writtenBusinessDate, writtenNearDate } from '../common/written-date.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { changeName, effectOf, nextDrawOf, type ChangeFacts } from './change-facts.ts';
import { fundingWords, nextDrawName } from './words.ts';

/** What a change came to, in a few words. */
export type Outcome = 'declined' | 'lapsed' | 'withdrawn';
const OUTCOMES: Readonly<Record<Outcome, string>> = { declined: 'was declined', lapsed: 'has lapsed', withdrawn: 'was withdrawn' };

type ChangeNotice = 'change-to-review' | 'change-issued' | 'change-partly-signed' | 'change-approved' | 'change-closed';

/** Who hears of a change: homeowners when they are asked, the firm when they answered, everybody when it is signed. */
@Injectable()
export class ChangeMails {
  constructor(
    private readonly notices: NoticeRepository,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** To the designers, who see no price. */
  async toReview(tx: Tx, facts: ChangeFacts, designers: readonly string[]): Promise<void> {
    const { price: _price, ...data } = this.basics(facts);
    for (const personId of designers) await this.post(tx, facts, 'change-to-review', personId, { ...data, reason: facts.change.reason });
  }

  /** To each homeowner who hasn't signed: decide by then. */
  async issued(tx: Tx, facts: ChangeFacts, today: string): Promise<void> {
    const { effect } = effectOf(facts);
    const next = nextDrawOf(facts, today);
    const { before, after } = effect;
    const data = {
      ...this.basics(facts),
      reason: facts.change.reason,
      decideBy: writtenBusinessDate(facts.change.goodUntil, true),
      decideSoon: writtenNearDate(facts.change.goodUntil, today),
      contractBefore: formatMoney(before.contractSumCents),
      contractAfter: formatMoney(after.contractSumCents),
      dateBefore: writtenBusinessDate(before.completionDate),
      dateAfter: writtenBusinessDate(after.completionDate),
      ...(next ? { nextDrawName: nextDrawName(facts.change), nextBefore: formatMoney(next.before.dueNowCents), nextAfter: formatMoney(next.after.dueNowCents) } : { nextDrawName: '' }),
      funding: fundingWords[effect.funding],
      structural: facts.change.structural,
    };
    for (const signer of facts.signers.filter(({ signedAt }) => signedAt === null)) await this.post(tx, facts, 'change-issued', signer.personId, data);
  }

  /** One of several has signed: the firm and the others hear of it. */
  async partlySigned(tx: Tx, facts: ChangeFacts, signer: { personId: string; name: string }): Promise<void> {
    const missing = facts.signers.filter(({ personId, signedAt }) => signedAt === null && personId !== signer.personId);
    const data = { ...this.basics(facts), signerName: signer.name, missing: missing.map(({ name }) => name).join(', ') };
    for (const personId of [facts.change.createdBy, ...missing.map((other) => other.personId)]) await this.post(tx, facts, 'change-partly-signed', personId, data, signer.personId);
  }

  /** To everybody on the job whom it concerns, with the signed paper. */
  async approved(tx: Tx, facts: ChangeFacts, lenders: readonly string[], documentId: string, sha256: string): Promise<void> {
    const { job } = facts;
    const data = { ...this.basics(facts), contractSum: formatMoney(sum([job.contractSumCents, job.changesApprovedCents])), signedBy: facts.signers.flatMap(({ typedName }) => typedName ?? []).join(' and '), sha256, documentId };
    const people = new Set([facts.change.createdBy, ...facts.signers.map(({ personId }) => personId), ...lenders]);
    for (const personId of people) await this.post(tx, facts, 'change-approved', personId, data);
  }

  async closed(tx: Tx, facts: ChangeFacts, outcome: Outcome, reason: string, butPersonId: string): Promise<void> {
    const data = { ...this.basics(facts), outcome: OUTCOMES[outcome], closedReason: reason };
    const people = new Set([facts.change.createdBy, ...facts.signers.map(({ personId }) => personId)]);
    for (const personId of people) if (personId !== butPersonId) await this.post(tx, facts, 'change-closed', personId, data, butPersonId);
  }

  private basics({ job, change }: ChangeFacts) {
    const days = change.days === 0 ? 'no more days' : change.days === 1 ? '1 more day' : `${change.days} more days`;
    return { changeName: changeName(change), title: change.title, jobName: job.name, firmName: job.firmName, price: formatChange(change.chargedCents), days, url: `${this.configuration.PUBLIC_URL}/jobs/${job.id}/changes/${change.id}` };
  }

  /** An answer to the mail goes to a person: to who priced the change, and from there to the homeowner who acted. */
  private async post(tx: Tx, { job, change, author, signers }: ChangeFacts, kind: ChangeNotice, personId: string, data: Record<string, string | boolean>, actorId?: string): Promise<void> {
    const reply = personId === change.createdBy ? signers.find((signer) => signer.personId === actorId) : author;
    const replyTo: Record<string, string> = reply ? { replyToName: reply.name, replyToEmail: reply.email } : {};
    await this.notices.post(tx, { firmId: job.firmId, jobId: job.id, kind, to: { personId }, data: { ...data, ...replyTo } });
  }
}
