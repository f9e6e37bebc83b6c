import { dayCount, loanInBalance, loanInterest, type DayCountBasis } from '../../funding/index.ts';
import { sum } from '../../money/index.ts';
import { dollars, inCents, type Example } from './example.ts';

const pair = (start: string, end: string, days: number) => `{"start":"${start}","end":"${end}","days_30_360":${days}}`;
const counted = (start: string, end: string) => pair(start, end, dayCount('30/360', start, end).days);

/** ISDA's dates with the days between them as they are tabulated, the ones at the ends of months among them. */
const ISDA: [string, string, number][] = [
  ['2006-08-20', '2007-02-20', 180], ['2006-08-31', '2007-02-28', 178], ['2007-02-28', '2007-08-31', 183], ['2007-08-31', '2008-02-29', 179], ['2008-02-29', '2008-08-31', 182],
  ['2006-01-31', '2006-02-28', 28], ['2006-02-28', '2006-03-03', 5], ['2006-09-30', '2006-10-31', 30], ['2006-10-31', '2006-11-28', 28], ['2007-08-31', '2008-02-28', 178],
  ['2008-02-28', '2008-08-30', 182], ['2008-02-28', '2008-08-31', 183], ['2007-02-26', '2008-02-29', 363], ['2008-02-29', '2009-02-28', 359], ['2008-02-28', '2008-03-31', 33],
  ['2007-09-30', '2008-03-31', 180], ['2007-09-30', '2008-09-30', 360], ['2007-01-15', '2007-01-31', 16], ['2007-01-31', '2007-02-28', 28], ['2008-02-29', '2008-03-31', 32],
];

export const funding: readonly Example[] = [
  {
    id: 'WE-C1',
    what: 'days by 30/360, bond basis (all forty stand in the tests of funding)',
    source: 'ISDA example dates (2006 ISDA Definitions 4.16(f)) as tabulated at finance.fyicenter.com/1000400',
    figures: ISDA.map(([start, end, days]) => pair(start, end, days)),
    compute: () => ISDA.map(([start, end]) => counted(start, end)),
  },
  {
    id: 'WE-C3',
    what: 'a loan out of balance, own figures',
    source: 'the common "loan in balance" clause of public loan agreements; naihbr.org 2018-07',
    figures: ['242500.00', '244250.00', '1750.00', '"in_balance":false'],
    compute: () => {
      const b = loanInBalance({ contractSumTodayCents: sum(['61000.00', '98750.00', '84500.00'].map(inCents)), paidToDateCents: 0, openDirectivesCents: 0, undisbursedCents: sum([inCents('380000.00'), -inCents('142500.00')]), equityCommittedCents: inCents('5000.00'), contingencyCents: 0 });
      return [dollars(b.sourcesCents), dollars(b.needCents), dollars(b.shortfallCents), `"in_balance":${b.inBalance}`];
    },
  },
  {
    id: 'WE-C4',
    what: 'interest on what was drawn, by three counts of days; own figures',
    source: 'day counts as FIX field 1950 has them (2006 ISDA Definitions 4.16)',
    figures: ['1093.13', '1078.15', '1082.81'],
    compute: () => {
      const periods = [{ from: '2026-03-10', to: '2026-04-10', balanceCents: 4_500_000 }, { from: '2026-04-10', to: '2026-05-10', balanceCents: 11_250_000 }];
      return (['actual/360', 'actual/365', '30/360'] as DayCountBasis[]).map((basis) => dollars(loanInterest(basis, 825, periods).interestCents));
    },
  },
];
