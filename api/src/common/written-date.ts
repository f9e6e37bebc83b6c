import { daysBetween } from '@tallypole/shared/due';

/** An instant as people write its date, in a time zone: "March 3, 2027". */
export function writtenDate(instant: Date, timeZone: string): string {
  return new Intl.DateTimeFormat('en-US', { timeZone, year: 'numeric', month: 'long', day: 'numeric' }).format(instant);
}

/** A business date (YYYY-MM-DD) as people write it; it has no zone. */
export function writtenBusinessDate(date: string, weekday = false): string {
  return new Intl.DateTimeFormat('en-US', { timeZone: 'UTC', year: 'numeric', month: 'long', day: 'numeric', ...(weekday ? { weekday: 'long' } : {}) }).format(new Date(`${date}T00:00:00Z`));
}

const NEAR_DAYS = 180;
/** A day to come with its weekday, and with its year only where it is far: "Friday, March 19". */
export function writtenNearDate(date: string, today: string): string {
  const written = writtenBusinessDate(date, true);
  return daysBetween(today, date) <= NEAR_DAYS ? written.slice(0, written.lastIndexOf(',')) : written;
}
