export { compareSchedules } from './compare.ts';
export type { MovedDate, MovedMilestone, ScheduleComparison } from './compare.ts';
export { computeSchedule } from './compute-schedule.ts';
export type { Driver, Extension, MilestoneDates, Predecessor, Schedule, ScheduleMilestone, ScheduleOptions, Span, WorkCalendarTerms } from './types.ts';
export { workingDaysBetween } from './work-calendar.ts';
