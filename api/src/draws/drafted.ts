import { draftDraw, type DrawLine, type LineToDraft } from '@tallypole/shared/draw';
import { daysBetween } from '@tallypole/shared/due';
import type { BasisFacts } from './draw-facts.ts';
import { askedLines } from './draw-figures.ts';

/** What the proof there is allows to bill. A contingency waits for a change that uses it. Throws InvalidInput. */
export function drafted(facts: BasisFacts): DrawLine[] {
  const milestones = new Map(facts.milestones.map(({ id, state, percent }) => [id, { state, inspectedRate: percent }]));
  const waits = { state: 'upcoming', inspectedRate: 0 } as const;
  const lines: LineToDraft[] = askedLines(facts).map((line, i) => {
    const { kind, milestoneId } = facts.lines[i] ?? { kind: 'base', milestoneId: null };
    return { ...line, milestone: kind === 'contingency' ? waits : milestoneId === null ? null : (milestones.get(milestoneId) ?? waits) };
  });
  const { style, startOn, completeBy } = facts.job;
  const elapsedDays = Math.max(0, daysBetween(startOn, facts.draw.throughOn));
  return draftDraw({ style, lines, elapsedDays, contractDays: daysBetween(startOn, completeBy) });
}
