import { Injectable } from '@nestjs/common';
import { firmRoles, type Role } from '@tallypole/shared/schemas/roles';
import { drawTransitions, mayDraw, type DrawAct } from '@tallypole/shared/schemas/draw-states';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Permission } from '@tallypole/shared/schemas/permissions';
import { requireOnJob } from '../common/access.ts';
import type { Json } from '../common/canonical.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import type { Actor, Tx } from '../common/unit-of-work.ts';
import { RecordRepository } from '../record/record.repository.ts';
import type { DrawFacts } from './draw-facts.ts';
import { DrawFactsRepository } from './draw-facts.repository.ts';
import { DrawsRepository } from './draws.repository.ts';
import { drawView } from './draw-view.ts';

export interface Place {
  actor: Actor;
  jobId: string;
  drawId: string;
  key: string;
}

interface OneAct {
  /** As it stands in the record: `draw.submitted`. */
  operation: string;
  permission: Permission;
  act: DrawAct;
  input: { readonly [name: string]: Json | undefined };
  run: (tx: Tx, facts: DrawFacts) => Promise<{ readonly [name: string]: Json }>;
}

export const isFirm = (roles: readonly Role[]): boolean => roles.some((role) => (firmRoles as readonly string[]).includes(role));

/** How every act on one draw runs: permission, the job's lock, state, the act, its record entry; the answer is the draw as it is then. */
@Injectable()
export class DrawActs {
  constructor(
    private readonly commands: CommandRunner,
    private readonly repository: DrawsRepository,
    private readonly facts: DrawFactsRepository,
    private readonly record: RecordRepository,
    private readonly clock: Clock,
  ) {}

  run({ actor, jobId, drawId, key }: Place, { operation, permission, act, input, run }: OneAct): Promise<Answered<Draw>> {
    let roles: Role[] = [];
    return this.commands.run<Draw>(actor, {
      operation,
      key,
      input: { jobId, drawId, ...input },
      authorize: async (tx) => {
        roles = await requireOnJob(tx, permission, jobId);
      },
      act: async (tx) => {
        await this.repository.lockJob(tx, jobId);
        const before = await this.find(tx, jobId, drawId, roles);
        requireState(before, act);
        const data = await run(tx, before);
        await this.record.append(tx, { firmId: before.job.firmId, jobId, act: operation, by: actor.personId, data: { draw: drawId, number: before.draw.number, ...data } });
        return await this.view(tx, actor, jobId, drawId, roles);
      },
    });
  }

  /** A draw that isn't sent yet is the firm's own: to everybody else it is not there. */
  async find(tx: Tx, jobId: string, drawId: string, roles: readonly Role[]): Promise<DrawFacts> {
    const found = await this.facts.find(tx, jobId, drawId);
    if (!found || (found.draw.submittedAt === null && !isFirm(roles))) throw new Problem('not_found');
    return found;
  }

  async view(tx: Tx, actor: Actor, jobId: string, drawId: string, roles: readonly Role[]): Promise<Draw> {
    const facts = await this.find(tx, jobId, drawId, roles);
    return drawView(facts, { personId: actor.personId, forFirm: isFirm(roles), today: this.clock.today(facts.job.timeZone) });
  }
}

const STATE_WORDS: Readonly<Record<DrawFacts['draw']['state'], string>> = {
  draft: 'has not been sent',
  submitted: 'is with the homeowners',
  returned: 'came back for correction',
  approved: 'is approved',
  part_paid: 'is approved and paid in part',
  paid: 'is paid',
  void: 'is void',
};

function requireState({ draw }: DrawFacts, act: DrawAct): void {
  if (!mayDraw(draw.state, act)) throw new Problem('wrong_state', { detail: `Draw ${draw.number} ${STATE_WORDS[draw.state]}.` });
}

/** The state that an act leads to; only for acts that lead to one. */
export function stateAfter(act: keyof typeof drawTransitions): NonNullable<(typeof drawTransitions)[DrawAct]['to']> {
  const { to } = drawTransitions[act];
  if (to === null) throw new Error(`The act "${act}" does not change the state.`);
  return to;
}
