import { must } from '../arithmetic/index.ts';
import { addCalendarDays, closedDays, dayNumber, fromDayNumber, statutoryHolidays, weekday, type BusinessDate } from '../due/index.ts';
import type { WorkCalendarTerms } from './types.ts';

/** About a hundred years of working days: a schedule beyond that is a slip of the keyboard. */
const MOST_WORKDAYS = 25_000;
const FIRST = dayNumber('1950-01-01');
const LAST = dayNumber('2150-12-31');
const MONDAY_TO_FRIDAY = [1, 2, 3, 4, 5];

/** Counts working days from a first one; every index is a whole number of working days after it. */
export interface WorkCalendar {
  terms: WorkCalendarTerms;
  /** The working day with this index; 0 is the first one on or after the origin. */
  dateAt: (index: number) => BusinessDate;
  /** The index of the first working day on or after a date that doesn't lie before the origin. */
  indexFrom: (date: BusinessDate) => number;
  /** How many working days have passed when this date is over. */
  indexAfter: (date: BusinessDate) => number;
}

/** Fills in the usual week and holidays and checks them. Throws InvalidInput. */
export function workCalendarTerms(given: Partial<WorkCalendarTerms> = {}, field = 'calendar'): WorkCalendarTerms {
  const { weekdays = MONDAY_TO_FRIDAY, holidays = 'office', closedOn = [] } = given;
  must(weekdays.length > 0, `${field}.weekdays`, weekdays, 'must hold at least one day of the week');
  weekdays.forEach((day, i) => must(Number.isInteger(day) && day >= 0 && day <= 6, `${field}.weekdays.${i}`, day, 'must be from 0 (Sunday) to 6 (Saturday)'));
  must((['office', 'bank', 'none'] as const).includes(holidays), `${field}.holidays`, holidays, 'must be office, bank or none');
  closedOn.forEach((day, i) => scheduleDay(day, `${field}.closedOn.${i}`));
  return { weekdays: [...new Set(weekdays)].sort(), holidays, closedOn: [...new Set(closedOn)].sort() };
}

/** Checks a date of a schedule: a day of the calendar from 1950 to 2150. Throws InvalidInput. */
export function scheduleDay(date: BusinessDate, field: string): BusinessDate {
  const day = dayNumber(date, field);
  must(day >= FIRST && day <= LAST, field, date, 'must lie between 1950 and 2150');
  return date;
}

/** The working days from an origin on. A date before it, or a schedule of more than a hundred years, throws InvalidInput. */
export function workCalendar(terms: WorkCalendarTerms, origin: BusinessDate): WorkCalendar {
  const isWorkday = workdayTest(terms);
  const days: number[] = [];
  let next = dayNumber(origin);
  const first = next;
  const extend = () => {
    must(days.length <= MOST_WORKDAYS, 'milestones', days.length, 'must all lie within a hundred years');
    while (!isWorkday(fromDayNumber(next))) next += 1;
    days.push(next);
    next += 1;
  };
  const dateAt = (index: number) => {
    while (days.length <= index) extend();
    return fromDayNumber(days[index] ?? first);
  };
  const indexFrom = (date: BusinessDate) => {
    const day = dayNumber(date);
    must(day >= first, 'date', date, `must not lie before ${origin}`);
    while ((days.at(-1) ?? first - 1) < day) extend();
    return lowerBound(days, day);
  };
  return { terms, dateAt, indexFrom, indexAfter: (date) => indexFrom(addCalendarDays(date, 1)) };
}

function workdayTest({ weekdays, holidays, closedOn }: WorkCalendarTerms): (date: BusinessDate) => boolean {
  const worked = new Set(weekdays);
  const closed = new Set(closedOn);
  const statutory = new Map<number, ReadonlySet<BusinessDate>>();
  const onHoliday = (date: BusinessDate) => {
    if (holidays === 'none') return false;
    const year = Number(date.slice(0, 4));
    // a week that works Saturdays doesn't work on a holiday that falls on one, though offices keep the Friday
    const named = statutory.get(year) ?? new Set(statutoryHolidays(year).map(({ on }) => on));
    statutory.set(year, named);
    return closedDays(holidays, year).has(date) || named.has(date);
  };
  return (date) => worked.has(weekday(date)) && !closed.has(date) && !onHoliday(date);
}

/** The first place in a sorted list whose value is at least this. */
function lowerBound(sorted: readonly number[], value: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((sorted[middle] ?? value) < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Working days from the end of one date to the end of another; negative when it lies before. Throws InvalidInput. */
export function workingDaysBetween(terms: WorkCalendarTerms, from: BusinessDate, to: BusinessDate): number {
  if (to < from) return -workingDaysBetween(terms, to, from);
  const calendar = workCalendar(terms, from);
  return calendar.indexAfter(to) - calendar.indexAfter(from);
}
