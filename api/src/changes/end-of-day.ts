/** The first instant after a business date in a time zone, found by asking the zone itself, daylight saving included. */
export function endOfDay(date: string, timeZone: string): Date {
  const midnight = Date.parse(`${date}T00:00:00Z`) + 86_400_000;
  const offsetAt = (ms: number) => {
    const shown = Object.fromEntries(new Intl.DateTimeFormat('en-US', { timeZone, hourCycle: 'h23', year: 'numeric', month: 'numeric', day: 'numeric', hour: 'numeric', minute: 'numeric', second: 'numeric' }).formatToParts(ms).map(({ type, value }) => [type, Number(value)]));
    return Date.UTC(shown['year'] ?? 0, (shown['month'] ?? 1) - 1, shown['day'], shown['hour'], shown['minute'], shown['second']) - ms;
  };
  const guess = midnight - offsetAt(midnight);
  return new Date(midnight - offsetAt(guess));
}
