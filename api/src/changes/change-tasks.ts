import type { INestApplicationContext } from '@nestjs/common';
import { Readable } from 'node:stream';
import { createHash } from 'node:crypto';
import { buffer } from 'node:stream/consumers';
import type { TaskList } from 'graphile-worker';
import { v7 } from 'uuid';
import { z } from 'zod';
import { mayChange } from '@tallypole/shared/schemas/change-states';
import { Clock } from '../common/clock.ts';
import { UnitOfWork, type Tx } from '../common/unit-of-work.ts';
import { DocumentsRepository } from '../documents/documents.repository.ts';
import { LetterheadRepository } from '../documents/letterhead.repository.ts';
import { joinPapers, renderPaper } from '../documents/pdf.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { newStorageKey } from '../files/storage-key.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { changeName, effectOf, type ChangeFacts } from './change-facts.ts';
import { ChangeFactsRepository } from './change-facts.repository.ts';
import { ChangeMails } from './change-mails.ts';
import { changePaper, signaturePaper } from './change-paper.ts';
import { ChangePapersRepository } from './change-papers.repository.ts';
import { ChangesRepository } from './changes.repository.ts';
import { costOf } from './pricing-draft.ts';

const ChangeJob = z.object({ firmId: z.uuid(), jobId: z.uuid(), changeId: z.uuid() });
type ChangeJob = z.infer<typeof ChangeJob>;

export function changeTasks(app: INestApplicationContext): TaskList {
  const papers = new ChangePapers(app);
  return {
    render_change: (payload) => papers.render(ChangeJob.parse(payload)),
    join_change: (payload) => papers.join(ChangeJob.parse(payload)),
    lapse_change: (payload) => papers.lapse(ChangeJob.parse(payload)),
  };
}

/** The papers of a change, made outside of any transaction and then noted in one. Each may run twice: what is there already stays. */
class ChangePapers {
  private readonly work: UnitOfWork;
  private readonly storage: FileStorage;
  private readonly facts: ChangeFactsRepository;
  private readonly repository: ChangesRepository;
  private readonly papers: ChangePapersRepository;
  private readonly documents: DocumentsRepository;
  private readonly letterheads: LetterheadRepository;
  private readonly mails: ChangeMails;
  private readonly record: RecordRepository;
  private readonly clock: Clock;

  constructor(app: INestApplicationContext) {
    this.work = app.get(UnitOfWork);
    this.storage = app.get<FileStorage>(FILE_STORAGE);
    this.facts = app.get(ChangeFactsRepository);
    this.repository = app.get(ChangesRepository);
    this.papers = app.get(ChangePapersRepository);
    this.documents = app.get(DocumentsRepository);
    this.letterheads = app.get(LetterheadRepository);
    this.mails = app.get(ChangeMails);
    this.record = app.get(RecordRepository);
    this.clock = app.get(Clock);
  }

  /** Makes the paper of a change that was sent out, and then asks the homeowners. */
  async render(job: ChangeJob): Promise<void> {
    const facts = await this.read(job);
    if (!facts || !mayChange(facts.change.state, 'sign_last') || facts.document) return;
    const { text, hash } = effectOf(facts);
    const pictures = await Promise.all(facts.photos.map(async ({ storageKey }) => await buffer(await this.storage.get(storageKey))));
    const letterhead = await this.work.writeAsFirm(job.firmId, (tx) => this.letterheads.find(tx, job.firmId));
    const stored = await this.store(job, await renderPaper({ ...changePaper(facts, this.clock.today(facts.job.timeZone), pictures), letterhead }), `${changeName(facts.change)}, ${facts.job.name}.pdf`);
    await this.work.writeAsFirm(job.firmId, async (tx, systemPerson) => {
      const now = await this.lock(tx, job);
      if (!mayChange(now.change.state, 'sign_last') || now.document) return;
      // somebody signed another change meanwhile: this paper is outdated, the next try makes a new one
      if (effectOf(now).hash !== hash) throw new Error('The effect moved while its paper was made.');
      await this.documents.add(tx, { ...job, ...stored, kind: 'change', subjectId: job.changeId, agreed: { text, hash }, createdAt: this.clock.now() });
      await this.papers.setDocument(tx, job.changeId, stored.id, hash);
      await this.mails.issued(tx, now, this.clock.today(now.job.timeZone));
      await this.record.append(tx, { ...job, act: 'change.paper_made', by: systemPerson, data: { change: job.changeId, document: stored.id, sha256: stored.sha256, effectHash: hash } });
    });
  }

