import { Injectable } from '@nestjs/common';
import { sum } from '@tallypole/shared/money';
import { mayChange } from '@tallypole/shared/schemas/change-states';
import type { Change, ChangeCost, ChangeList, DraftChange, EditChange } from '@tallypole/shared/schemas/changes';
import type { Permission } from '@tallypole/shared/schemas/permissions';
import type { Role } from '@tallypole/shared/schemas/roles';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { changeView, seesPrices, visibleStates } from './change-view.ts';
import type { ChangeFacts } from './change-facts.ts';
import { ChangeFactsRepository } from './change-facts.repository.ts';
import { ChangesRepository, type OfChange } from './changes.repository.ts';
import { costOf, priceDraft } from './pricing-draft.ts';

@Injectable()
export class ChangesService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: ChangesRepository,
    private readonly facts: ChangeFactsRepository,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  list(actor: Actor, jobId: string): Promise<ChangeList> {
    return this.work.readJob(actor, jobId, 'change.read', async (tx, roles) => {
      const rows = await this.repository.list(tx, jobId, visibleStates(roles));
      const prices = seesPrices(roles, roles.includes('site') && (await this.repository.siteSeesPrices(tx, jobId)));
      const approved = rows.filter(({ state }) => state === 'approved');
      return {
        items: rows.map((row) => (prices ? row : { ...row, chargedCents: null })),
        approvedCents: prices ? sum(approved.map(({ chargedCents }) => chargedCents ?? 0)) : null,
        approvedDays: approved.reduce((days, row) => days + row.days, 0),
      };
    });
  }

  change(actor: Actor, jobId: string, changeId: string): Promise<Change> {
    return this.work.readJob(actor, jobId, 'change.read', (tx, roles) => this.view(tx, actor, jobId, changeId, roles));
  }

  /** What a draft would come to, without writing anything. */
  price(actor: Actor, jobId: string, draft: DraftChange): Promise<ChangeCost> {
    return this.work.readJob(actor, jobId, 'change.price', async (tx) => {
      const priced = priceDraft(draft, await this.terms(tx, jobId));
      return costOf(priced, draft.noCharge);
    });
  }

  start(actor: Actor, jobId: string, draft: DraftChange, key: string): Promise<Answered<Change>> {
    return this.run(actor, jobId, { operation: 'change.start', key, input: draft, permission: 'change.price' }, async (tx) => {
      const priced = priceDraft(draft, await this.terms(tx, jobId));
      const numbered = await this.repository.nextNumber(tx, jobId);
      if (!numbered) throw new Problem('not_found');
      const of = { firmId: numbered.firmId, jobId, changeId: draft.id };
      await this.repository.insert(tx, of, { number: numbered.number, revision: '' }, priced, this.clock.now());
      await this.setPhotos(tx, of, draft);
      return draft.id;
    });
  }

  edit(actor: Actor, jobId: string, changeId: string, { version, ...draft }: EditChange, key: string): Promise<Answered<Change>> {
    return this.run(actor, jobId, { operation: 'change.edit', key, input: { changeId, version, ...draft }, permission: 'change.price' }, async (tx) => {
      const { change, job } = await this.locked(tx, jobId, changeId);
      if (!mayChange(change.state, 'edit')) throw new Problem('wrong_state', { detail: 'What was sent out is not edited. Make a revision, which takes its place.' });
      const priced = priceDraft(draft, await this.terms(tx, jobId));
      const of = { firmId: job.firmId, jobId, changeId };
      if (change.version !== version || !(await this.repository.edit(tx, of, version, priced))) throw new Problem('stale', { version: change.version });
      await this.setPhotos(tx, of, draft);
      return changeId;
    });
  }

  /** A new draft under the same number with the next letter; it takes the other's place when it is sent out. */
  revise(actor: Actor, jobId: string, changeId: string, draft: DraftChange, key: string): Promise<Answered<Change>> {
    return this.run(actor, jobId, { operation: 'change.revise', key, input: { changeId, ...draft }, permission: 'change.price' }, async (tx) => {
      const { change, job } = await this.locked(tx, jobId, changeId);
      if (!mayChange(change.state, 'supersede')) throw new Problem('wrong_state', { detail: 'Only what was sent out and is not signed can be revised.' });
      const priced = priceDraft(draft, await this.terms(tx, jobId));
      const revision = nextLetter(change.revision);
      const of = { firmId: job.firmId, jobId, changeId: draft.id };
      await this.repository.insert(tx, of, { number: change.number, revision }, priced, this.clock.now());
      await this.setPhotos(tx, of, draft);
      await this.record.append(tx, { firmId: job.firmId, jobId, chain: 'firm', act: 'change.revised', by: actor.personId, data: { change: changeId, revision: draft.id } });
      return draft.id;
    });
  }

  /** Locks job and change, in this order, and reads everything about them. */
  async locked(tx: Tx, jobId: string, changeId: string): Promise<ChangeFacts> {
    await this.repository.lockJob(tx, jobId);
    await this.repository.lock(tx, changeId);
    const facts = await this.facts.find(tx, jobId, changeId);
    if (!facts) throw new Problem('not_found');
    return facts;
  }

  /** Runs an act on a change as a command; the answer is the change as its actor may see it. */
  run(
    actor: Actor,
    jobId: string,
    act: { operation: string; key: string; input: object; permission: Permission },
    perform: (tx: Tx) => Promise<string>,
  ): Promise<Answered<Change>> {
    let roles: Role[] = [];
    return this.commands.run(actor, {
      operation: act.operation,
      key: act.key,
      input: { jobId, ...act.input },
      authorize: async (tx) => {
        roles = await requireOnJob(tx, act.permission, jobId);
      },
      act: async (tx) => (await this.view(tx, actor, jobId, await perform(tx), roles)) as Change & Record<string, never>,
    });
  }

  private async view(tx: Tx, actor: Actor, jobId: string, changeId: string, roles: readonly Role[]): Promise<Change> {
    const facts = await this.facts.find(tx, jobId, changeId);
    if (!facts || !visibleStates(roles).includes(facts.change.state)) throw new Problem('not_found');
    return changeView(facts, roles, { personId: actor.personId, today: this.clock.today(facts.job.timeZone) });
  }

  private async setPhotos(tx: Tx, of: OfChange, { photoIds = [] }: Pick<DraftChange, 'photoIds'>): Promise<void> {
    const chosen = [...new Set(photoIds)];
    if ((await this.repository.setPhotos(tx, of, chosen)) !== chosen.length) throw Problem.field('/photoIds', 'Choose photos of this job that can be shown.');
  }

  private async terms(tx: Tx, jobId: string) {
    const terms = await this.repository.firmTerms(tx, jobId);
    if (!terms) throw new Problem('not_found');
    return terms;
  }
}

const LAST_LETTER = 'Z';
function nextLetter(revision: string): string {
  if (revision === LAST_LETTER) throw new Problem('wrong_state', { detail: 'A change has at most 26 revisions. Start a new one.' });
  return revision === '' ? 'A' : String.fromCharCode(revision.charCodeAt(0) + 1);
}
