import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import { formatChange, formatMoney, sum } from '@tallypole/shared/money';
import { mayChange, type ChangeAct } from '@tallypole/shared/schemas/change-states';
import type { AskReview, AttachReview, Change, IssueChange, SignChange } from '@tallypole/shared/schemas/changes';
import { Presence } from '../auth/presence.ts';
import { Clock } from '../common/clock.ts';
import type { Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import type { Actor, Tx } from '../common/unit-of-work.ts';
import { writtenBusinessDate } from '../common/written-date.ts';
import { DocumentsRepository } from '../documents/documents.repository.ts';
import { FilesRepository } from '../files/files.repository.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { agreedIn, effectOf, type AgreedEffect, type ChangeFacts } from './change-facts.ts';
import { ChangeMails } from './change-mails.ts';
import { ChangeReissue } from './change-reissue.ts';
import { ChangesRepository } from './changes.repository.ts';
import { ChangesService } from './changes.service.ts';
import { endOfDay } from './end-of-day.ts';
import { SigningRepository, type Browser } from './signing.repository.ts';

/** From review to signature: what moves a change outside the firm. */
@Injectable()
export class ChangeActsService {
  constructor(
    private readonly changes: ChangesService,
    private readonly repository: ChangesRepository,
    private readonly signing: SigningRepository,
    private readonly reissue: ChangeReissue,
    private readonly files: FilesRepository,
    private readonly documents: DocumentsRepository,
    private readonly presence: Presence,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly mails: ChangeMails,
    private readonly clock: Clock,
  ) {}

  /** Asks the job's designers to look at it; from then on they see it, without its price. */
  askReview(actor: Actor, jobId: string, changeId: string, { version }: AskReview, key: string): Promise<Answered<Change>> {
    return this.changes.run(actor, jobId, { operation: 'change.ask_review', key, input: { changeId, version }, permission: 'change.price' }, async (tx) => {
      const facts = await this.ready(tx, jobId, changeId, 'ask_review');
      const { change, job } = facts;
      if (change.version !== version) throw new Problem('stale', { version: change.version });
      const designers = await this.repository.designers(tx, jobId);
      if (designers.length === 0) throw new Problem('rule_broken', { detail: 'No designer is on this job yet: invite one first, or attach the review yourself.' });
      await this.repository.setState(tx, changeId, 'in_review');
      await this.mails.toReview(tx, facts, designers);
      await this.record.append(tx, { firmId: job.firmId, jobId, chain: 'firm', act: 'change.review_asked', by: actor.personId, data: { change: changeId, number: change.number, designers } });
      return changeId;
    });
  }

  review(actor: Actor, jobId: string, changeId: string, review: AttachReview, key: string): Promise<Answered<Change>> {
    return this.changes.run(actor, jobId, { operation: 'change.review', key, input: { changeId, ...review }, permission: 'change.review' }, async (tx) => {
      const { change, job } = await this.ready(tx, jobId, changeId, 'review');
      const file = await this.files.find(tx, jobId, review.fileId);
      // a file that only the firm may open would be a review that the homeowner can't read
      if (file?.purpose !== 'review') throw Problem.field('/fileId', 'Attach the file of the review first.');
      if (review.reviewedOn > this.clock.today(job.timeZone)) throw Problem.field('/reviewedOn', 'The review must have happened already.');
      await this.repository.addReview(tx, { firmId: job.firmId, jobId, changeId }, review, this.clock.now());
      const data = { change: changeId, number: change.number, kind: review.kind, file: review.fileId, sha256: file.sha256, reviewedOn: review.reviewedOn };
      await this.record.append(tx, { firmId: job.firmId, jobId, act: 'change.reviewed', by: actor.personId, data });
      return changeId;
    });
  }

  /** Sends a change out: refused without its review where it is structural. The worker makes the paper and then mails it. */
  issue(actor: Actor, jobId: string, changeId: string, { version }: IssueChange, key: string): Promise<Answered<Change>> {
    return this.changes.run(actor, jobId, { operation: 'change.issue', key, input: { changeId, version }, permission: 'change.issue' }, async (tx) => {
      const facts = await this.ready(tx, jobId, changeId, 'issue');
      const { change, job } = facts;
      if (change.version !== version) throw new Problem('stale', { version: change.version });
      await this.checkIssuable(tx, facts);
      const now = this.clock.now();
      await this.repository.issue(tx, changeId, now);
      await this.signing.supersede(tx, jobId, change.number, changeId, now);
      await this.queue.enqueue(tx, 'render_change', { firmId: job.firmId, jobId, changeId }, { key: `render_change:${changeId}` });
      await this.queue.enqueue(tx, 'lapse_change', { firmId: job.firmId, jobId, changeId }, { key: `lapse_change:${changeId}`, runAt: endOfDay(change.goodUntil, job.timeZone) });
      const data = { change: changeId, number: change.number, revision: change.revision, chargedCents: change.chargedCents, days: change.days, structural: change.structural };
      await this.record.append(tx, { firmId: job.firmId, jobId, act: 'change.issued', by: actor.personId, data });
      return changeId;
    });
  }

  sign(actor: Actor, jobId: string, changeId: string, signature: SignChange, browser: Browser, key: string): Promise<Answered<Change>> {
    return this.changes.run(actor, jobId, { operation: 'change.sign', key, input: { changeId, ...signature }, permission: 'change.decide' }, async (tx) => {
      await this.presence.require(tx, actor);
      const facts = await this.changes.locked(tx, jobId, changeId);
      this.checkSignable(facts, actor);
      await this.checkShown(tx, facts, signature);
      const { job, change, signers } = facts;
      const of = { firmId: job.firmId, jobId, changeId };
      const now = this.clock.now();
      await this.signing.sign(tx, of, signature, browser, now);
      const missing = signers.filter(({ personId, signedAt }) => signedAt === null && personId !== actor.personId);
      const last = job.homeownersSign === 'one' || missing.length === 0;
      if (last) await this.approve(tx, facts, now);
      else {
        await this.repository.setState(tx, changeId, 'partly_signed');
        await this.mails.partlySigned(tx, facts, { personId: actor.personId, name: signature.typedName });
      }
      const data = { change: changeId, number: change.number, revision: change.revision, effectHash: signature.effectHash, documentSha256: signature.documentSha256, consentVersion: signature.consentVersion, last };
      await this.record.append(tx, { ...of, act: 'change.signed', by: actor.personId, data });
      return changeId;
    });
  }

  decline(actor: Actor, jobId: string, changeId: string, reason: string, key: string): Promise<Answered<Change>> {
    return this.close(actor, jobId, changeId, { act: 'decline', outcome: 'declined', permission: 'change.decide' }, reason, key);
  }

  withdraw(actor: Actor, jobId: string, changeId: string, reason: string, key: string): Promise<Answered<Change>> {
    return this.close(actor, jobId, changeId, { act: 'withdraw', outcome: 'withdrawn', permission: 'change.issue' }, reason, key);
  }

  private close(
    actor: Actor,
    jobId: string,
    changeId: string,
    way: { act: 'decline' | 'withdraw'; outcome: 'declined' | 'withdrawn'; permission: 'change.decide' | 'change.issue' },
    reason: string,
    key: string,
  ): Promise<Answered<Change>> {
    return this.changes.run(actor, jobId, { operation: `change.${way.act}`, key, input: { changeId, reason }, permission: way.permission }, async (tx) => {
      const facts = await this.ready(tx, jobId, changeId, way.act);
      await this.repository.close(tx, changeId, way.outcome, reason, this.clock.now());
      await this.mails.closed(tx, facts, way.outcome, reason, actor.personId);
      const { job, change } = facts;
      await this.record.append(tx, { firmId: job.firmId, jobId, act: `change.${way.outcome}`, by: actor.personId, data: { change: changeId, number: change.number, revision: change.revision } });
      return changeId;
    });
  }

  private async ready(tx: Tx, jobId: string, changeId: string, act: ChangeAct): Promise<ChangeFacts> {
    const facts = await this.changes.locked(tx, jobId, changeId);
    if (!mayChange(facts.change.state, act)) throw new Problem('wrong_state', { detail: `This change is ${facts.change.state.replace('_', ' ')}.` });
    return facts;
  }

  private async checkIssuable(tx: Tx, facts: ChangeFacts): Promise<void> {
    const { change, job, lines, reviews, signers } = facts;
    if (change.structural && !reviews.some(({ current }) => current)) {
      throw new Problem('review_missing', reviews.length === 0 ? {} : { detail: 'What is built was altered after the review. Attach one for what it is now.' });
    }
    checkBilled(facts);
    if (lines.length === 0 && change.days === 0) throw Problem.field('/lines', 'Enter at least one line, or days.');
    if (change.goodUntil <= this.clock.today(job.timeZone)) throw Problem.field('/goodUntil', 'The price must hold until a day to come.');
    if (signers.length === 0) throw new Problem('rule_broken', { detail: 'Nobody can sign yet: invite the homeowners first.' });
    if (change.milestoneId && (await this.repository.milestoneState(tx, job.id, change.milestoneId)) === 'proven') {
      throw Problem.field('/milestoneId', 'This milestone is proven already. Choose one whose work is still to come.');
    }
  }

  private checkSignable(facts: ChangeFacts, actor: Actor): void {
    const { change, job, document, signers, supersededBy } = facts;
    if (supersededBy) {
      throw new Problem('effect_changed', { detail: `Revision ${supersededBy.revision} has taken its place: ${formatChange(supersededBy.chargedCents)} instead of ${formatChange(change.chargedCents)}.` });
    }
    if (signers.some(({ personId, signedAt }) => personId === actor.personId && signedAt !== null)) throw new Problem('wrong_state', { detail: 'You have signed this change already.' });
    if (!mayChange(change.state, 'sign_last')) throw new Problem('wrong_state', { detail: `This change is ${change.state.replace('_', ' ')}.` });
    if (this.clock.today(job.timeZone) > change.goodUntil) throw new Problem('wrong_state', { detail: 'The price held until a day that is over. Ask for it again.' });
    if (!document) throw new Problem('wrong_state', { detail: 'The paper is still being made. Try again in a moment.' });
    checkBilled(facts);
  }

  /** What was shown is what is signed; where it isn't, both versions are named. */
  private async checkShown(tx: Tx, facts: ChangeFacts, signature: SignChange): Promise<void> {
    const { change, document } = facts;
    const { effect, hash } = effectOf(facts);
    if (signature.effectHash === hash && change.effectHash === hash && signature.documentSha256 === document?.sha256) return;
    const shown = agreedIn((await this.documents.effectShown(tx, change.id, signature.documentSha256)) ?? null);
    const was = shown ? `You were shown ${inWords(shown)}. ` : '';
    throw new Problem('effect_changed', { detail: `What signing does has changed since you opened it. ${was}It is now ${inWords(effect)}. Look at it again before you decide.` });
  }

  /** The last signature: the contract moves, the change becomes lines, others that are out are asked for again, and the papers are joined. */
  private async approve(tx: Tx, { job, change, lines }: ChangeFacts, now: Date): Promise<void> {
    const of = { firmId: job.firmId, jobId: job.id, changeId: change.id };
    await this.signing.moveContract(tx, job.id, sum([job.changesApprovedCents, change.chargedCents]), job.daysApproved + change.days);
    const numbered = lines.filter(({ cents }) => cents !== 0).map(({ description, cents }, i) => ({ id: v7(), number: `C${change.number}${change.revision}-${i + 1}`, description, cents }));
    await this.signing.addScheduleLines(tx, of, numbered, now);
    await this.signing.approve(tx, change.id, now);
    await this.reissue.askAgain(tx, of, change.id);
    await this.queue.enqueue(tx, 'join_change', { firmId: job.firmId, jobId: job.id, changeId: change.id }, { key: `join_change:${change.id}` });
  }
}

/** Nothing is billed past the contract sum, so it can't be taken below what is billed already. */
function checkBilled(facts: ChangeFacts): void {
  const { after } = effectOf(facts).effect;
  const { billedToDateCents } = facts.job;
  if (after.contractSumCents < billedToDateCents) {
    throw new Problem('rule_broken', { detail: `The contract sum would be ${formatMoney(after.contractSumCents)}, but ${formatMoney(billedToDateCents)} is billed already.` });
  }
}

const inWords = ({ change, after }: AgreedEffect): string =>
  `${formatChange(change.chargedCents)} and ${change.days === 1 ? '1 day' : `${change.days} days`}, with a contract sum of ${formatMoney(after.contractSumCents)} and completion by ${writtenBusinessDate(after.completionDate)}`;
