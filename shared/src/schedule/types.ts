import type { Step } from '../arithmetic/index.ts';
import type { BusinessDate, DayKind } from '../due/index.ts';

/** On which days the job is worked. */
export interface WorkCalendarTerms {
  /** Days of the week that are worked: 0 is Sunday, 6 is Saturday. */
  weekdays: readonly number[];
  /** Federal holidays as offices or banks keep them; none where the job works through them. */
  holidays: 'office' | 'bank' | 'none';
  /** Further days on which nobody works: a shutdown, a local holiday. */
  closedOn: readonly BusinessDate[];
}

/** Finish to start: the milestone starts once its predecessor has finished and the lag has passed (concrete that cures). */
export interface Predecessor {
  id: string;
  /** Working days between the two; 0 where it isn't given. */
  lagDays?: number;
}

/** Days that an approved change gives, in the contract's kind of days. */
export interface Extension {
  /** The change. */
  id: string;
  label: string;
  days: number;
}

export interface ScheduleMilestone {
  id: string;
  name: string;
  /** Working days; 0 is an event at the end of a day, such as a passed inspection. */
  durationDays: number;
  plannedStartOn?: BusinessDate | null;
  /** Where only this one is planned, the start is planned so that the duration ends on it. */
  plannedFinishOn?: BusinessDate | null;
  actualStartOn?: BusinessDate | null;
  actualFinishOn?: BusinessDate | null;
  predecessors?: readonly Predecessor[];
  /** Approved days attached to this milestone; they lengthen it. */
  extensions?: readonly Extension[];
}

export interface ScheduleOptions {
  /** The job's first day: nothing starts before it, except what actually did. */
  startOn: BusinessDate;
  /** Today, as the caller has it: what hasn't started can't start before it, what is under way can't have finished before it. Left out: the plan alone. */
  asOf?: BusinessDate | null;
  /** The completion date as signed. */
  completeBy: BusinessDate;
  /** Which days the contract counts approved days in. */
  dayKind: DayKind;
  /** Approved days of changes that hang on no milestone: they move the contract's completion date, not the network. */
  otherExtensions?: readonly Extension[];
  /** Monday to Friday without federal holidays where it isn't given. */
  calendar?: Partial<WorkCalendarTerms>;
  /** `hold`: a trade booked for its planned start doesn't come earlier. `follow`: planned dates count only where there is no predecessor. */
  plannedStarts?: 'hold' | 'follow';
}

/** First and last day; an event has the same day twice. */
export interface Span {
  startOn: BusinessDate;
  finishOn: BusinessDate;
}

/** What holds a milestone's date where it is. */
export type Driver = { by: 'predecessor'; id: string } | { by: 'actual_start' | 'actual_finish' | 'planned_start' | 'today' | 'job_start' };

export interface MilestoneDates {
  id: string;
  name: string;
  state: 'finished' | 'under_way' | 'upcoming';
  /** With the approved days attached to it. */
  durationDays: number;
  /** The earliest that actual dates, today and the network allow, in working days. */
  early: Span;
  /** The latest that doesn't move the forecast completion. */
  late: Span;
  /** Working days it can slip without moving the forecast completion; 0 for what is finished. */
  totalFloatDays: number;
  /** Working days it can slip without moving any other milestone. */
  freeFloatDays: number;
  /** Not finished, and without float. */
  critical: boolean;
  /** Actual dates as they were recorded, else the early ones. */
  forecast: Span;
  /** Forecast finish − planned finish in working days; null where none is planned. */
  slipDays: number | null;
  driver: Driver;
  steps: Step;
}

export interface Schedule {
  /** In the order they were given in. */
  milestones: MilestoneDates[];
  /** As signed + approved days: moves by approved days only. */
  contractCompletionOn: BusinessDate;
  approvedDays: number;
  /** What the network says. */
  forecastCompletionOn: BusinessDate;
  /** Working days from the forecast to the contract's completion; negative when the forecast is late. */
  marginDays: number;
  /** One chain of milestones that the forecast completion hangs on, first to last. */
  criticalPath: string[];
  calendar: WorkCalendarTerms;
  steps: Readonly<Record<'contractCompletion' | 'forecastCompletion' | 'margin', Step>>;
}
