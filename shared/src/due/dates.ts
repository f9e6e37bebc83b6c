import { must } from '../arithmetic/index.ts';

/** A business date: YYYY-MM-DD, without time or zone. */
export type BusinessDate = string;

const DAY_MS = 86_400_000;
/** January 1 of the year 0, and December 31, 9999: dates of four digits. */
const FIRST_DAY = -719_528;
const LAST_DAY = 2_932_896;
const SHAPE = /^\d{4}-\d{2}-\d{2}$/;

/** Days since January 1, 1970. Throws InvalidInput for a day that doesn't exist. */
export function dayNumber(date: BusinessDate, field = 'date'): number {
  const ms = SHAPE.test(date) ? Date.parse(`${date}T00:00:00Z`) : Number.NaN;
  must(!Number.isNaN(ms) && new Date(ms).toISOString().startsWith(date), field, date, 'must be a day of the calendar such as 2027-03-15');
  return ms / DAY_MS;
}

/** The day of a number as `dayNumber` gives it. Throws InvalidInput for part of a day, and outside the years 0 to 9999. */
export function fromDayNumber(day: number): BusinessDate {
  must(Number.isSafeInteger(day) && day >= FIRST_DAY && day <= LAST_DAY, 'day', day, 'must be a whole day of the years 0 to 9999');
  return new Date(day * DAY_MS).toISOString().slice(0, 10);
}

/** Calendar days from one date to another; negative when it lies before. */
export const daysBetween = (from: BusinessDate, to: BusinessDate): number => dayNumber(to, 'to') - dayNumber(from, 'from');

/** A number of calendar days later; earlier where it is negative. Throws InvalidInput. */
export function addCalendarDays(date: BusinessDate, days: number): BusinessDate {
  must(Number.isSafeInteger(days), 'days', days, 'must be a whole number of days');
  return fromDayNumber(dayNumber(date) + days);
}

/** 0 is Sunday, 6 is Saturday. */
export const weekday = (date: BusinessDate): number => (((dayNumber(date) + 4) % 7) + 7) % 7;
