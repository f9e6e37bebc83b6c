/** An instant as people write its date, in a time zone: "March 3, 2027". */
export function writtenDate(instant: Date, timeZone: string): string {
  return new Intl.DateTimeFormat('en-US', { timeZone, year: 'numeric', month: 'long', day: 'numeric' }).format(instant);
}

/** A business date (YYYY-MM-DD) as people write it; it has no zone. */
export function writtenBusinessDate(date: string, weekday = false): string {
  return new Intl.DateTimeFormat('en-US', { timeZone: 'UTC', year: 'numeric', month: 'long', day: 'numeric', ...(weekday ? { weekday: 'long' } : {}) }).format(new Date(`${date}T00:00:00Z`));
}
