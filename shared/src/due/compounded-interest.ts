import { given, money, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, cents, divideRounded, fixed, type BasisPoints, type Cents } from '../money/index.ts';

export interface CompoundedLate {
  /** What was unpaid and not disputed. */
  amountCents: Cents;
  /** Per year. */
  rate: BasisPoints;
  /** Whole months late, each of which adds its interest to the sum; at most 12. */
  months: number;
  /** Days late after them, at a 360th of a year each; at most 30. */
  days: number;
}

const MOST_MONTHS = 12;
const MOST_DAYS = 30;
/** A month's and a day's share of a yearly rate in basis points. */
const MONTH = 10_000n * 12n;
const DAY = 10_000n * 360n;

/**
 * Interest on a late payment that compounds by month, as the federal prompt payment rule reckons it: amount × (1 + r ÷ 12)^months ×
 * (1 + r ÷ 360 × days) − amount, rounded once to the cent (5 CFR 1315.17(c); for up to one year, 1315.10(a)). Months and days are
 * given, not read off two dates: the agency's own example counts the first day of the last part. Throws InvalidInput.
 */
export function compoundedLateInterest(late: CompoundedLate): { interestCents: Cents; steps: Step } {
  must(cents(late.amountCents, 'amountCents') >= 0, 'amountCents', late.amountCents, 'must not be negative');
  const yearly = BigInt(basisPoints(late.rate, 'rate'));
  must(Number.isSafeInteger(late.months) && late.months >= 0 && late.months <= MOST_MONTHS, 'months', late.months, `must be a whole number from 0 to ${MOST_MONTHS}`);
  must(Number.isSafeInteger(late.days) && late.days >= 0 && late.days <= MOST_DAYS, 'days', late.days, `must be a whole number from 0 to ${MOST_DAYS}`);
  const months = BigInt(late.months);
  const whole = MONTH ** months * DAY;
  const grown = (MONTH + yearly) ** months * (DAY + yearly * BigInt(late.days));
  const numerator = BigInt(late.amountCents) * (grown - whole);
  const interestCents = divideRounded(numerator, whole, 'interest');
  const inputs = [given('amount', money(late.amountCents)), given('yearly rate', rate(late.rate)), given('months', quantity(late.months, 'months')), given('days', quantity(late.days, 'days'))];
  const rule = 'amount × (1 + rate ÷ 12) for each month × (1 + rate ÷ 360 × days) − amount, rounded once';
  return { interestCents, steps: step('Late interest', rule, money(interestCents), inputs, fixed((numerator * 1_000_000n) / whole, 8)) };
}
