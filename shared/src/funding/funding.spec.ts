import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { dayCount, loanInBalance, loanInterest, mapBudget, whoPays, type WhoPaysInput } from './index.ts';

const budget = [{ id: 'frame', name: 'Frame', budgetCents: 5_000_000, approvedNetCents: 2_000_000, allowedRate: 10_000 }];
const base: WhoPaysInput = {
  dueNowCents: 2_000_000,
  ownLines: { toDateCents: 0, beforeCents: 0 },
  equity: { mode: 'first', remainingCents: 0 },
  loan: { undisbursedCents: 30_000_000, fundedBeforeCents: 0, holdbackRate: 0, budget },
  unfunded: 'homeowner_now',
};

describe('who pays a draw', () => {
  it('always adds up to what is due, and no part is negative', () => {
    const cents = fc.integer({ min: 0, max: 50_000_000 });
    const any = fc.record({
      dueNowCents: cents,
      ownLines: fc.record({ toDateCents: cents, beforeCents: cents }),
      equity: fc.oneof(fc.record({ mode: fc.constant('first' as const), remainingCents: cents }), fc.record({ mode: fc.constant('proportion' as const), rate: fc.integer({ min: 0, max: 10_000 }) })),
      loan: fc.option(fc.record({ undisbursedCents: cents, fundedBeforeCents: cents, holdbackRate: fc.integer({ min: 0, max: 2000 }), budget: fc.array(fc.record({ id: fc.uuid(), name: fc.constant('x'), budgetCents: cents, approvedNetCents: cents, allowedRate: fc.integer({ min: 0, max: 10_000 }) }), { maxLength: 8 }) })),
      unfunded: fc.constantFrom('homeowner_now' as const, 'carried' as const),
    });
    fc.assert(
      fc.property(any, (input) => {
        const p = whoPays(input);
        expect(p.ownLinesCents + p.equityCents + p.loanCents + p.notFundedCents).toBe(input.dueNowCents);
        for (const part of [p.ownLinesCents, p.equityCents, p.loanCents, p.notFundedCents]) expect(part).toBeGreaterThanOrEqual(0);
        expect(p.homeownerNowCents + p.loanCents + (input.unfunded === 'carried' ? p.notFundedCents : 0)).toBe(input.dueNowCents);
        if (input.loan) expect(p.loanCents).toBeLessThanOrEqual(input.loan.undisbursedCents);
      }),
    );
  });

  it('asks the homeowner for own lines and equity first, then the loan, then the homeowner again', () => {
    const p = whoPays({ ...base, ownLines: { toDateCents: 300_000, beforeCents: 100_000 }, equity: { mode: 'first', remainingCents: 500_000 }, loan: { undisbursedCents: 30_000_000, fundedBeforeCents: 1_000_000, holdbackRate: 0, budget } });
    expect(p).toMatchObject({ ownLinesCents: 200_000, equityCents: 500_000, loanCents: 1_000_000, notFundedCents: 300_000, homeownerNowCents: 1_000_000 });
  });

  it('lets the lender hold back, allow part of a line, and pay no more than is undisbursed', () => {
    const loan = (more: object) => whoPays({ ...base, loan: { undisbursedCents: 30_000_000, fundedBeforeCents: 0, holdbackRate: 0, budget, ...more } }).loanCents;
    expect(loan({ holdbackRate: 1000, budget: [{ ...budget[0], allowedRate: 4000 }] })).toBe(1_800_000);
    expect(loan({ undisbursedCents: 700_000 })).toBe(700_000);
  });
});

describe('the loan in balance', () => {
  // The common "loan in balance" clause of public loan agreements, own figures: 380,000 less 142,500 disbursed, a deposit of 5,000,
  // 244,250 to complete: 1,750 are missing.
  it('names the shortfall', () => {
    expect(loanInBalance({ contractSumTodayCents: 24_425_000, paidToDateCents: 0, openDirectivesCents: 0, undisbursedCents: 23_750_000, equityCommittedCents: 500_000, contingencyCents: 0 })).toMatchObject({ shortfallCents: 175_000, inBalance: false });
  });
  it('maps many lines to one budget line and keeps the total', () => {
    const totals = mapBudget(['a', 'b'], [{ lineId: '1', budgetLineId: 'a', cents: 5 }, { lineId: '2', budgetLineId: 'a', cents: 7 }, { lineId: '3', budgetLineId: 'b', cents: 1 }]);
    expect([...totals]).toEqual([['a', 12], ['b', 1]]);
  });
});

