import { given, money, step, type Step } from '../arithmetic/index.ts';
import { minus, type Cents } from '../money/index.ts';
import { monthName } from './months.ts';
import type { CashAhead, CashMonth, Month } from './types.ts';

type Parts = Pick<CashMonth, 'homeownerCents' | 'loanCents' | 'notFundedCents' | 'totalCents' | 'runningCents'>;

/** After − before, in one month. */
export interface MonthDifference extends Parts {
  month: Month;
}

export interface CashAheadComparison {
  /** Every month of either. */
  months: MonthDifference[];
  /** The months whose payments differ. */
  changed: Month[];
  totalCents: Cents;
  /** The last month in which something falls due; null where nothing does. */
  lastMonth: { before: Month | null; after: Month | null };
  steps: Step;
}

const NOTHING: Parts = { homeownerCents: 0, loanCents: 0, notFundedCents: 0, totalCents: 0, runningCents: 0 };

/** What a change does to the cash ahead: after − before, month by month, in cents. The band of issued changes is left out. */
export function compareCashAhead(before: CashAhead, after: CashAhead): CashAheadComparison {
  const was = byMonth(before);
  const is = byMonth(after);
  const names = [...new Set([...was.keys(), ...is.keys()])].sort();
  let wasBefore: Parts = NOTHING;
  let isBefore: Parts = NOTHING;
  const months = names.map((month): MonthDifference => {
    // a month that one of them doesn't have brings nothing, and its running total stands
    wasBefore = was.get(month) ?? { ...NOTHING, runningCents: wasBefore.runningCents };
    isBefore = is.get(month) ?? { ...NOTHING, runningCents: isBefore.runningCents };
    return { month, ...difference(wasBefore, isBefore) };
  });
  const changed = months.filter(({ homeownerCents, loanCents, notFundedCents }) => homeownerCents !== 0 || loanCents !== 0 || notFundedCents !== 0);
  const totalCents = minus(after.totalCents, before.totalCents);
  const steps = step('Change of cash ahead', 'after − before; the months add up to it', money(totalCents), [
    given('Before', money(before.totalCents)),
    given('After', money(after.totalCents)),
    ...changed.map((month) =>
      step(monthName(month.month), 'after − before', money(month.totalCents), [given('The homeowner', money(month.homeownerCents)), given('The loan', money(month.loanCents)), given('Not funded yet', money(month.notFundedCents))])),
  ]);
  return { months, changed: changed.map(({ month }) => month), totalCents, lastMonth: { before: before.months.at(-1)?.month ?? null, after: after.months.at(-1)?.month ?? null }, steps };
}

const byMonth = ({ months }: CashAhead): ReadonlyMap<Month, CashMonth> => new Map(months.map((month) => [month.month, month]));

const difference = (before: Parts, after: Parts): Parts => ({
  homeownerCents: minus(after.homeownerCents, before.homeownerCents),
  loanCents: minus(after.loanCents, before.loanCents),
  notFundedCents: minus(after.notFundedCents, before.notFundedCents),
  totalCents: minus(after.totalCents, before.totalCents),
  runningCents: minus(after.runningCents, before.runningCents),
});
