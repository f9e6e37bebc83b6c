import { workFromPercent } from '@tallypole/shared/draw';
import { daysBetween } from '@tallypole/shared/due';
import { divideRounded, sum } from '@tallypole/shared/money';
import { paidByMilestone, withoutPrices, type PoleInput } from '@tallypole/shared/pole';
import type { HouseFacts } from './house.repository.ts';

/** The pole of a job as it stands today; without prices for people who may not see them. */
export function poleOf(facts: HouseFacts, today: string, prices: boolean): PoleInput {
  const billed = new Map(facts.billed.map(({ milestoneId, cents }) => [milestoneId, cents]));
  const paid = paidByMilestone(facts.draws);
  const milestones = facts.milestones.map(({ id, name, state, percent, scheduledCents }) => ({
    id,
    name,
    state,
    scheduledCents,
    provenCents: state === 'proven' ? scheduledCents : workFromPercent(scheduledCents, percent),
    billedCents: billed.get(id) ?? 0,
    paidCents: paid.get(id) ?? 0,
    changes: facts.changes.filter(({ milestoneId }) => milestoneId === id).map(({ id: changeId, label, pending }) => ({ id: changeId, label, pending })),
  }));
  const general = { scheduledCents: facts.generalCents, provenCents: 0, billedCents: billed.get(null) ?? 0, paidCents: paid.get(null) ?? 0 };
  const pole = { milestones, general, expectedTodayCents: expected(facts, today), prices: true };
  return prices ? pole : withoutPrices(pole);
}

/** How high the work should stand today: milestones planned by now, and the general lines by elapsed time. Null before the start. */
function expected(facts: HouseFacts, today: string): number | null {
  if (today < facts.startOn) return null;
  const days = Math.max(1, daysBetween(facts.startOn, facts.completeBy));
  const elapsed = Math.min(days, daysBetween(facts.startOn, today));
  const due = facts.milestones.filter(({ plannedOn }) => plannedOn !== null && plannedOn <= today).map(({ scheduledCents }) => scheduledCents);
  return sum([...due, divideRounded(BigInt(facts.generalCents) * BigInt(elapsed), BigInt(days))]);
}