  /** Joins the signatures to the paper, notes what it cost in the firm's own chain, and mails it to everybody. */
  async join(job: ChangeJob): Promise<void> {
    const read = await this.work.writeAsFirm(job.firmId, async (tx) => ({ facts: await this.facts.find(tx, job.jobId, job.changeId), anchor: await this.papers.head(tx, job.jobId) }));
    const { facts, anchor } = read;
    if (!facts?.document || facts.change.state !== 'approved' || facts.signedDocument) return;
    const original = await buffer(await this.storage.get(facts.document.storageKey));
    const signatures = await renderPaper(signaturePaper(facts, facts.document, anchor));
    const name = `${changeName(facts.change)}, ${facts.job.name}, signed.pdf`;
    const stored = await this.store(job, await joinPapers(original, signatures, name), name);
    await this.work.writeAsFirm(job.firmId, async (tx, systemPerson) => {
      const now = await this.lock(tx, job);
      if (now.signedDocument) return;
      await this.documents.add(tx, { ...job, ...stored, kind: 'signed_change', subjectId: job.changeId, agreed: null, createdAt: this.clock.now() });
      await this.papers.setSignedDocument(tx, job.changeId, stored.id);
      await this.mails.approved(tx, now, await this.papers.lenders(tx, job.jobId), stored.id, stored.sha256);
      if (now.cost) {
        const { netCostCents, markupCents, priceCents } = costOf(now.cost, now.change.noCharge).priced;
        await this.record.append(tx, { ...job, chain: 'firm', act: 'change.cost', by: systemPerson, data: { change: job.changeId, netCostCents, markupCents, priceCents } });
      }
      await this.record.append(tx, { ...job, act: 'change.paper_joined', by: systemPerson, data: { change: job.changeId, document: stored.id, sha256: stored.sha256, anchor: anchor.seq } });
    });
  }

  /** At the end of the day until which the price held. */
  async lapse(job: ChangeJob): Promise<void> {
    await this.work.writeAsFirm(job.firmId, async (tx, systemPerson) => {
      const facts = await this.lock(tx, job);
      if (!mayChange(facts.change.state, 'lapse') || this.clock.today(facts.job.timeZone) <= facts.change.goodUntil) return;
      await this.repository.close(tx, job.changeId, 'lapsed', 'The price held until a day that is over.', this.clock.now());
      await this.mails.closed(tx, facts, 'lapsed', 'The price held until a day that is over.', systemPerson);
      await this.record.append(tx, { ...job, act: 'change.lapsed', by: systemPerson, data: { change: job.changeId, number: facts.change.number, revision: facts.change.revision } });
    });
  }

  private read(job: ChangeJob): Promise<ChangeFacts | undefined> {
    return this.work.writeAsFirm(job.firmId, (tx) => this.facts.find(tx, job.jobId, job.changeId));
  }

  private async lock(tx: Tx, job: ChangeJob): Promise<ChangeFacts> {
    await this.repository.lockJob(tx, job.jobId);
    await this.repository.lock(tx, job.changeId);
    const facts = await this.facts.find(tx, job.jobId, job.changeId);
    if (!facts) throw new Error('The change of a task is gone.');
    return facts;
  }

  private async store({ firmId, jobId }: ChangeJob, pdf: Buffer, name: string) {
    const storageKey = newStorageKey(firmId, jobId, this.clock.now());
    await this.storage.put(storageKey, Readable.from([pdf]));
    return { id: v7(), name, sha256: createHash('sha256').update(pdf).digest('hex'), bytes: pdf.length, storageKey };
  }
}
