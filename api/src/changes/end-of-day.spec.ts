import { describe, expect, it } from '@jest/globals';
import { endOfDay } from './end-of-day.ts';

const NEW_YORK = 'America/New_York';

describe('the end of a business date', () => {
  // offsets of the IANA zones, daylight saving from the second Sunday in March to the first in November (IANA time zone database)
  it.each([
    ['2027-01-31', NEW_YORK, '2027-02-01T05:00:00.000Z'],
    ['2027-03-13', NEW_YORK, '2027-03-14T05:00:00.000Z'],
    ['2027-03-14', NEW_YORK, '2027-03-15T04:00:00.000Z'],
    ['2027-11-07', NEW_YORK, '2027-11-08T05:00:00.000Z'],
    ['2027-06-30', 'America/Phoenix', '2027-07-01T07:00:00.000Z'],
    ['2027-12-31', 'Pacific/Honolulu', '2028-01-01T10:00:00.000Z'],
    ['2028-02-29', 'UTC', '2028-03-01T00:00:00.000Z'],
  ])('%s in %s is over at %s', (date, timeZone, instant) => {
    expect(endOfDay(date, timeZone).toISOString()).toBe(instant);
  });
});
