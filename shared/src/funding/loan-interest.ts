import { given, money, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, cents, divideRounded, fixed, type BasisPoints, type Cents } from '../money/index.ts';
import type { BusinessDate } from '../due/index.ts';
import { dayCount, type DayCountBasis } from './day-count.ts';

/** A balance that stood from one date to another. */
export interface BalancePeriod {
  from: BusinessDate;
  to: BusinessDate;
  balanceCents: Cents;
}

/** Simple interest on funded balances, from each funding date; rounded once for the whole period. Throws InvalidInput. */
export function loanInterest(basis: DayCountBasis, yearlyRate: BasisPoints, periods: readonly BalancePeriod[]): { interestCents: Cents; steps: Step } {
  basisPoints(yearlyRate, 'yearlyRate');
  let exact = 0n;
  let year = 360;
  const inputs = periods.map((period, i) => {
    const counted = dayCount(basis, period.from, period.to);
    must(counted.days >= 0, `periods.${i}.to`, period.to, 'must not lie before its start');
    must(cents(period.balanceCents, `periods.${i}.balanceCents`) >= 0, `periods.${i}.balanceCents`, period.balanceCents, 'must not be negative');
    year = counted.year;
    exact += BigInt(period.balanceCents) * BigInt(counted.days);
    return step(`${period.from} to ${period.to}`, 'balance × days', quantity(counted.days, 'days'), [given('balance', money(period.balanceCents))]);
  });
  const numerator = exact * BigInt(yearlyRate);
  const interestCents = divideRounded(numerator, 10_000n * BigInt(year));
  return { interestCents, steps: step('Interest', `balances × yearly rate × days ÷ ${year} (${basis}), rounded once`, money(interestCents), [...inputs, given('yearly rate', rate(yearlyRate))], fixed((numerator * 100n) / (10_000n * BigInt(year)), 4)) };
}
