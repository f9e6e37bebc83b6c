import { Injectable } from '@nestjs/common';
import type * as S from '@tallypole/shared/schemas/milestones';
import { stateAfter, type MilestoneAct, type MilestoneState } from '@tallypole/shared/schemas/milestones';
import { may, type Permission } from '@tallypole/shared/schemas/permissions';
import type { JobRole, Role } from '@tallypole/shared/schemas/roles';
import { requireOnJob } from '../common/access.ts';
import type { Json } from '../common/canonical.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { askToWeigh } from '../photos/weigh-photos.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { MilestoneMails } from './milestone-mails.ts';
import { MilestonesRepository, type LockedMilestone, type MilestoneChange } from './milestones.repository.ts';

export interface Place {
  actor: Actor;
  jobId: string;
  milestoneId: string;
  key: string;
}

/** What an act does once the milestone is locked and its version and state allow it: the change, and what the record keeps. */
type Effect = (tx: Tx, milestone: LockedMilestone, roles: Role[], now: Date) => Promise<{ change: MilestoneChange; data: { readonly [name: string]: Json } }>;

const OBSERVERS: readonly JobRole[] = ['homeowner', 'lender', 'inspector'];

@Injectable()
export class MilestonesService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: MilestonesRepository,
    private readonly mails: MilestoneMails,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  list(actor: Actor, jobId: string): Promise<S.MilestoneList> {
    return this.work.readJob(actor, jobId, 'milestone.read', async (tx, roles) => {
      const items = await this.repository.list(tx, jobId, may(roles, 'money.read'));
      return { items, today: this.clock.today(await this.repository.timeZone(tx, jobId)) };
    });
  }

  milestone(actor: Actor, jobId: string, milestoneId: string): Promise<S.MilestoneDetail> {
    return this.work.readJob(actor, jobId, 'milestone.read', (tx, roles) => this.find(tx, jobId, milestoneId, roles));
  }

  plan(place: Place, input: S.PlanMilestone): Promise<Answered<S.MilestoneDetail>> {
    const { plannedOn, forecastOn } = input;
    return this.act(place, { permission: 'milestone.plan', name: 'milestone.planned', act: null, input }, () =>
      Promise.resolve({ change: { plannedOn, forecastOn }, data: { plannedOn, forecastOn } }));
  }

  start(place: Place, input: S.StartMilestone): Promise<Answered<S.MilestoneDetail>> {
    return this.act(place, { permission: 'milestone.claim', name: 'milestone.started', act: 'start', input }, (_tx, _milestone, _roles, now) =>
      Promise.resolve({ change: { startedAt: now }, data: {} }));
  }

  /** The builder says that it is done, with at least one photo that can be looked at. */
  claim(place: Place, input: S.ClaimMilestone): Promise<Answered<S.MilestoneDetail>> {
    return this.act(place, { permission: 'milestone.claim', name: 'milestone.claimed', act: 'claim', input }, async (tx, milestone, _roles, now) => {
      const photos = await this.repository.photoCount(tx, place.milestoneId);
      if (photos === 0) throw new Problem('rule_broken', { detail: 'Photograph it first: a claim needs at least one photo.' });
      await this.mails.claimed(tx, milestone, { ...place, actorId: place.actor.personId }, { photos, note: input.note });
      const actualOn = this.clock.today(milestone.timeZone);
      return { change: { actualOn, startedAt: now, claimed: { at: now, by: place.actor.personId } }, data: { photos, note: input.note } };
    });
  }

  /** Somebody outside the firm says what they saw: the whole, a part, or not what was claimed. */
  inspect(place: Place, input: S.Inspect): Promise<Answered<S.MilestoneDetail>> {
    const { id, result, note, seenOn } = input;
    return this.act(place, { permission: 'milestone.prove', name: 'milestone.inspected', act: result, input }, async (tx, milestone, roles, now) => {
      const role = OBSERVERS.find((observer) => roles.includes(observer));
      if (!role) throw new Problem('not_allowed');
      if (seenOn > this.clock.today(milestone.timeZone)) throw Problem.field('/seenOn', 'The day must not lie ahead.');
      const percent = result === 'passed' ? 10_000 : (input.percent ?? milestone.percent);
      const { firmId } = milestone;
      const { jobId, milestoneId, actor } = place;
      await this.repository.addInspection(tx, { firmId, jobId, id, milestoneId, result, percent, note, seenOn, role, at: now });
      await this.mails.seen(tx, milestone, { ...place, actorId: actor.personId }, { result, percent, note });
      const proof = result === 'passed' ? { proven: { at: now, by: actor.personId } } : { claimed: null, actualOn: null };
      return { change: { percent, ...proof }, data: { inspection: id, result, percent, seenOn, role } };
    });
  }

  /** Undoes a proof while no approved draw rests on it. */
  reopen(place: Place, input: S.ReopenMilestone): Promise<Answered<S.MilestoneDetail>> {
    return this.act(place, { permission: 'milestone.reopen', name: 'milestone.reopened', act: 'reopen', input }, async (tx, milestone) => {
      if (await this.repository.isBilled(tx, place.milestoneId)) {
        throw new Problem('wrong_state', { detail: 'An approved draw rests on this milestone. It can no longer be reopened.' });
      }
      await this.mails.reopened(tx, milestone, { ...place, actorId: place.actor.personId }, input.reason);
      const percent = await this.repository.lastPartialPercent(tx, place.milestoneId);
      return { change: { percent, actualOn: null, claimed: null, proven: null }, data: { reason: input.reason } };
    });
  }

  private act(
    { actor, jobId, milestoneId, key }: Place,
    what: { permission: Permission; name: string; act: MilestoneAct | null; input: { version: number } },
    effect: Effect,
  ): Promise<Answered<S.MilestoneDetail>> {
    let roles: Role[] = [];
    return this.commands.run<S.MilestoneDetail>(actor, {
      operation: what.name,
      key,
      input: { jobId, milestoneId, ...what.input },
      authorize: async (tx) => {
        roles = await requireOnJob(tx, what.permission, jobId);
      },
      act: async (tx) => {
        const milestone = await this.repository.lock(tx, jobId, milestoneId);
        if (!milestone) throw new Problem('not_found');
        if (milestone.version !== what.input.version) throw new Problem('stale', { version: milestone.version });
        const state = what.act === null ? milestone.state : stateAfter(milestone.state, what.act);
        if (state === null) throw new Problem('wrong_state', { detail: REFUSED[milestone.state] });
        const { change, data } = await effect(tx, milestone, roles, this.clock.now());
        await this.repository.change(tx, milestoneId, { ...change, state });
        // when it was built decides what its photos can show
        if (state !== milestone.state) await askToWeigh(tx, this.queue, jobId, milestone.firmId);
        await this.record.append(tx, { firmId: milestone.firmId, jobId, act: what.name, by: actor.personId, data: { milestone: milestoneId, state, ...data } });
        return await this.find(tx, jobId, milestoneId, roles);
      },
    });
  }

  private async find(tx: Tx, jobId: string, milestoneId: string, roles: Role[]): Promise<S.MilestoneDetail> {
    const milestone = await this.repository.find(tx, jobId, milestoneId, may(roles, 'money.read'));
    if (!milestone) throw new Problem('not_found');
    return milestone;
  }
}

const REFUSED: Readonly<Record<MilestoneState, string>> = {
  upcoming: 'Work on this milestone has not begun.',
  under_way: 'This milestone is under way; the firm has not claimed that it is done.',
  claimed: 'This milestone is claimed and waits for somebody to look at it.',
  proven: 'This milestone is proven already.',
};
