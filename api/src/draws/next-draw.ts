import { InvalidInput, type Step } from '@tallypole/shared/arithmetic';
import { sum } from '@tallypole/shared/money';
import type { BasisFacts } from './draw-facts.ts';
import { basisOf, figuresOf } from './draw-figures.ts';
import { drafted } from './drafted.ts';

/** What the next draw follows from, whether or not one is begun: schedule, proof, the last draw that was sent, the loan. */
export interface NextDrawFacts extends Omit<BasisFacts, 'draw' | 'objections'> {
  /** The draw that waits for its approval, as it asks. */
  sent: { throughOn: string; lines: { id: string; workCents: number; onHandCents: number }[] } | null;
}

/** What a change would add to the schedule. */
export interface AddedLines {
  milestoneId: string | null;
  lines: readonly { description: string; cents: number }[];
}

export interface NextDraw {
  dueNowCents: number;
  /** Of it, from the homeowner and from the loan. */
  homeownerCents: number;
  loanCents: number;
  steps: { dueNow: Step; homeowner: Step };
}

/**
 * The next draw without and with a change, drafted from what is proven as of today, with the change's milestone taken as proven: the first
 * draw in which the change is asked for. A draw that is out counts as approved as it asks. Null where it can't be said, before there is a schedule. Pure.
 */
export function nextDraws(facts: NextDrawFacts, added: AddedLines, today: string): { before: NextDraw; after: NextDraw } | null {
  if (facts.lines.length === 0) return null;
  const milestones = facts.milestones.map((milestone) => (milestone.id === added.milestoneId ? { ...milestone, state: 'proven' as const } : milestone));
  const lines = added.lines.map(({ description, cents }, i) => ({
    id: `added-${i}`, number: '', phase: '', description, kind: 'change' as const, milestoneId: added.milestoneId, scheduledCents: cents, workCents: null, onHandCents: null,
  }));
  const changesApprovedCents = sum([facts.job.changesApprovedCents, ...lines.map(({ scheduledCents }) => scheduledCents)]);
  try {
    const without = { ...afterSent(facts), milestones };
    const withChange = { ...without, lines: [...without.lines, ...lines], job: { ...facts.job, changesApprovedCents } };
    return { before: drawOf(without, today), after: drawOf(withChange, today) };
  } catch (error) {
    if (error instanceof InvalidInput) return null;
    throw error;
  }
}

type Upcoming = Omit<NextDrawFacts, 'sent'>;

/** The same once the draw that is out is approved. */
function afterSent({ sent, ...facts }: NextDrawFacts): Upcoming {
  if (!sent) return facts;
  const asked = new Map(sent.lines.map((line) => [line.id, line]));
  const lines = facts.lines.map((line) => ({ ...line, ...asked.get(line.id) }));
  const basis = basisOf({ ...facts, lines, draw: { basis: null, throughOn: sent.throughOn }, objections: [] });
  return { ...facts, previous: { basis, loanCentsToDate: sum([facts.previous?.loanCentsToDate ?? 0, figuresOf(basis, null).loanCents]) } };
}

function drawOf(next: Upcoming, today: string): NextDraw {
  const last = next.previous?.basis.draw.throughOn ?? today;
  const facts: BasisFacts = { ...next, draw: { basis: null, throughOn: last > today ? last : today }, objections: [] };
  const asked = new Map(drafted(facts).map((line) => [line.id, line]));
  const lines = facts.lines.map((line) => ({ ...line, workCents: asked.get(line.id)?.workCents ?? null, onHandCents: asked.get(line.id)?.onHandCents ?? null }));
  const { computed, homeownerCents, loanCents, who } = figuresOf(basisOf({ ...facts, lines }), null);
  return { dueNowCents: computed.summary.dueNowCents, homeownerCents, loanCents, steps: { dueNow: computed.steps.dueNow, homeowner: who.steps.homeowner } };
}
