import { dayNumber, type BusinessDate } from '../due/index.ts';

/** How days of interest are counted: actual days over 360 or 365, or twelve months of thirty days (bond basis). */
export type DayCountBasis = 'actual/360' | 'actual/365' | '30/360';

/** Days and the year they are counted against. 30/360 bond basis: a 31st counts as the 30th; the second one only after a 30th or 31st. */
export function dayCount(basis: DayCountBasis, from: BusinessDate, to: BusinessDate): { days: number; year: number } {
  if (basis !== '30/360') return { days: dayNumber(to, 'to') - dayNumber(from, 'from'), year: basis === 'actual/360' ? 360 : 365 };
  dayNumber(from, 'from');
  dayNumber(to, 'to');
  const [y1 = 0, m1 = 0, d1 = 0] = from.split('-').map(Number);
  const [y2 = 0, m2 = 0, d2 = 0] = to.split('-').map(Number);
  const first = d1 === 31 ? 30 : d1;
  const second = d2 === 31 && first > 29 ? 30 : d2;
  return { days: 360 * (y2 - y1) + 30 * (m2 - m1) + (second - first), year: 360 };
}
