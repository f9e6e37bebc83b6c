import { Injectable } from '@nestjs/common';
import { drawStateByMoney } from '@tallypole/shared/schemas/draw-states';
import type { ApproveDraw, Draw, ObjectToLine, ReturnDraw } from '@tallypole/shared/schemas/draws';
import { Presence } from '../auth/presence.ts';
import { Clock } from '../common/clock.ts';
import type { Answered } from '../common/command-runner.ts';
import { computed } from '../common/computed.ts';
import { Problem } from '../common/problem.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { LedgerRepository } from '../ledger/ledger.repository.ts';
import { DecisionsRepository } from './decisions.repository.ts';
import { DrawActs, stateAfter, type Place } from './draw-acts.ts';
import { drawApproved } from './draw-entries.ts';
import type { DrawFacts } from './draw-facts.ts';
import { basisOf, figuresOf, type DrawFigures } from './draw-figures.ts';
import { DrawMails } from './draw-mails.ts';
import { DrawsRepository } from './draws.repository.ts';
import { dueOnOf } from './due-on.ts';

/** What the homeowners do with a draw: object to lines, give it back, approve it. */
@Injectable()
export class DecisionsService {
  constructor(
    private readonly acts: DrawActs,
    private readonly draws: DrawsRepository,
    private readonly repository: DecisionsRepository,
    private readonly ledger: LedgerRepository,
    private readonly presence: Presence,
    private readonly mails: DrawMails,
    private readonly clock: Clock,
  ) {}

