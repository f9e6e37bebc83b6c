import { date, given, quantity, step, text, type Step } from '../arithmetic/index.ts';
import type { BusinessDate } from '../due/index.ts';
import type { Driver, Extension, MilestoneDates, ScheduleMilestone, ScheduleOptions, Span } from './types.ts';

interface Explained {
  milestone: ScheduleMilestone;
  forecast: Span;
  duration: number;
  driver: Driver;
  dates: ReadonlyMap<string, { name: string; finishOn: BusinessDate }>;
  options: ScheduleOptions;
}

const RULES: Record<Driver['by'], string> = {
  actual_finish: 'it has finished',
  actual_start: 'the day it started + its working days',
  predecessor: 'the last of its predecessors to finish + the days between + its working days',
  planned_start: 'its planned start + its working days',
  today: 'today, since it has not come before + its working days left',
  job_start: 'the first day of the job + its working days',
};

/** Why a milestone finishes on its day: what holds it, what it waits for and how long it takes. */
export function milestoneStep({ milestone, forecast, duration, driver, dates, options }: Explained): Step {
  const { id, name } = milestone;
  const inputs: Step[] = [];
  if (milestone.actualStartOn) inputs.push(given('Started', date(milestone.actualStartOn)));
  for (const { id: from, lagDays = 0 } of milestone.predecessors ?? []) {
    const before = dates.get(from);
    if (before) inputs.push(given(`${before.name} finishes`, date(before.finishOn), { record: 'milestone', id: from, label: before.name }));
    if (lagDays > 0) inputs.push(given('Days between', quantity(lagDays, 'working days')));
  }
  if (driver.by === 'planned_start' && milestone.plannedStartOn) inputs.push(given('Planned start', date(milestone.plannedStartOn)));
  else if (driver.by === 'planned_start' && milestone.plannedFinishOn) inputs.push(given('Planned finish', date(milestone.plannedFinishOn)));
  if (driver.by === 'today' && options.asOf) inputs.push(given('Today', date(options.asOf)));
  if (driver.by === 'job_start') inputs.push(given('First day of the job', date(options.startOn)));
  inputs.push(durationStep(milestone, duration, options));
  // a given date stands on its own: how long it was meant to take no longer matters
  if (milestone.actualFinishOn) return given(`${name} finished`, date(milestone.actualFinishOn), { record: 'milestone', id, label: name });
  return step(`${name} finishes`, RULES[driver.by], date(forecast.finishOn), inputs);
}

function durationStep({ durationDays, extensions = [] }: ScheduleMilestone, duration: number, { dayKind }: ScheduleOptions): Step {
  const takes = given('Takes', quantity(durationDays, 'working days'));
  if (extensions.length === 0) return takes;
  const rule = dayKind === 'working' ? 'as planned + approved days' : 'as planned + approved calendar days × days of the work week ÷ 7, rounded up';
  return step('Takes, with approved days', rule, quantity(duration, 'working days'), [takes, ...extensions.map((extension) => approved(extension, dayKind))]);
}

const approved = ({ id, label, days }: Extension, dayKind: ScheduleOptions['dayKind']): Step => given(label, quantity(days, `${dayKind} days`), { record: 'change', id, label });

/** The completion date of the contract: as signed, moved by approved days only. */
export function contractStep(on: BusinessDate, { completeBy, dayKind }: ScheduleOptions, extensions: readonly Extension[]): Step {
  return step('Finished by, in the contract', `completion date as signed + approved days, in ${dayKind} days`, date(on), [
    given('Completion date as signed', date(completeBy)),
    ...extensions.map((extension) => approved(extension, dayKind)),
  ]);
}

/** The forecast completion: the chain of milestones that it hangs on. */
export function forecastStep(on: BusinessDate, path: readonly string[], milestones: readonly MilestoneDates[]): Step {
  const steps = new Map(milestones.map(({ id, steps: own }) => [id, own]));
  return step('Finished by, as it looks now', 'the last milestone to finish; it hangs on these, each waiting for the one before', date(on), path.flatMap((id) => steps.get(id) ?? []));
}

export function marginStep(days: number, contract: Step, forecast: Step): Step {
  const words = days < 0 ? 'later than the contract' : days > 0 ? 'earlier than the contract' : 'on the contract’s day';
  return step('Between forecast and contract', 'working days from the forecast completion to the completion date of the contract', quantity(days, 'working days'), [contract, forecast, given('That is', text(words))]);
}
