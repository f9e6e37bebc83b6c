import type { House } from '@tallypole/shared/schemas/house';

/** One sentence of where the house stands, from the ground up. */
export function whereItStands({ pole }: House): string {
  const { milestones } = pole;
  if (milestones.length === 0) return 'Nothing is planned yet.';
  const proven = milestones.filter(({ state }) => state === 'proven');
  const open = milestones.filter(({ state }) => state === 'claimed' || state === 'under_way');
  const last = proven.at(-1);
  if (proven.length === milestones.length) return 'Every milestone is proven.';
  const done = last ? `${last.name} is proven${pole.prices ? moneyOf(last) : ''}.` : '';
  const [current] = open;
  const now = current ? (current.state === 'claimed' ? `${current.name} is claimed and waits for proof.` : `${current.name} is under way.`) : '';
  return [done, now].filter((part) => part !== '').join(' ') || 'Work has not begun.';
}

function moneyOf(milestone: House['pole']['milestones'][number]): string {
  if (milestone.scheduledCents > 0 && milestone.paidCents >= milestone.scheduledCents) return ' and paid';
  return milestone.billedCents > 0 ? ' and billed' : '';
}
