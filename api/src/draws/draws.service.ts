import { Injectable } from '@nestjs/common';
import { workFromPercent, type DrawLine } from '@tallypole/shared/draw';
import type { Role } from '@tallypole/shared/schemas/roles';
import type { AdjustDraw, AdjustLine, Draw, DrawList, Redraft, SetDrawPhotos, StartDraw, SubmitDraw, VoidDraw } from '@tallypole/shared/schemas/draws';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { computed } from '../common/computed.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { DecisionsRepository } from './decisions.repository.ts';
import { DrawActs, isFirm, stateAfter, type Place } from './draw-acts.ts';
import type { DrawFacts } from './draw-facts.ts';
import { askedLines, basisOf, figuresOf } from './draw-figures.ts';
import { DrawMails } from './draw-mails.ts';
import { drafted } from './drafted.ts';
import { rowOf } from './draw-view.ts';
import { DrawsRepository, type LineEntry } from './draws.repository.ts';

/** What the firm does with a draw: drafts it from what is proven, adjusts it, sends it, voids it. */
@Injectable()
export class DrawsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly acts: DrawActs,
    private readonly repository: DrawsRepository,
    private readonly decisions: DecisionsRepository,
    private readonly record: RecordRepository,
    private readonly mails: DrawMails,
    private readonly clock: Clock,
  ) {}

  list(actor: Actor, jobId: string): Promise<DrawList> {
    return this.work.readJob(actor, jobId, 'draw.read', async (tx, roles) => ({ items: await this.rows(tx, jobId, roles) }));
  }

  /** The draws of a job, newest first; the sums of the one that is open are computed as its page does. */
  async rows(tx: Tx, jobId: string, roles: readonly Role[]): Promise<DrawList['items']> {
    const rows = await this.repository.list(tx, jobId, isFirm(roles) ? 'all' : 'sent');
    const open = rows.find(({ state }) => state === 'draft' || state === 'submitted' || state === 'returned');
    const facts = open && (await this.acts.find(tx, jobId, open.id, roles));
    const figures = facts ? figuresOf(basisOf(facts), facts.allowed) : null;
    return rows.map((row) => rowOf(row, row.id === open?.id ? figures : null));
  }

  draw(actor: Actor, jobId: string, drawId: string): Promise<Draw> {
    return this.work.readJob(actor, jobId, 'draw.read', (tx, roles) => this.acts.view(tx, actor, jobId, drawId, roles));
  }

  /** A draft from what is proven, in one action. One draw is open at a time: figures are cumulative. */
  start(actor: Actor, jobId: string, input: StartDraw, key: string): Promise<Answered<Draw>> {
    return this.commands.run<Draw>(actor, {
      operation: 'draw.started',
      key,
      input: { jobId, ...input },
      authorize: (tx) => requireOnJob(tx, 'draw.prepare', jobId),
      act: async (tx) => {
        const taken = await this.repository.nextNumber(tx, jobId);
        if (!taken) throw new Problem('not_found');
        const open = await this.repository.openDraw(tx, jobId);
        if (open !== undefined) throw new Problem('wrong_state', { detail: `Draw ${open} is still open. Finish or void it first.` });
        const draw = { ...taken, jobId, id: input.id };
        await this.repository.insert(tx, { ...draw, throughOn: input.throughOn }, this.clock.now());
        const facts = await this.acts.find(tx, jobId, input.id, ['books']);
        if (facts.lines.length === 0) throw new Problem('wrong_state', { detail: 'The job has no schedule of values yet. Import it first.' });
        await this.repository.setLines(tx, draw, computed(() => drafted(facts)).map(lineEntry));
        await this.record.append(tx, { firmId: draw.firmId, jobId, act: 'draw.started', by: actor.personId, data: { draw: input.id, number: draw.number, throughOn: input.throughOn } });
        return await this.acts.view(tx, actor, jobId, input.id, ['books']);
      },
    });
  }

  /** The same again for a draw that is being written: what was typed gives way to what is proven now. */
  redraft(place: Place, input: Redraft): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.redrafted',
      permission: 'draw.prepare',
      act: 'adjust',
      input,
      run: async (tx, facts) => {
        await this.edit(tx, facts, input.version, {});
        await this.repository.setLines(tx, idsOf(facts), computed(() => drafted(facts)).map(lineEntry));
        return {};
      },
    });
  }

  adjust(place: Place, input: AdjustDraw): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.adjusted',
      permission: 'draw.prepare',
      act: 'adjust',
      input,
      run: async (tx, facts) => {
        await this.edit(tx, facts, input.version, input);
        const entries = input.lines.map((line, i) => entryOf(facts, line, i));
        await this.repository.setLines(tx, idsOf(facts), entries);
        // what can't be computed must not be stored
        const after = await this.acts.find(tx, place.jobId, place.drawId, ['books']);
        computed(() => figuresOf(basisOf(after), null));
        return { lines: entries.length };
      },
    });
  }

  setPhotos(place: Place, input: SetDrawPhotos): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.photos_set',
      permission: 'draw.prepare',
      act: 'adjust',
      input,
      run: async (tx, facts) => {
        await this.edit(tx, facts, input.version, {});
        const photoIds = [...new Set(input.photoIds)];
        if ((await this.repository.setPhotos(tx, idsOf(facts), photoIds)) !== photoIds.length) throw Problem.field('/photoIds', 'Choose photos of this job.');
        return { photos: photoIds.length };
      },
    });
  }

  /** Sends the draw to the homeowners, and to the lender where the loan is asked; what it rests on is kept as it was. */
  submit(place: Place, input: SubmitDraw): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.submitted',
      permission: 'draw.prepare',
      act: 'submit',
      input,
      run: async (tx, facts) => {
        requireVersion(facts, input.version);
        if (facts.homeowners.length === 0) throw new Problem('wrong_state', { detail: 'No homeowner has joined the job yet, so nobody could approve it.' });
        await this.repository.setLines(tx, idsOf(facts), askedLines(facts).map(lineEntry));
        const basis = basisOf(facts);
        const figures = computed(() => figuresOf(basis, null));
        if (figures.computed.lines.every(({ thisDrawCents }) => thisDrawCents === 0)) throw new Problem('rule_broken', { detail: 'Nothing is asked for in this draw yet.' });
        const reviewState = figures.loanCents > 0 ? 'ordered' : 'not_needed';
        const { homeownerCents, loanCents, effectHash } = figures;
        const sums = { dueCents: figures.computed.summary.dueNowCents, homeownerCents, loanCents, effectHash };
        await this.repository.submit(tx, place.drawId, { basis, ...sums, reviewState }, place.actor.personId, this.clock.now());
        await this.mails.submitted(tx, facts, figures);
        return sums;
      },
    });
  }

  void(place: Place, input: VoidDraw): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.voided',
      permission: 'draw.prepare',
      act: 'void',
      input,
      run: async (tx, facts) => {
        await this.decisions.supersede(tx, facts.draw.id, null, this.clock.now());
        await this.repository.setState(tx, facts.draw.id, stateAfter('void'));
        return { reason: input.reason };
      },
    });
  }

  private async edit(tx: Tx, facts: DrawFacts, version: number, fields: { throughOn?: string | undefined; note?: string | undefined }): Promise<void> {
    const { draw } = facts;
    const edited = await this.repository.edit(tx, draw.id, version, { throughOn: fields.throughOn ?? draw.throughOn, note: fields.note ?? draw.note });
    if (!edited) throw new Problem('stale', { version: draw.version });
  }
}

function requireVersion({ draw }: DrawFacts, version: number): void {
  if (draw.version !== version) throw new Problem('stale', { version: draw.version });
}

const idsOf = ({ job, draw }: DrawFacts) => ({ firmId: job.firmId, jobId: job.id, id: draw.id });
const lineEntry = ({ id, workCents, onHandCents }: DrawLine): LineEntry => ({ lineId: id, workCents, onHandCents });

function entryOf(facts: DrawFacts, typed: AdjustLine, i: number): LineEntry {
  const line = askedLines(facts).find(({ id }) => id === typed.lineId);
  if (!line) throw Problem.field(`/lines/${i}/lineId`, 'Must be a line of the schedule.');
  const { workRate } = typed;
  const workCents = workRate === undefined ? (typed.workCents ?? line.workCents) : computed(() => workFromPercent(line.scheduledCents, workRate));
  return { lineId: line.id, workCents, onHandCents: typed.onHandCents ?? line.onHandCents };
}
