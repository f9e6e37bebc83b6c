import { must } from '../arithmetic/index.ts';
import { dayNumber } from '../due/index.ts';
import { basisPoints, cents, minus, sum } from '../money/index.ts';
import { checkMonth, checkNear } from './months.ts';
import type { AheadLoan, CashAheadInput } from './types.ts';

const MOST_REVIEW_DAYS = 365;

/** What the draw's own checks don't see. Throws InvalidInput naming the field. */
export function checkAhead(input: CashAheadInput): void {
  const { asOf, lines, before, release, reviewDays, loan } = input;
  dayNumber(asOf, 'asOf');
  must(Number.isSafeInteger(reviewDays) && reviewDays >= 0 && reviewDays <= MOST_REVIEW_DAYS, 'reviewDays', reviewDays, `must be a whole number of days from 0 to ${MOST_REVIEW_DAYS}`);
  checkLines(input);
  const billed = sum(lines.map(({ workCents, onHandCents }) => sum([workCents, onHandCents])));
  const earned = minus(billed, cents(before.retainageHeldCents, 'before.retainageHeldCents'));
  must(earned === before.earnedCents, 'before.earnedCents', before.earnedCents, `must be what the lines have billed less retainage held, ${earned} cents`);
  for (const name of ['withheldCents', 'creditCents'] as const) must(cents(before[name], `before.${name}`) >= 0, `before.${name}`, before[name], 'must not be negative');
  checkMonth(asOf, release.finalMonth, 'release.finalMonth');
  if (release.substantial) {
    checkMonth(asOf, release.substantial.month, 'release.substantial.month');
    must(release.substantial.month <= release.finalMonth, 'release.substantial.month', release.substantial.month, 'must not lie after the final release');
    basisPoints(release.substantial.keepRate, 'release.substantial.keepRate');
  }
  input.unpaid.forEach((draw, i) => {
    checkNear(asOf, draw.dueOn, `unpaid.${i}.dueOn`);
    for (const name of ['homeownerCents', 'loanCents'] as const) must(cents(draw[name], `unpaid.${i}.${name}`) >= 0, `unpaid.${i}.${name}`, draw[name], 'must not be negative');
  });
  input.issued.forEach((change, i) => {
    checkNear(asOf, change.expectedOn, `issued.${i}.expectedOn`);
    cents(change.cents, `issued.${i}.cents`);
  });
  if (loan) checkLoan(loan, input);
}

function checkLines({ asOf, lines }: CashAheadInput): void {
  lines.forEach(({ scheduledCents, workCents, onHandCents, expected }, i) => {
    const left = minus(cents(scheduledCents, `lines.${i}.scheduledCents`), sum([workCents, onHandCents], `lines.${i}.workCents`), `lines.${i}`);
    must(scheduledCents < 0 ? left <= 0 : left >= 0, `lines.${i}.workCents`, workCents, "must not be billed past the line's scheduled value");
    if ('on' in expected) {
      checkNear(asOf, expected.on, `lines.${i}.expected.on`);
      return;
    }
    checkNear(asOf, expected.to, `lines.${i}.expected.to`);
    must(dayNumber(expected.from, `lines.${i}.expected.from`) <= dayNumber(expected.to), `lines.${i}.expected.to`, expected.to, 'must not lie before its start');
  });
}

function checkLoan(loan: AheadLoan, { lines }: CashAheadInput): void {
  for (const name of ['constructionCents', 'fundedCents'] as const) must(cents(loan[name], `loan.${name}`) >= 0, `loan.${name}`, loan[name], 'must not be negative');
  basisPoints(loan.holdbackRate, 'loan.holdbackRate');
  if (loan.equity.mode === 'proportion') basisPoints(loan.equity.rate, 'loan.equity.rate');
  else must(cents(loan.equity.remainingCents, 'loan.equity.remainingCents') >= 0, 'loan.equity.remainingCents', loan.equity.remainingCents, 'must not be negative');
  const ids = new Set<string>();
  loan.budget.forEach(({ id, budgetCents }, i) => {
    must(!ids.has(id), `loan.budget.${i}.id`, id, 'must be named once');
    ids.add(id);
    must(cents(budgetCents, `loan.budget.${i}.budgetCents`) >= 0, `loan.budget.${i}.budgetCents`, budgetCents, 'must not be negative');
  });
  lines.forEach(({ budgetLineId }, i) => must(!budgetLineId || ids.has(budgetLineId), `lines.${i}.budgetLineId`, budgetLineId, "must be a line of the lender's budget"));
}
