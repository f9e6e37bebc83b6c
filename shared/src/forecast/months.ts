import { must } from '../arithmetic/index.ts';
import { addCalendarDays, daysBetween, dayNumber, type BusinessDate } from '../due/index.ts';
import type { Month } from './types.ts';

/** Fifty years. */
const MOST_DAYS = 18_263;
const NAMES = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December'];

export const monthOf = (date: BusinessDate): Month => date.slice(0, 7);

const firstDay = (month: Month): BusinessDate => `${month}-01`;

const nextMonth = (month: Month): Month => monthOf(addCalendarDays(firstDay(month), 31));

export const lastDay = (month: Month): BusinessDate => addCalendarDays(firstDay(nextMonth(month)), -1);

export const monthName = (month: Month): string => `${NAMES[Number(month.slice(5)) - 1] ?? ''} ${month.slice(0, 4)}`;

export const later = <T extends string>(a: T, b: T): T => (a > b ? a : b);

/** Checks a month, not more than fifty years after today. Throws InvalidInput. */
export function checkMonth(asOf: BusinessDate, month: Month, field: string): void {
  must(/^\d{4}-(0[1-9]|1[0-2])$/.test(month), field, month, 'must be a month such as 2027-03');
  checkNear(asOf, firstDay(month), field);
}

/** Checks that a date isn't more than fifty years after today. Throws InvalidInput. */
export function checkNear(asOf: BusinessDate, date: BusinessDate, field: string): void {
  dayNumber(date, field);
  must(daysBetween(asOf, date) <= MOST_DAYS, field, date, 'must lie within fifty years');
}

/** Every month from one to another, both included; none where the second lies before. */
export function monthsFrom(first: Month, last: Month): Month[] {
  const months: Month[] = [];
  for (let month = first; month <= last; month = nextMonth(month)) months.push(month);
  return months;
}
