import { minus, sum } from '../money/index.ts';
import { checkAhead } from './check.ts';
import { monthStep, totalStep } from './explain.ts';
import { issuedParts } from './issued.ts';
import { monthDraws } from './month-draws.ts';
import { later, monthOf, monthsFrom } from './months.ts';
import { partsOf } from './parts.ts';
import { payersOf } from './payers.ts';
import type { CashAhead, CashAheadInput, CashMonth, Month } from './types.ts';

/**
 * What has still to be paid on a job, month by month, in cents: each part left to bill in the month of its milestone's forecast date +
 * review + payment term, net of retainage; retainage in the months of its release; deposit and credits off; approved and unpaid draws
 * when they are due (overdue ones now); issued changes as a band on top. A month's parts are taken together as one draw and computed
 * and split by the rules for draws, in the months' order. Rounding is the draw's own, on cumulative figures. The months add up to left to
 * bill + approved and unpaid − deposit not yet used (+ withheld − credit, where there are any), to the cent. A forecast, not a demand
 * for payment. Throws InvalidInput. Source: common practice, no source.
 */
export function cashAhead(input: CashAheadInput): CashAhead {
  checkAhead(input);
  const thisMonth = monthOf(input.asOf);
  const floored: CashAheadInput = { ...input, release: { ...input.release, finalMonth: later(input.release.finalMonth, thisMonth) } };
  const parts = partsOf(floored);
  const issued = issuedParts(floored);
  const lastDraw = [floored.release.finalMonth, ...parts.map(({ month }) => month)].reduce(later);
  const drawMonths = monthsFrom(thisMonth, lastDraw);
  const { draws, netBefore } = monthDraws(floored, drawMonths, parts);
  const payers = payersOf(input.loan, input.lines, draws, netBefore);
  const dueIn = (dueOn: string): Month => later(monthOf(dueOn), thisMonth);
  const lastMonth = [lastDraw, ...input.unpaid.map(({ dueOn }) => dueIn(dueOn)), ...issued.map(({ month }) => month)].reduce(later);

  let running = 0;
  let runningIssued = 0;
  const months = monthsFrom(thisMonth, lastMonth).map((month, i): CashMonth => {
    const unpaid = input.unpaid.filter(({ dueOn }) => dueIn(dueOn) === month);
    const own = payers[i] ?? null;
    const band = issued.filter((part) => part.month === month);
    const homeownerCents = sum([own?.homeownerCents ?? 0, ...unpaid.map((draw) => draw.homeownerCents)]);
    const loanCents = sum([own?.loanCents ?? 0, ...unpaid.map((draw) => draw.loanCents)]);
    const notFundedCents = own?.notFundedCents ?? 0;
    const totalCents = sum([homeownerCents, loanCents, notFundedCents]);
    const issuedCents = sum(band.map(({ cents }) => cents));
    running = sum([running, totalCents]);
    runningIssued = sum([runningIssued, issuedCents]);
    const figures = { homeownerCents, loanCents, notFundedCents, totalCents, runningCents: running, carriedCents: own?.carriedCents ?? 0, issuedCents, runningWithIssuedCents: sum([running, runningIssued]) };
    const before = i === 0 ? input.before : (draws[i - 1]?.computed.after ?? input.before);
    const steps = monthStep({ month, figures, draw: draws[i] ?? null, heldBeforeCents: before.retainageHeldCents, withheldBeforeCents: before.withheldCents, payers: own, carriedInCents: payers[i - 1]?.carriedCents ?? 0, unpaid, issued: band });
    return { month, ...figures, steps };
  });
  return totals(input, trimmed(months));
}

/** Without the months at the end in which nothing happens. */
function trimmed(months: readonly CashMonth[]): CashMonth[] {
  const last = months.findLastIndex(({ homeownerCents, loanCents, notFundedCents, issuedCents }) => [homeownerCents, loanCents, notFundedCents, issuedCents].some((cents) => cents !== 0));
  return months.slice(0, last + 1);
}

function totals({ lines, unpaid, deposit, before, issued }: CashAheadInput, months: CashMonth[]): CashAhead {
  const leftToBillCents = minus(sum(lines.map(({ scheduledCents }) => scheduledCents)), before.earnedCents);
  const approvedUnpaidCents = sum(unpaid.map(({ homeownerCents, loanCents }) => sum([homeownerCents, loanCents])));
  const depositLeftCents = minus(deposit.depositCents, before.depositUsedCents);
  const { withheldCents, creditCents } = before;
  const totalCents = minus(sum([leftToBillCents, approvedUnpaidCents, withheldCents]), sum([depositLeftCents, creditCents]));
  const ahead = { months, leftToBillCents, approvedUnpaidCents, depositLeftCents, withheldCents, creditCents, totalCents, issuedCents: sum(issued.map(({ cents }) => cents)) };
  return { ...ahead, steps: totalStep(ahead) };
}
