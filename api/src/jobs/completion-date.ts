import { addDays } from '@tallypole/shared/due';
import type { ContractTerms } from '@tallypole/shared/schemas/jobs';

/** The contract's completion date, moved by approved days only: calendar or working days, as the contract counts them. */
export function completionDate(terms: Pick<ContractTerms, 'completeBy' | 'dayKind'>, approvedDays: number): string {
  return addDays(terms.dayKind, terms.completeBy, approvedDays);
}
