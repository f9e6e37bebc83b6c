import type { ContractTerms } from '@tallypole/shared/schemas/jobs';

/** The contract's completion date, moved by approved days only: calendar or working days, as the contract counts them. */
export function completionDate(terms: Pick<ContractTerms, 'completeBy' | 'dayKind'>, approvedDays: number): string {
  const day = new Date(`${terms.completeBy}T00:00:00Z`);
  for (let left = approvedDays; left > 0; ) {
    day.setUTCDate(day.getUTCDate() + 1);
    if (terms.dayKind === 'calendar' || (day.getUTCDay() !== 0 && day.getUTCDay() !== 6)) left -= 1;
  }
  return day.toISOString().slice(0, 10);
}
