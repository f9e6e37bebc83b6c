import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromDayNumber } from '../due/index.ts';
import { loanInBalance, loanInterest, mapBudget, whoPays, type BudgetPosition, type Equity, type WhoPaysInput } from './index.ts';

const Exact = Decimal.clone({ precision: 60 });
const cent = (value: Decimal) => value.toDecimalPlaces(0, Decimal.ROUND_HALF_UP);
const amount = fc.integer({ min: 0, max: 50_000_000 });
const rate = fc.integer({ min: 0, max: 10_000 });
const budget: fc.Arbitrary<BudgetPosition[]> = fc.array(fc.record({ id: fc.uuid(), name: fc.constant('Line'), budgetCents: amount, approvedNetCents: amount, allowedRate: rate }), { maxLength: 8 });
const equity: fc.Arbitrary<Equity> = fc.oneof(fc.record({ mode: fc.constant('first' as const), remainingCents: amount }), fc.record({ mode: fc.constant('proportion' as const), rate }));
const input: fc.Arbitrary<WhoPaysInput> = fc.record({
  dueNowCents: amount,
  ownLines: fc.record({ toDateCents: amount, beforeCents: amount }),
  equity,
  loan: fc.option(fc.record({ undisbursedCents: amount, fundedBeforeCents: amount, holdbackRate: fc.integer({ min: 0, max: 2000 }), budget })),
  unfunded: fc.constantFrom('homeowner_now' as const, 'carried' as const),
});

describe('funding against an independent decimal library', () => {
  it('splits a draw alike, whatever the order of the lender\'s lines', () => {
    fc.assert(
      fc.property(input, (given) => {
        const clamp = (value: Decimal, most: Decimal) => Decimal.max(0, Decimal.min(value, most));
        const due = new Exact(given.dueNowCents);
        const own = clamp(new Exact(given.ownLines.toDateCents).minus(given.ownLines.beforeCents), due);
        const rest = due.minus(own);
        const first = given.equity.mode === 'first' ? clamp(new Exact(given.equity.remainingCents), rest) : cent(rest.times(given.equity.rate).div(10_000));
        const { loan } = given;
        const offered = (loan?.budget ?? []).reduce((a, line) => a.plus(Decimal.min(line.approvedNetCents, cent(new Exact(line.budgetCents).times(line.allowedRate).div(10_000).times(10_000 - (loan?.holdbackRate ?? 0)).div(10_000)))), new Exact(0));
        const lent = loan ? Decimal.min(clamp(offered.minus(loan.fundedBeforeCents), new Exact(loan.undisbursedCents)), rest.minus(first)) : new Exact(0);
        const expected = { ownLinesCents: own.toNumber(), equityCents: first.toNumber(), loanCents: lent.toNumber(), notFundedCents: rest.minus(first).minus(lent).toNumber() };
        expect(whoPays(given)).toMatchObject(expected);
        if (loan) expect(whoPays({ ...given, loan: { ...loan, budget: [...loan.budget].reverse() } })).toMatchObject(expected);
      }),
      { numRuns: 300 },
    );
  });

  it('names the same shortfall, and keeps the total of two budgets', () => {
    fc.assert(
      fc.property(amount, amount, amount, amount, amount, amount, fc.array(fc.record({ lineId: fc.uuid(), budgetLineId: fc.constantFrom('a', 'b', 'c'), cents: fc.integer({ min: -9_000_000, max: 9_000_000 }) })), (contractSumTodayCents, paidToDateCents, openDirectivesCents, undisbursedCents, equityCommittedCents, contingencyCents, mapped) => {
        const need = new Exact(contractSumTodayCents).minus(paidToDateCents).plus(openDirectivesCents);
        const shortfall = Decimal.max(0, need.minus(undisbursedCents).minus(equityCommittedCents).minus(contingencyCents));
        expect(loanInBalance({ contractSumTodayCents, paidToDateCents, openDirectivesCents, undisbursedCents, equityCommittedCents, contingencyCents })).toMatchObject({ shortfallCents: shortfall.toNumber(), inBalance: shortfall.isZero() });
        expect([...mapBudget(['a', 'b', 'c'], mapped).values()].reduce((a, b) => a + b, 0)).toBe(mapped.reduce((a, line) => a + line.cents, 0));
      }),
    );
  });

  it('reckons the same interest over actual days, rounded once', () => {
    const period = fc.tuple(fc.integer({ min: 20_000, max: 22_000 }), fc.integer({ min: 0, max: 400 }), amount).map(([start, days, balanceCents]) => ({ from: fromDayNumber(start), to: fromDayNumber(start + days), balanceCents, days }));
    fc.assert(
      fc.property(fc.array(period, { maxLength: 10 }), rate, fc.constantFrom('actual/360' as const, 'actual/365' as const), (periods, yearlyRate, basis) => {
        const exact = periods.reduce((a, p) => a.plus(new Exact(p.balanceCents).times(p.days)), new Exact(0)).times(yearlyRate).div(10_000).div(basis === 'actual/360' ? 360 : 365);
        expect(loanInterest(basis, yearlyRate, periods).interestCents).toBe(cent(exact).toNumber());
      }),
    );
  });
});
