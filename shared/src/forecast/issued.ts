import { given, money, rate, step, type Step } from '../arithmetic/index.ts';
import { minus, percentExact, percentOf, type Cents } from '../money/index.ts';
import { later, monthOf } from './months.ts';
import { dueOf } from './parts.ts';
import type { CashAheadInput, Month } from './types.ts';

/** What an issued change would bring into a month. */
export interface IssuedPart {
  month: Month;
  cents: Cents;
  steps: Step;
}

/**
 * The band on top: each issued change as if it were signed, net of the rate on work, rounded per change, and what is retained on it in the
 * month of the last release. Step, cap and reserve are left aside, since nothing is agreed yet. Throws InvalidInput.
 */
export function issuedParts(input: CashAheadInput): IssuedPart[] {
  const finalMonth = later(input.release.finalMonth, monthOf(input.asOf));
  return input.issued.flatMap(({ id, label, cents, expectedOn, exempt }): IssuedPart[] => {
    const due = dueOf(input, expectedOn);
    const workRate = exempt || due.month >= finalMonth ? 0 : input.retainage.workRate;
    const retained = percentOf(cents, workRate);
    const price = given('Its price', money(cents), { record: 'change', id, label });
    const kept = step('Retainage', 'rate × price, rounded', money(retained), [price, given('Rate on work', rate(workRate))], percentExact(cents, workRate));
    const now = { month: due.month, cents: minus(cents, retained), steps: step(label, 'if it is signed: its price less retainage', money(minus(cents, retained)), [price, kept, due.steps]) };
    return retained === 0 ? [now] : [now, { month: finalMonth, cents: retained, steps: step(`${label}, retainage`, 'if it is signed: let go with the rest', money(retained), [kept]) }];
  });
}
