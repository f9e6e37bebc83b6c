import { must } from '../arithmetic/index.ts';
import { addCalendarDays, dayNumber, fromDayNumber, weekday, type BusinessDate } from './dates.ts';
import { statutoryHolidays } from './holidays.ts';

/**
 * `office`: federal holidays with their observed days (5 USC 6103(b): Saturday's on Friday, Sunday's on Monday).
 * `bank`: a Sunday holiday closes the Monday, a Saturday holiday doesn't close the Friday (Federal Reserve).
 */
export type CalendarName = 'office' | 'bank';

const closed = new Map<string, ReadonlySet<BusinessDate>>();

/** The days of a year on which offices or banks are closed for a holiday, the ones moved into it from the next year included. */
export function closedDays(calendar: CalendarName, year: number): ReadonlySet<BusinessDate> {
  const key = `${calendar} ${year}`;
  const known = closed.get(key);
  if (known) return known;
  // New Year's Day on a Saturday is observed on December 31 of the year before
  const days = new Set([...statutoryHolidays(year), ...statutoryHolidays(year + 1).slice(0, 1)].flatMap(({ on }) => observed(calendar, on)).filter((day) => day.startsWith(String(year))));
  closed.set(key, days);
  return days;
}

function observed(calendar: CalendarName, on: BusinessDate): BusinessDate[] {
  const day = weekday(on);
  if (day === 0) return [addCalendarDays(on, 1)];
  if (day === 6) return calendar === 'office' ? [addCalendarDays(on, -1)] : [];
  return [on];
}

export function isBusinessDay(calendar: CalendarName, date: BusinessDate): boolean {
  const day = weekday(date);
  return day !== 0 && day !== 6 && !closedDays(calendar, Number(date.slice(0, 4))).has(date);
}

/** The date itself or the next business day. */
export function nextBusinessDay(calendar: CalendarName, date: BusinessDate): BusinessDate {
  let day = dayNumber(date);
  while (!isBusinessDay(calendar, fromDayNumber(day))) day += 1;
  return fromDayNumber(day);
}

export type DayKind = 'calendar' | 'working';
const MOST_DAYS = 10_000;

/** Adds calendar or working days; the day itself isn't counted. Throws InvalidInput for a negative or absurd number. */
export function addDays(kind: DayKind, date: BusinessDate, days: number, calendar: CalendarName = 'office'): BusinessDate {
  must(Number.isSafeInteger(days) && days >= 0 && days <= MOST_DAYS, 'days', days, `must be a whole number from 0 to ${MOST_DAYS}`);
  if (kind === 'calendar') return addCalendarDays(date, days);
  let day = dayNumber(date);
  for (let left = days; left > 0; ) {
    day += 1;
    if (isBusinessDay(calendar, fromDayNumber(day))) left -= 1;
  }
  return fromDayNumber(day);
}