describe('days and interest', () => {
  // ISDA's published example dates for 30/360 bond basis (2006 ISDA Definitions 4.16(f)), as tabulated at finance.fyicenter.com/1000400.
  it.each([
    ['2006-08-20', '2007-02-20', 180],
    ['2007-02-20', '2007-08-20', 180],
    ['2007-08-20', '2008-02-20', 180],
    ['2008-02-20', '2008-08-20', 180],
    ['2008-08-20', '2009-02-20', 180],
    ['2009-02-20', '2009-08-20', 180],
    ['2006-08-31', '2007-02-28', 178],
    ['2007-02-28', '2007-08-31', 183],
    ['2007-08-31', '2008-02-29', 179],
    ['2008-02-29', '2008-08-31', 182],
    ['2008-08-31', '2009-02-28', 178],
    ['2009-02-28', '2009-08-31', 183],
    ['2006-01-31', '2006-02-28', 28],
    ['2006-01-30', '2006-02-28', 28],
    ['2006-02-28', '2006-03-03', 5],
    ['2006-02-14', '2006-02-28', 14],
    ['2006-09-30', '2006-10-31', 30],
    ['2006-10-31', '2006-11-28', 28],
    ['2007-08-31', '2008-02-28', 178],
    ['2008-02-28', '2008-08-28', 180],
    ['2008-02-28', '2008-08-30', 182],
    ['2008-02-28', '2008-08-31', 183],
    ['2007-02-26', '2008-02-28', 362],
    ['2007-02-26', '2008-02-29', 363],
    ['2008-02-29', '2009-02-28', 359],
    ['2008-02-28', '2008-03-30', 32],
    ['2008-02-28', '2008-03-31', 33],
    ['2007-01-15', '2007-01-30', 15],
    ['2007-01-15', '2007-02-15', 30],
    ['2007-01-15', '2007-07-15', 180],
    ['2007-09-30', '2008-03-31', 180],
    ['2007-09-30', '2007-10-31', 30],
    ['2007-09-30', '2008-09-30', 360],
    ['2007-01-15', '2007-01-31', 16],
    ['2007-01-31', '2007-02-28', 28],
    ['2007-02-28', '2007-03-31', 33],
    ['2007-02-14', '2007-02-28', 14],
    ['2008-02-29', '2008-03-30', 31],
    ['2008-02-29', '2008-03-31', 32],
    ['2007-02-28', '2007-03-05', 7],
  ])('counts %s to %s as %i days', (from, to, days) => expect(dayCount('30/360', from, to).days).toBe(days));

  // Own figures by the published day counts: 45,000.00 and 112,500.00 at 8.25 %.
  it('gives three answers for three bases', () => {
    const periods = [{ from: '2026-03-10', to: '2026-04-10', balanceCents: 4_500_000 }, { from: '2026-04-10', to: '2026-05-10', balanceCents: 11_250_000 }];
    expect((['actual/360', 'actual/365', '30/360'] as const).map((basis) => loanInterest(basis, 825, periods).interestCents)).toEqual([109_313, 107_815, 108_281]);
  });
});

describe('bad input to funding', () => {
  const fails: [string, () => unknown, string][] = [
    ['a negative due', () => whoPays({ ...base, dueNowCents: -1 }), 'dueNowCents'],
    ['negative equity', () => whoPays({ ...base, equity: { mode: 'first', remainingCents: -1 } }), 'equity.remainingCents'],
    ['a proportion over 100 %', () => whoPays({ ...base, equity: { mode: 'proportion', rate: 10_001 } }), 'equity.rate'],
    ['a holdback over 100 %', () => whoPays({ ...base, loan: { undisbursedCents: 1, fundedBeforeCents: 0, holdbackRate: 10_001, budget } }), 'loan.holdbackRate'],
    ['more allowed than the line', () => whoPays({ ...base, loan: { undisbursedCents: 1, fundedBeforeCents: 0, holdbackRate: 0, budget: [{ id: 'a', name: 'a', budgetCents: 1, approvedNetCents: 1, allowedRate: 10_001 }] } }), 'loan.budget.0.allowedRate'],
    ['a negative undisbursed sum', () => whoPays({ ...base, loan: { undisbursedCents: -1, fundedBeforeCents: 0, holdbackRate: 0, budget } }), 'loan.undisbursedCents'],
    ['negative contingency', () => loanInBalance({ contractSumTodayCents: 1, paidToDateCents: 0, openDirectivesCents: 0, undisbursedCents: 0, equityCommittedCents: 0, contingencyCents: -1 }), 'contingencyCents'],
    ['a line that maps nowhere', () => mapBudget(['a'], [{ lineId: '1', budgetLineId: 'b', cents: 1 }]), 'lines.0.budgetLineId'],
    ['a period that ends before it begins', () => loanInterest('actual/365', 800, [{ from: '2026-05-01', to: '2026-04-01', balanceCents: 1 }]), 'periods.0.to'],
    ['a negative balance', () => loanInterest('actual/365', 800, [{ from: '2026-05-01', to: '2026-06-01', balanceCents: -1 }]), 'periods.0.balanceCents'],
    ['a day that does not exist', () => dayCount('30/360', '2026-02-30', '2026-03-01'), 'from'],
    ['a rate over 100 %', () => loanInterest('30/360', 10_001, []), 'yearlyRate'],
  ];
  it.each(fails)('refuses %s and names the field', (_, run, field) => {
    expect(run).toThrow(InvalidInput);
    expect(run).toThrow(expect.objectContaining({ field }) as Error);
  });
});
