import { sum, type BasisPoints, type Cents } from '../money/index.ts';
import { workFromPercent } from './draft.ts';

export interface SeenLine {
  scheduledCents: Cents;
  /** Billed as work in place, to date. */
  workCents: Cents;
  /** How far its milestone was last seen from outside the firm; null for general lines, which follow time and prove themselves. */
  seenRate: BasisPoints | null;
}

/**
 * How much of what is billed was seen in place: of each line what is billed, at most its scheduled value at the last seen percent (of a
 * credit at least, since it is negative: the credit is owed as far as the work was seen). Throws InvalidInput.
 */
export const seenOfBilled = (lines: readonly SeenLine[]): Cents =>
  sum(lines.map(({ scheduledCents, workCents, seenRate }) => (seenRate === null ? workCents : Math.min(workCents, workFromPercent(scheduledCents, seenRate, 'seenRate')))));
