import { date, given, quantity, step, type Step } from '../arithmetic/index.ts';
import { daysBetween, type BusinessDate } from '../due/index.ts';
import type { MilestoneDates, Schedule, Span } from './types.ts';
import { workingDaysBetween } from './work-calendar.ts';

/** A milestone whose forecast dates differ. */
export interface MovedMilestone {
  id: string;
  name: string;
  before: Span;
  after: Span;
  /** By how much its finish moves; later is more than 0. */
  workingDays: number;
  calendarDays: number;
}

export interface MovedDate {
  before: BusinessDate;
  after: BusinessDate;
  workingDays: number;
  calendarDays: number;
}

export interface ScheduleComparison {
  /** In the order of the schedule after. */
  moved: MovedMilestone[];
  added: { id: string; name: string }[];
  removed: { id: string; name: string }[];
  forecastCompletion: MovedDate;
  contractCompletion: MovedDate;
  steps: Step;
}

/** What differs between two schedules of one job: which milestones move and by how many days, and both completions. Working days are counted by the calendar of the schedule after. */
export function compareSchedules(before: Schedule, after: Schedule): ScheduleComparison {
  const between = (from: BusinessDate, to: BusinessDate): MovedDate => ({
    before: from,
    after: to,
    workingDays: from === to ? 0 : workingDaysBetween(after.calendar, from, to),
    calendarDays: daysBetween(from, to),
  });
  const earlier = new Map(before.milestones.map((milestone) => [milestone.id, milestone]));
  const later = new Set(after.milestones.map(({ id }) => id));
  const moved = after.milestones.flatMap((milestone): MovedMilestone[] => {
    const was = earlier.get(milestone.id);
    if (!was || same(was.forecast, milestone.forecast)) return [];
    const { workingDays, calendarDays } = between(was.forecast.finishOn, milestone.forecast.finishOn);
    return [{ id: milestone.id, name: milestone.name, before: was.forecast, after: milestone.forecast, workingDays, calendarDays }];
  });
  const forecastCompletion = between(before.forecastCompletionOn, after.forecastCompletionOn);
  const contractCompletion = between(before.contractCompletionOn, after.contractCompletionOn);
  return {
    moved,
    added: after.milestones.filter(({ id }) => !earlier.has(id)).map(named),
    removed: before.milestones.filter(({ id }) => !later.has(id)).map(named),
    forecastCompletion,
    contractCompletion,
    steps: step('Moved', 'forecast after − forecast before, milestone by milestone', quantity(moved.length, 'milestones'), [
      ...moved.map(({ name, workingDays, before: was, after: is }) => shift(`${name} finishes`, workingDays, was.finishOn, is.finishOn)),
      shift('Finished by, as it looks now', forecastCompletion.workingDays, forecastCompletion.before, forecastCompletion.after),
      shift('Finished by, in the contract', contractCompletion.workingDays, contractCompletion.before, contractCompletion.after),
    ]),
  };
}

const same = (a: Span, b: Span): boolean => a.startOn === b.startOn && a.finishOn === b.finishOn;

const named = ({ id, name }: MilestoneDates): { id: string; name: string } => ({ id, name });

const shift = (label: string, days: number, from: BusinessDate, to: BusinessDate): Step =>
  step(label, 'working days from the date before to the date after', quantity(days, 'working days'), [given('Before', date(from)), given('After', date(to))]);
