import { isAHoliday } from '@18f/us-federal-holidays';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { addCalendarDays, addDays, closedDays, dayNumber, daysBetween, dueDate, isBusinessDay, lateInterest, nextBusinessDay, statutoryHolidays, weekday, type LateTerms } from './index.ts';

// 5 USC 6103(a), (b); Federal Reserve Board K.8, Holidays Observed 2026–2030: a Saturday holiday closes federal offices on the Friday,
// but not the Reserve Banks; a Sunday holiday closes both on the Monday.
const PUBLISHED: Record<number, { statutory: string[]; office: string[]; bank: string[] }> = {
  2026: {
    statutory: ['2026-01-01', '2026-01-19', '2026-02-16', '2026-05-25', '2026-06-19', '2026-07-04', '2026-09-07', '2026-10-12', '2026-11-11', '2026-11-26', '2026-12-25'],
    office: ['2026-01-01', '2026-01-19', '2026-02-16', '2026-05-25', '2026-06-19', '2026-07-03', '2026-09-07', '2026-10-12', '2026-11-11', '2026-11-26', '2026-12-25'],
    bank: ['2026-01-01', '2026-01-19', '2026-02-16', '2026-05-25', '2026-06-19', '2026-09-07', '2026-10-12', '2026-11-11', '2026-11-26', '2026-12-25'],
  },
  2027: {
    statutory: ['2027-01-01', '2027-01-18', '2027-02-15', '2027-05-31', '2027-06-19', '2027-07-04', '2027-09-06', '2027-10-11', '2027-11-11', '2027-11-25', '2027-12-25'],
    office: ['2027-01-01', '2027-01-18', '2027-02-15', '2027-05-31', '2027-06-18', '2027-07-05', '2027-09-06', '2027-10-11', '2027-11-11', '2027-11-25', '2027-12-24'],
    bank: ['2027-01-01', '2027-01-18', '2027-02-15', '2027-05-31', '2027-07-05', '2027-09-06', '2027-10-11', '2027-11-11', '2027-11-25'],
  },
  2028: {
    statutory: ['2028-01-01', '2028-01-17', '2028-02-21', '2028-05-29', '2028-06-19', '2028-07-04', '2028-09-04', '2028-10-09', '2028-11-11', '2028-11-23', '2028-12-25'],
    office: ['2027-12-31', '2028-01-17', '2028-02-21', '2028-05-29', '2028-06-19', '2028-07-04', '2028-09-04', '2028-10-09', '2028-11-10', '2028-11-23', '2028-12-25'],
    bank: ['2028-01-17', '2028-02-21', '2028-05-29', '2028-06-19', '2028-07-04', '2028-09-04', '2028-10-09', '2028-11-23', '2028-12-25'],
  },
  2029: {
    statutory: ['2029-01-01', '2029-01-15', '2029-02-19', '2029-05-28', '2029-06-19', '2029-07-04', '2029-09-03', '2029-10-08', '2029-11-11', '2029-11-22', '2029-12-25'],
    office: ['2029-01-01', '2029-01-15', '2029-02-19', '2029-05-28', '2029-06-19', '2029-07-04', '2029-09-03', '2029-10-08', '2029-11-12', '2029-11-22', '2029-12-25'],
    bank: ['2029-01-01', '2029-01-15', '2029-02-19', '2029-05-28', '2029-06-19', '2029-07-04', '2029-09-03', '2029-10-08', '2029-11-12', '2029-11-22', '2029-12-25'],
  },
  2030: {
    statutory: ['2030-01-01', '2030-01-21', '2030-02-18', '2030-05-27', '2030-06-19', '2030-07-04', '2030-09-02', '2030-10-14', '2030-11-11', '2030-11-28', '2030-12-25'],
    office: ['2030-01-01', '2030-01-21', '2030-02-18', '2030-05-27', '2030-06-19', '2030-07-04', '2030-09-02', '2030-10-14', '2030-11-11', '2030-11-28', '2030-12-25'],
    bank: ['2030-01-01', '2030-01-21', '2030-02-18', '2030-05-27', '2030-06-19', '2030-07-04', '2030-09-02', '2030-10-14', '2030-11-11', '2030-11-28', '2030-12-25'],
  },
};

describe('the two calendars', () => {
  it.each(Object.keys(PUBLISHED).map(Number))('closes on the published days of %i', (year) => {
    const published = PUBLISHED[year];
    const within = (days: string[] = []) => days.filter((day) => day.startsWith(String(year)));
    expect(statutoryHolidays(year).map(({ on }) => on)).toEqual(published?.statutory);
    const next = PUBLISHED[year + 1]?.office.filter((day) => day.startsWith(String(year))) ?? [];
    expect([...closedDays('office', year)].sort()).toEqual([...new Set([...within(published?.office), ...next, ...(year === 2027 ? ['2027-12-31'] : [])])].sort());
    expect([...closedDays('bank', year)].sort()).toEqual(within(published?.bank).sort());
  });

  it('agrees with a kept package on office days for twenty years', () => {
    for (let day = dayNumber('2021-01-01'); day < dayNumber('2041-01-01'); day += 1) {
      const date = new Date(day * 86_400_000);
      const iso = date.toISOString().slice(0, 10);
      expect([iso, closedDays('office', Number(iso.slice(0, 4))).has(iso)]).toEqual([iso, isAHoliday(date, { shiftSaturdayHolidays: true, shiftSundayHolidays: true, utc: true })]);
    }
  });
});

