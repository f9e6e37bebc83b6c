import { given, money, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, cents, divideRounded, fixed, type BasisPoints, type Cents } from '../money/index.ts';
import { daysBetween, type BusinessDate } from './dates.ts';

export interface LateTerms {
  rate: BasisPoints;
  per: 'year' | 'month';
  /** Days of a year for a yearly rate. */
  basis: 360 | 365;
  graceDays: number;
  /** Within the grace nothing is owed; after it either from the due date (`delays` the claim only) or from the end of the grace (`forgives`). */
  grace: 'forgives' | 'delays';
  /** A state's ceiling on the yearly rate. */
  capRate?: BasisPoints;
}

export interface LatePayment {
  /** What was unpaid and not disputed. */
  amountCents: Cents;
  dueOn: BusinessDate;
  /** The day on which the payer started a transfer that later settled. */
  paidOn: BusinessDate;
}

const MONTHS = 12n;

/** Simple interest on a late payment, rounded once to the cent; the due date itself bears none. Throws InvalidInput. */
export function lateInterest(terms: LateTerms, payment: LatePayment): { days: number; interestCents: Cents; steps: Step } {
  basisPoints(terms.rate, 'terms.rate');
  if (terms.capRate !== undefined) basisPoints(terms.capRate, 'terms.capRate');
  must(terms.basis === 360 || terms.basis === 365, 'terms.basis', terms.basis, 'must be 360 or 365 days');
  must(Number.isSafeInteger(terms.graceDays) && terms.graceDays >= 0, 'terms.graceDays', terms.graceDays, 'must be a whole number of days');
  must(cents(payment.amountCents, 'amountCents') >= 0, 'amountCents', payment.amountCents, 'must not be negative');
  const late = Math.max(0, daysBetween(payment.dueOn, payment.paidOn));
  const days = late <= terms.graceDays ? 0 : terms.grace === 'forgives' ? late - terms.graceDays : late;
  const yearly = terms.per === 'year' ? BigInt(terms.rate) : BigInt(terms.rate) * MONTHS;
  const applied = terms.capRate === undefined ? yearly : yearly < BigInt(terms.capRate) ? yearly : BigInt(terms.capRate);
  const numerator = BigInt(payment.amountCents) * applied * BigInt(days);
  const interestCents = divideRounded(numerator, 10_000n * BigInt(terms.basis));
  const steps = step(
    'Late interest',
    `amount × yearly rate × days ÷ ${terms.basis}, rounded once`,
    money(interestCents),
    [given('amount', money(payment.amountCents)), given('yearly rate', rate(Number(applied))), given('days', quantity(days, 'days'))],
    fixed((numerator * 100n) / (10_000n * BigInt(terms.basis)), 4),
  );
  return { days, interestCents, steps };
}
