import { whoPays, type Equity, type WhoPays } from '../funding/index.ts';
import { atLeastZero, minus, sum, type Cents } from '../money/index.ts';
import type { MonthDraw } from './month-draws.ts';
import type { AheadLine, AheadLoan } from './types.ts';

/** Who pays one month's draw. */
export interface MonthPayers {
  homeownerCents: Cents;
  loanCents: Cents;
  notFundedCents: Cents;
  /** Not funded and carried to the next month. */
  carriedCents: Cents;
  /** Null where there is no loan: then the homeowner pays. */
  who: WhoPays | null;
}

/**
 * Splits the months in their order, each as one draw: equity, what is undisbursed and what was funded are handed from month to month, and
 * the lender is presumed to take the work to be as far as it is billed. What nobody funds stays in its month, or is added to the next
 * month's draw where the contract carries it; the last month carries nothing on. Throws InvalidInput.
 */
export function payersOf(loan: AheadLoan | null, lines: readonly AheadLine[], draws: readonly MonthDraw[], netBefore: readonly Cents[]): MonthPayers[] {
  let equity: Equity = loan?.equity ?? { mode: 'first', remainingCents: 0 };
  let funded = loan?.fundedCents ?? 0;
  let carried = 0;
  let ownBefore = ownOf(lines, netBefore);
  return draws.map(({ computed, netToDate }, i): MonthPayers => {
    const dueNowCents = sum([computed.summary.dueNowCents, carried]);
    // a credit that no draw is left to take comes back to the homeowner
    const giveBack = i === draws.length - 1 ? computed.summary.creditCarriedCents : 0;
    if (!loan) return { homeownerCents: minus(dueNowCents, giveBack), loanCents: 0, notFundedCents: 0, carriedCents: 0, who: null };
    const own = ownOf(lines, netToDate);
    const who = whoPays({
      dueNowCents,
      ownLines: { toDateCents: own, beforeCents: ownBefore },
      equity,
      loan: { undisbursedCents: atLeastZero(minus(loan.constructionCents, funded)), fundedBeforeCents: funded, holdbackRate: loan.holdbackRate, budget: positions(loan, lines, netToDate) },
      unfunded: loan.unfunded,
    });
    ownBefore = own;
    funded = sum([funded, who.loanCents]);
    if (equity.mode === 'first') equity = { mode: 'first', remainingCents: minus(equity.remainingCents, who.equityCents) };
    const carries = loan.unfunded === 'carried' && i < draws.length - 1;
    carried = carries ? who.notFundedCents : 0;
    return { homeownerCents: minus(sum([who.ownLinesCents, who.equityCents]), giveBack), loanCents: who.loanCents, notFundedCents: carries ? 0 : who.notFundedCents, carriedCents: carried, who };
  });
}

const ownOf = (lines: readonly AheadLine[], net: readonly Cents[]): Cents => sum(lines.map(({ budgetLineId }, i) => (budgetLineId ? 0 : (net[i] ?? 0))));

function positions({ budget }: AheadLoan, lines: readonly AheadLine[], net: readonly Cents[]) {
  const totals = new Map<string, Cents>();
  lines.forEach(({ budgetLineId }, i) => {
    if (budgetLineId) totals.set(budgetLineId, sum([totals.get(budgetLineId) ?? 0, net[i] ?? 0]));
  });
  return budget.map(({ id, name, budgetCents }) => ({ id, name, budgetCents, approvedNetCents: totals.get(id) ?? 0, allowedRate: 10_000 }));
}
