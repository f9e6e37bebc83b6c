export { addDays, closedDays, isBusinessDay, nextBusinessDay } from './calendars.ts';
export type { CalendarName, DayKind } from './calendars.ts';
export { addCalendarDays, dayNumber, daysBetween, fromDayNumber, weekday } from './dates.ts';
export type { BusinessDate } from './dates.ts';
export { dueDate } from './due-date.ts';
export type { DueTerms } from './due-date.ts';
export { statutoryHolidays } from './holidays.ts';
export { lateInterest } from './late-interest.ts';
export type { LatePayment, LateTerms } from './late-interest.ts';