describe('days and due dates', () => {
  it('counts working days over weekends and holidays', () => {
    expect(addDays('working', '2026-07-01', 2)).toBe('2026-07-06');
    expect(addDays('working', '2026-07-01', 2, 'bank')).toBe('2026-07-03');
    expect(addDays('calendar', '2026-12-30', 3)).toBe('2027-01-02');
    expect(addDays('working', '2026-07-04', 0)).toBe('2026-07-04');
    expect(weekday('2026-12-01')).toBe(2);
  });

  // FAR 32.904(d)(1)(i): 14 days after a proper request; 5 CFR 1315.4(h): due on a weekend or holiday, paid the next business day
  // without interest. July 4, 2026 is a Saturday, July 3 the observed holiday.
  it('moves a due date off a closed day', () => {
    const terms = { startsAt: 'request' as const, days: 14, dayKind: 'calendar' as const, calendar: 'office' as const };
    expect(dueDate({ ...terms, moveToBusinessDay: false }, '2026-06-20').dueOn).toBe('2026-07-04');
    expect(dueDate({ ...terms, moveToBusinessDay: true }, '2026-06-20').dueOn).toBe('2026-07-06');
  });

  it('never falls on a closed day once moved, and adds up', () => {
    const dates = fc.integer({ min: dayNumber('2026-01-01'), max: dayNumber('2030-12-01') }).map((day) => addCalendarDays('1970-01-01', day));
    fc.assert(
      fc.property(dates, fc.integer({ min: 0, max: 300 }), fc.constantFrom('office' as const, 'bank' as const), (date, days, calendar) => {
        expect(isBusinessDay(calendar, nextBusinessDay(calendar, date))).toBe(true);
        expect(daysBetween(date, addDays('calendar', date, days))).toBe(days);
        expect(addDays('working', date, days, calendar) >= addDays('calendar', date, days)).toBe(true);
      }),
    );
  });
});

describe('late interest', () => {
  const yearly: LateTerms = { rate: 650, per: 'year', basis: 360, graceDays: 0, grace: 'forgives' };
  const cents = (terms: LateTerms, amountCents: number, dueOn: string, paidOn: string) => lateInterest(terms, { amountCents, dueOn, paidOn }).interestCents;

  // 5 CFR 1315.17(b) and the Fiscal Service's calculator page: $1,500 at 6.5 % for 10 days over 360 is $2.71; the due date bears none.
  it('gives the federal formula\'s printed figure', () => expect(cents(yearly, 150_000, '2026-04-01', '2026-04-11')).toBe(271));

  // A later page of the same agency states 6.625 % and prints $2.75; its stated rate gives $2.76 (2.7604…). Not to be copied.
  it('does not repeat a printed slip', () => expect(cents({ ...yearly, rate: 663 }, 150_000, '2026-04-01', '2026-04-11')).toBe(276));

  // Cal. Civ. Code 8800(c) has 2 % per month, Tex. Prop. Code 28.004 1.5 %; the statutes print no day count, so months are a twelfth of
  // the yearly rate by days; own figures: 8,000.00 for 93 days, 12,500.00 for 60 days.
  it.each([[200, 800_000, '2026-04-04', 48_921], [150, 1_250_000, '2026-03-02', 36_986]])('reckons a monthly rate of %i basis points by days', (rate, amount, paidOn, expected) => {
    expect(cents({ rate, per: 'month', basis: 365, graceDays: 0, grace: 'forgives' }, amount, '2026-01-01', paidOn)).toBe(expected);
  });

  it('forgives a grace or only waits for it', () => {
    const grace = { ...yearly, graceDays: 5 };
    expect(lateInterest(grace, { amountCents: 100, dueOn: '2026-01-01', paidOn: '2026-01-06' }).days).toBe(0);
    expect(lateInterest(grace, { amountCents: 100, dueOn: '2026-01-01', paidOn: '2026-01-11' }).days).toBe(5);
    expect(lateInterest({ ...grace, grace: 'delays' }, { amountCents: 100, dueOn: '2026-01-01', paidOn: '2026-01-11' }).days).toBe(10);
    expect(lateInterest(yearly, { amountCents: 100, dueOn: '2026-01-11', paidOn: '2026-01-01' }).interestCents).toBe(0);
  });

  it('stays under a state\'s cap', () => expect(cents({ ...yearly, capRate: 325 }, 150_000, '2026-04-01', '2026-04-11')).toBe(135));
});

describe('bad input to dates', () => {
  const terms: LateTerms = { rate: 650, per: 'year', basis: 360, graceDays: 0, grace: 'forgives' };
  const fails: [string, () => unknown, string][] = [
    ['February 30', () => dayNumber('2026-02-30'), 'date'],
    ['words', () => dayNumber('soon'), 'date'],
    ['a time', () => dayNumber('2026-02-03T00:00:00Z'), 'date'],
    ['negative days', () => addDays('working', '2026-01-01', -1), 'days'],
    ['half a day', () => addDays('calendar', '2026-01-01', 0.5), 'days'],
    ['absurdly many days', () => addDays('calendar', '2026-01-01', 10_001), 'days'],
    ['a negative rate', () => lateInterest({ ...terms, rate: -1 }, { amountCents: 1, dueOn: '2026-01-01', paidOn: '2026-01-02' }), 'terms.rate'],
    ['a negative grace', () => lateInterest({ ...terms, graceDays: -1 }, { amountCents: 1, dueOn: '2026-01-01', paidOn: '2026-01-02' }), 'terms.graceDays'],
    ['a negative amount', () => lateInterest(terms, { amountCents: -1, dueOn: '2026-01-01', paidOn: '2026-01-02' }), 'amountCents'],
  ];
  it.each(fails)('refuses %s and names the field', (_, run, field) => {
    expect(run).toThrow(InvalidInput);
    expect(run).toThrow(expect.objectContaining({ field }) as Error);
  });
});
