import { must } from '../arithmetic/index.ts';

/** A business date: YYYY-MM-DD, without time or zone. */
export type BusinessDate = string;

const DAY_MS = 86_400_000;
const SHAPE = /^\d{4}-\d{2}-\d{2}$/;

/** Days since January 1, 1970. Throws InvalidInput for a day that doesn't exist. */
export function dayNumber(date: BusinessDate, field = 'date'): number {
  const ms = SHAPE.test(date) ? Date.parse(`${date}T00:00:00Z`) : Number.NaN;
  must(!Number.isNaN(ms) && new Date(ms).toISOString().startsWith(date), field, date, 'must be a day of the calendar such as 2027-03-15');
  return ms / DAY_MS;
}

export const fromDayNumber = (day: number): BusinessDate => new Date(day * DAY_MS).toISOString().slice(0, 10);

/** Calendar days from one date to another; negative when it lies before. */
export const daysBetween = (from: BusinessDate, to: BusinessDate): number => dayNumber(to, 'to') - dayNumber(from, 'from');

export const addCalendarDays = (date: BusinessDate, days: number): BusinessDate => fromDayNumber(dayNumber(date) + days);

/** 0 is Sunday, 6 is Saturday. */
export const weekday = (date: BusinessDate): number => (((dayNumber(date) + 4) % 7) + 7) % 7;
