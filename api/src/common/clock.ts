import { Injectable } from '@nestjs/common';

/** The time, in one place, so that tests can set it. */
@Injectable()
export class Clock {
  now(): Date {
    return new Date();
  }

  /** Today as a business date, YYYY-MM-DD, in a job's time zone. */
  today(timeZone: string): string {
    return businessDate(this.now(), timeZone);
  }
}

// making one takes longer than all the rest of a small answer
const formats = new Map<string, Intl.DateTimeFormat>();

/** The date of an instant in a time zone, YYYY-MM-DD. */
export function businessDate(instant: Date, timeZone: string): string {
  const known = formats.get(timeZone) ?? new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' });
  formats.set(timeZone, known);
  return known.format(instant);
}
