import { given, quantity, step, type Step } from '../arithmetic/index.ts';
import { wholeNumber } from './item.ts';
import { ceilDivide, countOf, inchesText, lengthOf, lengthOrNone, type Inches } from './length.ts';
import { stockLength } from './lumber.ts';

export interface MembersInput {
  /** Out to out, across the members. */
  run: Inches;
  /** On center. */
  spacing: Inches;
  /** Spaces between bearing lines; members that lap over a girder count in each. */
  bays: number;
  /** Doubled members, trimmers and the like, named on the plan. */
  extras: number;
}

/** Members on center: in each bay ceil(run ÷ spacing) + 1, and the named extras. 36 ft at 16 in is 28. Throws InvalidInput. */
export function membersOnCenter({ run, spacing, bays, extras }: MembersInput): { count: number; perBay: number; steps: Step } {
  const perBay = countOf(ceilDivide(lengthOf(run, 'run'), lengthOf(spacing, 'spacing'))) + 1;
  const count = perBay * wholeNumber(bays, 'bays', 1, 20) + wholeNumber(extras, 'extras', 0, 1_000);
  const steps = step('Members', 'run ÷ spacing rounded up, and one more, in each bay; and the named extras', quantity(count, 'ea'), [
    given('Run', quantity(run, 'in')),
    given('On center', quantity(spacing, 'in')),
    given('Bays', quantity(bays, 'ea')),
    given('Extras', quantity(extras, 'ea')),
  ]);
  return { count, perBay, steps };
}

export interface MemberLengthInput {
  clearSpan: Inches;
  /** Bearing at both ends together. */
  bearings: Inches;
  /** Beyond the bearing, where members of two bays lap over a girder. */
  lap: Inches;
  /** Feet. */
  stock: readonly number[];
}

/** Length of a member = clear span + bearings + lap, and the next stock length, in feet. Throws InvalidInput; `field` names the span there. */
export function memberLength({ clearSpan, bearings, lap, stock }: MemberLengthInput, field = 'clearSpan'): { length: Inches; stockFeet: number; steps: Step } {
  const needed = lengthOf(clearSpan, field) + lengthOrNone(bearings, 'bearings') + lengthOrNone(lap, 'lap');
  const stockFeet = stockLength(needed, stock, field);
  const length = inchesText(needed);
  const steps = step('Bought as', 'clear span + bearings + lap, in the next stock length', quantity(stockFeet, 'ft'), [
    given('Clear span', quantity(clearSpan, 'in')),
    given('Bearings', quantity(bearings, 'in')),
    given('Lap', quantity(lap, 'in')),
    given('Length', quantity(length, 'in')),
  ]);
  return { length, stockFeet, steps };
}

