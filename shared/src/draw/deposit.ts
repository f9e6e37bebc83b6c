import { must } from '../arithmetic/index.ts';
import { cents, divideRounded, minus, type Cents } from '../money/index.ts';
import type { DepositTerms } from './types.ts';

export interface DepositInput {
  terms: DepositTerms;
  billedCents: Cents;
  contractSumTodayCents: Cents;
  usedBeforeCents: Cents;
  /** What would be due without the deposit. */
  dueCents: Cents;
  isFinal: boolean;
}

/** How much of the deposit this draw uses: at least 0 and never more than is due; the final draw takes the rest. Throws InvalidInput. */
export function useDeposit({ terms, billedCents, contractSumTodayCents, usedBeforeCents, dueCents, isFinal }: DepositInput): Cents {
  const { depositCents, use } = terms;
  must(cents(depositCents, 'deposit.depositCents') >= 0, 'deposit.depositCents', depositCents, 'must not be negative');
  must(usedBeforeCents >= 0 && usedBeforeCents <= depositCents, 'before.depositUsedCents', usedBeforeCents, 'must lie between 0 and the deposit');
  const left = minus(depositCents, usedBeforeCents);
  // the rest of it belongs to the final draw, as a credit where it is more than is due
  if (isFinal) return left;
  const inProportion = contractSumTodayCents > 0 ? Math.min(depositCents, divideRounded(BigInt(depositCents) * BigInt(billedCents), BigInt(contractSumTodayCents))) : 0;
  const target = use === 'first' ? depositCents : inProportion;
  return Math.max(0, Math.min(minus(target, usedBeforeCents), dueCents));
}
