import { addCalendarDays, weekday, type BusinessDate } from './dates.ts';

export interface Holiday {
  name: string;
  /** The statutory day. */
  on: BusinessDate;
}

const pad = (n: number) => String(n).padStart(2, '0');
const fixed = (year: number, month: number, day: number): BusinessDate => `${year}-${pad(month)}-${pad(day)}`;

/** The n-th given weekday of a month. */
function nth(year: number, month: number, dayOfWeek: number, n: number): BusinessDate {
  const first = fixed(year, month, 1);
  return addCalendarDays(first, ((dayOfWeek - weekday(first) + 7) % 7) + 7 * (n - 1));
}

function lastMonday(year: number, month: number): BusinessDate {
  const fifth = nth(year, month, 1, 5);
  return fifth.startsWith(`${year}-${pad(month)}`) ? fifth : nth(year, month, 1, 4);
}

/** The eleven federal holidays of a year by statute (5 USC 6103(a)), before any of them is moved off a weekend. Inauguration Day is left out: it is no holiday of the country. */
export function statutoryHolidays(year: number): Holiday[] {
  return [
    { name: "New Year's Day", on: fixed(year, 1, 1) },
    { name: 'Birthday of Martin Luther King, Jr.', on: nth(year, 1, 1, 3) },
    { name: "Washington's Birthday", on: nth(year, 2, 1, 3) },
    { name: 'Memorial Day', on: lastMonday(year, 5) },
    { name: 'Juneteenth National Independence Day', on: fixed(year, 6, 19) },
    { name: 'Independence Day', on: fixed(year, 7, 4) },
    { name: 'Labor Day', on: nth(year, 9, 1, 1) },
    { name: 'Columbus Day', on: nth(year, 10, 1, 2) },
    { name: 'Veterans Day', on: fixed(year, 11, 11) },
    { name: 'Thanksgiving Day', on: nth(year, 11, 4, 4) },
    { name: 'Christmas Day', on: fixed(year, 12, 25) },
  ];
}
