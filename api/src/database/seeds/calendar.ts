const DAY_MS = 86_400_000;
// mid-morning in the demo's time zone, whatever the season
const HOUR = 15;

/** The story's days are counted from the day the demo is made, so that it is always current. */
export class SeedCalendar {
  constructor(private readonly today: Date) {}

  /** YYYY-MM-DD, so many days from today. */
  date(days: number): string {
    return this.instant(days).toISOString().slice(0, 10);
  }

  instant(days: number, minutes = 0): Date {
    const day = new Date(this.today.getTime() + days * DAY_MS);
    day.setUTCHours(HOUR, minutes, 0, 0);
    return day;
  }
}
