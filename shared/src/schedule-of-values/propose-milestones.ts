import { sum } from '../money/index.ts';
import { readScheduled, type DraftLine } from './draft.ts';

export interface ProposedMilestone {
  name: string;
  plannedOn: string;
}

const DAY_MS = 86_400_000;

/**
 * Milestones in the order in which the lines name them, each planned for the day by which the contract time has run as far as the work
 * up to it goes in scheduled value. Common practice, no source: a first guess that the builder moves.
 */
export function proposeMilestones(lines: readonly DraftLine[], startOn: string, completeBy: string): ProposedMilestone[] {
  const names = [...new Set(lines.map(({ milestone }) => milestone.trim()).filter((name) => name !== ''))];
  const weightOf = (name: string) => sum(lines.filter(({ milestone }) => milestone.trim() === name).map(({ scheduled }) => readScheduled(scheduled)).map((amount) => (typeof amount === 'number' ? amount : 0)));
  const weights = names.map(weightOf);
  const whole = BigInt(sum(weights));
  const start = Date.parse(`${startOn}T00:00:00Z`);
  const days = BigInt(Math.round((Date.parse(`${completeBy}T00:00:00Z`) - start) / DAY_MS));
  let before = 0n;
  return names.map((name, i) => {
    before += BigInt(weights[i] ?? 0);
    const share = whole === 0n ? (days * BigInt(i + 1)) / BigInt(names.length) : (days * before) / whole;
    return { name, plannedOn: new Date(start + Number(share) * DAY_MS).toISOString().slice(0, 10) };
  });
}
