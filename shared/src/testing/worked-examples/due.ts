import { addCalendarDays, compoundedLateInterest, dueDate, isBusinessDay, lateInterest, type LateTerms } from '../../due/index.ts';
import { dollars, type Example } from './example.ts';

const federal: LateTerms = { rate: 650, per: 'year', basis: 360, graceDays: 0, grace: 'forgives' };
const tenDays = (rate: number) => dollars(lateInterest({ ...federal, rate }, { amountCents: 150_000, dueOn: '2026-04-01', paidOn: '2026-04-11' }).interestCents);
/** A monthly rate over whole months of thirty days. */
const monthly = (rate: number, amountCents: number, months: number) =>
  dollars(lateInterest({ ...federal, rate, per: 'month' }, { amountCents, dueOn: '2026-01-01', paidOn: addCalendarDays('2026-01-01', 30 * months) }).interestCents);
const holiday = (day: string) => `"${day}":{"federal_office_closed":${!isBusinessDay('office', day)},"fed_banks_open":${isBusinessDay('bank', day)}}`;

export const due: readonly Example[] = [
  { id: 'WE-A1', what: 'simple daily interest', source: '5 CFR 1315.17(b); Fiscal Service, prompt-payment calculator page', figures: ['2.71'], compute: () => [tenDays(650)] },
  {
    id: 'WE-A2',
    what: 'interest that compounds by month',
    source: '5 CFR 1315.17(c); Fiscal Service, monthly-interest page (2023-06-30)',
    figures: ['18.83', '18.82509375'],
    compute: () => {
      const { interestCents, steps } = compoundedLateInterest({ amountCents: 150_000, rate: 600, months: 2, days: 15 });
      return [dollars(interestCents), steps.exact ?? ''];
    },
  },
  {
    id: 'WE-A3',
    what: 'a printed slip that is not repeated: 6.625 % lies between two whole rates that both give the exact figure, not the printed one',
    source: 'Fiscal Service, simple-interest page, later version',
    figures: ['2.76', '2.76'],
    compute: () => [tenDays(662), tenDays(663)],
  },
  {
    id: 'WE-A12',
    what: 'state charges for whole months, as months of thirty days; the statutes print no count for parts of months',
    source: 'Cal. Civ. Code 8800(c), 8818(a); Tex. Prop. Code 28.006(b); NY GBL 756-c',
    figures: ['480.00', '375.00', '60.00'],
    compute: () => [monthly(200, 800_000, 3), monthly(150, 1_250_000, 2), monthly(100, 600_000, 1)],
  },
  {
    id: 'WE-A14',
    what: 'a due date on a holiday, and the day it may still be paid',
    source: 'FAR 32.904(d)(1)(i); 5 CFR 1315.4(h)',
    figures: ['2026-07-04', '2026-07-06'],
    compute: () => [false, true].map((moveToBusinessDay) => dueDate({ startsAt: 'request', days: 14, dayKind: 'calendar', calendar: 'office', moveToBusinessDay }, '2026-06-20').dueOn),
  },
  {
    id: 'WE-I1',
    what: 'holidays that close offices, banks or both',
    source: '5 USC 6103(a), (b); Federal Reserve K.8',
    figures: ['"2026-07-03":{"federal_office_closed":true,"fed_banks_open":true}', '"2027-07-05":{"federal_office_closed":true,"fed_banks_open":false}', '"2027-06-18":{"federal_office_closed":true,"fed_banks_open":true}'],
    compute: () => ['2026-07-03', '2027-07-05', '2027-06-18'].map(holiday),
  },
];