  /** Lowers what is approved of a line, with a reason; the rest can be approved and paid. Approvals of the old sum fall away. */
  object(place: Place, input: ObjectToLine): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.objected',
      permission: 'draw.approve',
      act: 'object',
      input,
      run: async (tx, facts) => {
        const line = facts.lines.find(({ id }) => id === input.lineId);
        if (!line) throw Problem.field('/lineId', 'Must be a line of this draw.');
        if (facts.objections.some(({ lineId }) => lineId === line.id)) throw new Problem('wrong_state', { detail: 'There is an objection to this line already. Withdraw it first.' });
        const asked = basisOf(facts).draw.lines.find(({ id }) => id === line.id);
        const by = facts.homeowners.find(({ id }) => id === place.actor.personId)?.name ?? 'A homeowner';
        const withIt = { ...facts, objections: [...facts.objections, { id: input.id, lineId: line.id, objectedCents: input.objectedCents, reason: input.reason, by }] };
        const figures = objected(withIt, asked !== undefined);
        await this.repository.object(tx, idsOf(facts), input, this.clock.now());
        await this.repository.supersede(tx, place.drawId, figures.effectHash, this.clock.now());
        await this.mails.objected(tx, facts, figures, { by, byId: place.actor.personId, line: line.description, objectedCents: input.objectedCents, reason: input.reason });
        return { line: line.id, objectedCents: input.objectedCents, reason: input.reason, dueCents: figures.computed.summary.dueNowCents };
      },
    });
  }

  withdraw(place: Place, objectionId: string): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.objection_withdrawn',
      permission: 'draw.approve',
      act: 'object',
      input: { objectionId },
      run: async (tx, facts) => {
        if (!(await this.repository.withdraw(tx, place.drawId, objectionId, this.clock.now()))) throw new Problem('not_found');
        const without = { ...facts, objections: facts.objections.filter(({ id }) => id !== objectionId) };
        await this.repository.supersede(tx, place.drawId, figuresOf(basisOf(without), facts.allowed).effectHash, this.clock.now());
        return { objection: objectionId };
      },
    });
  }

  /** The draw goes back to the firm for correction. */
  return(place: Place, input: ReturnDraw): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.returned',
      permission: 'draw.approve',
      act: 'return',
      input,
      run: async (tx, facts) => {
        const now = this.clock.now();
        await this.repository.withdrawAll(tx, place.drawId, now);
        await this.repository.supersede(tx, place.drawId, null, now);
        await this.draws.setState(tx, place.drawId, stateAfter('return'), input.reason);
        const by = facts.homeowners.find(({ id }) => id === place.actor.personId)?.name ?? 'A homeowner';
        await this.mails.returned(tx, facts, by, input.reason);
        return { reason: input.reason };
      },
    });
  }

  /** One homeowner approves exactly what was shown; with the last one that the job asks for, the draw is approved, booked and due. */
  approve(place: Place, input: ApproveDraw): Promise<Answered<Draw>> {
    return this.acts.run(place, {
      operation: 'draw.approval_given',
      permission: 'draw.approve',
      act: 'approve',
      input,
      run: async (tx, facts) => {
        await this.presence.require(tx, place.actor);
        const figures = computed(() => figuresOf(basisOf(facts), facts.allowed));
        if (figures.effectHash !== input.effectHash) throw new Problem('effect_changed', { version: facts.draw.version });
        if (facts.approvals.some(({ id, effectHash }) => id === place.actor.personId && effectHash === input.effectHash)) {
          throw new Problem('wrong_state', { detail: 'You have approved this draw already.' });
        }
        const now = this.clock.now();
        await this.repository.supersede(tx, place.drawId, input.effectHash, now);
        await this.repository.approve(tx, idsOf(facts), input, now);
        const given = [...facts.approvals.filter(({ effectHash }) => effectHash === input.effectHash).map(({ id }) => id), place.actor.personId];
        const complete = isComplete(facts, given);
        if (complete) await this.complete(tx, facts, figures);
        return { effectHash: input.effectHash, complete, homeownerCents: figures.homeownerCents, loanCents: figures.loanCents };
      },
    });
  }

  private async complete(tx: Tx, facts: DrawFacts, figures: DrawFigures): Promise<void> {
    const { job, draw } = facts;
    const today = this.clock.today(job.timeZone);
    const dueOn = dueOnOf(job, draw.submittedAt, today);
    const { homeownerCents, loanCents, effectHash } = figures;
    const dueCents = figures.computed.summary.dueNowCents;
    const state = drawStateByMoney(dueCents, 0);
    const basis = basisOf(facts);
    const lowered = new Set(facts.objections.map(({ lineId }) => lineId));
    const approved = basis.draw.lines.filter(({ id }) => lowered.has(id)).map(({ id, workCents, onHandCents }) => ({ lineId: id, workCents, onHandCents }));
    await this.draws.lowerLines(tx, draw.id, approved);
    await this.draws.approve(tx, draw.id, { basis, effectHash, dueOn, dueCents, homeownerCents, loanCents, state }, this.clock.now());
    await this.ledger.post(tx, job.firmId, job.id, drawApproved(draw, basis.draw, figures, today));
    await this.mails.approved(tx, facts, figures, dueOn);
  }
}

const idsOf = ({ job, draw }: DrawFacts) => ({ firmId: job.firmId, jobId: job.id, drawId: draw.id });

function objected(facts: DrawFacts, known: boolean): DrawFigures {
  if (!known) throw Problem.field('/lineId', 'Must be a line of this draw.');
  try {
    return computed(() => figuresOf(basisOf(facts), facts.allowed));
  } catch (error) {
    // whatever the computation names, it is the sum of this objection that doesn't fit
    if (error instanceof Problem && error.code === 'invalid_input') throw Problem.field('/objectedCents', error.details.errors?.[0]?.message ?? error.message);
    throw error;
  }
}

/** By the contract one homeowner is enough, or all must approve, those included who were invited and have not joined yet. */
function isComplete({ job, homeowners, invitedHomeowners }: DrawFacts, given: readonly string[]): boolean {
  if (job.homeownersSign === 'one') return given.length > 0;
  return invitedHomeowners === 0 && homeowners.every(({ id }) => given.includes(id));
}
