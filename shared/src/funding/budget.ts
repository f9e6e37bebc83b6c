import { must } from '../arithmetic/index.ts';
import { cents, sum, type Cents } from '../money/index.ts';

export interface MappedLine {
  lineId: string;
  budgetLineId: string;
  cents: Cents;
}

/** The builder's lines summed on the lender's budget, many to one; both totals always agree. Throws InvalidInput for a line that maps nowhere. */
export function mapBudget(budgetLineIds: readonly string[], lines: readonly MappedLine[]): Map<string, Cents> {
  const totals = new Map<string, Cents>(budgetLineIds.map((id) => [id, 0]));
  lines.forEach((line, i) => {
    const before = totals.get(line.budgetLineId);
    must(before !== undefined, `lines.${i}.budgetLineId`, line.budgetLineId, "must be a line of the lender's budget");
    totals.set(line.budgetLineId, sum([before, cents(line.cents, `lines.${i}.cents`)]));
  });
  return totals;
}
