import { given, money, step, type Step } from '../arithmetic/index.ts';
import { atLeastZero, cents, divideRounded, minus, sum, type Cents } from '../money/index.ts';
import { checkDraw } from './check-lines.ts';
import { useDeposit } from './deposit.ts';
import { retain, type Retainage } from './retainage.ts';
import type { ComputedDraw, ComputedLine, DrawInput, DrawLine, DrawSummary } from './types.ts';

/**
 * A draw from cumulative figures: per line what is billed, this draw's part and what is left; the sum down to due now and left to
 * bill. All amounts in cents; retainage is rounded once over the whole draw, the deposit once. Recomputing a draw from its approved
 * figures gives the same figures. Throws InvalidInput naming the field.
 */
export function computeDraw(input: DrawInput, options: { steps?: boolean } = {}): ComputedDraw {
  const contractSumTodayCents = sum([input.contractSumAsSignedCents, input.changesApprovedCents], 'contractSumToday');
  checkDraw(input, contractSumTodayCents);
  const { lines, before } = input;
  const workInPlaceCents = sum(lines.map((line) => line.workCents));
  const materialsOnHandCents = sum(lines.map((line) => line.onHandCents));
  const billedCents = sum([workInPlaceCents, materialsOnHandCents]);
  const retainage = retain({ ...input, terms: input.retainage, contractSumTodayCents, latchedCents: before.latchedCents, reserveOver: input.reserveOver ?? false });
  const earnedToDateCents = minus(billedCents, retainage.heldCents);
  // withheld more is paid less now, and the other way round when it is let go
  const withheldNow = minus(input.withheldCents, before.withheldCents);
  const beforeDeposit = minus(minus(minus(earnedToDateCents, before.earnedCents), withheldNow), before.creditCents);
  const depositUsedNowCents = useDeposit({
    terms: input.deposit,
    billedCents,
    contractSumTodayCents,
    usedBeforeCents: before.depositUsedCents,
    dueCents: atLeastZero(beforeDeposit),
    isFinal: input.isFinal,
  });
  const due = minus(beforeDeposit, depositUsedNowCents);
  const summary: DrawSummary = {
    contractSumAsSignedCents: input.contractSumAsSignedCents,
    changesApprovedCents: input.changesApprovedCents,
    contractSumTodayCents,
    workInPlaceCents,
    materialsOnHandCents,
    retainageHeldCents: retainage.heldCents,
    earnedToDateCents,
    billedBeforeCents: before.earnedCents,
    withheldCents: input.withheldCents,
    depositUsedToDateCents: sum([before.depositUsedCents, depositUsedNowCents]),
    depositUsedNowCents,
    creditBeforeCents: before.creditCents,
    dueNowCents: atLeastZero(due),
    creditCarriedCents: atLeastZero(cents(-due)),
    leftToBillCents: minus(contractSumTodayCents, earnedToDateCents),
  };
  return {
    lines: lines.map((line, i) => computeLine(line, retainage.perLine[i] ?? 0)),
    summary,
    after: {
      earnedCents: earnedToDateCents,
      retainageHeldCents: retainage.heldCents,
      depositUsedCents: summary.depositUsedToDateCents,
      withheldCents: input.withheldCents,
      creditCents: summary.creditCarriedCents,
      latchedCents: retainage.latchedCents,
      throughOn: input.throughOn,
    },
    steps: options.steps === false ? null : explain(input, summary, retainage),
  };
}

function computeLine(line: DrawLine, retainageCents: Cents): ComputedLine {
  const billedCents = sum([line.workCents, line.onHandCents]);
  return {
    id: line.id,
    billedCents,
    thisDrawCents: minus(billedCents, sum([line.approvedWorkCents, line.approvedOnHandCents])),
    leftCents: minus(line.scheduledCents, billedCents),
    workRate: shareOf(line.workCents, line.scheduledCents),
    billedRate: shareOf(billedCents, line.scheduledCents),
    retainageCents,
  };
}

const WHOLE = 10_000n;
function shareOf(part: Cents, whole: Cents): number {
  if (whole === 0) return 0;
  const sign = whole < 0 ? -1n : 1n;
  return divideRounded(BigInt(part) * WHOLE * sign, BigInt(whole) * sign);
}

function explain(input: DrawInput, summary: DrawSummary, retainage: Retainage): NonNullable<ComputedDraw['steps']> {
  const contractSumToday = step('Contract sum today', 'as signed + changes approved', money(summary.contractSumTodayCents), [
    given('As signed', money(summary.contractSumAsSignedCents)),
    given('Changes approved', money(summary.changesApprovedCents)),
  ]);
  const perLine = (name: 'workCents' | 'onHandCents') =>
    input.lines.filter((line) => line[name] !== 0).map((line) => given(line.description, money(line[name]), { record: 'line', id: line.id, label: line.description }));
  const retainageHeld = retainage.explain();
  const earnedToDate = step('Earned to date', 'work in place + materials on hand − retainage held', money(summary.earnedToDateCents), [
    step('Work in place', 'sum of the lines', money(summary.workInPlaceCents), perLine('workCents')),
    step('Materials on hand', 'sum of the lines', money(summary.materialsOnHandCents), perLine('onHandCents')),
    retainageHeld,
  ]);
  const parts: Step[] = [earnedToDate, given('Billed before', money(summary.billedBeforeCents))];
  if (input.withheldCents !== 0 || input.before.withheldCents !== 0) {
    parts.push(given('Withheld to date', money(summary.withheldCents)), given('Withheld before', money(input.before.withheldCents)));
  }
  if (summary.creditBeforeCents !== 0) parts.push(given('Credit from the last draw', money(summary.creditBeforeCents)));
  if (input.deposit.depositCents !== 0) {
    const rule = input.isFinal ? 'the final draw takes the rest' : input.deposit.use === 'first' ? 'used up first, at most what is due' : 'deposit × billed ÷ contract sum today − used before, at most what is due';
    parts.push(step('Deposit used in this draw', rule, money(summary.depositUsedNowCents), [given('Deposit', money(input.deposit.depositCents)), given('Used before', money(input.before.depositUsedCents))]));
  }
  const carried = summary.creditCarriedCents > 0;
  const dueNow = step('Due now', carried ? 'less than zero: carried to the next draw as a credit' : 'earned to date − billed before, less what is withheld and the deposit used', money(summary.dueNowCents), parts);
  const leftToBill = step('Left to bill', 'contract sum today − earned to date', money(summary.leftToBillCents), [contractSumToday, earnedToDate]);
  return { contractSumToday, retainageHeld, earnedToDate, dueNow, leftToBill };
}
