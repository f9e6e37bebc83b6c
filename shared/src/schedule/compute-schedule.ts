import { addCalendarDays, addDays, type BusinessDate } from '../due/index.ts';
import { checkSchedule } from './check.ts';
import { contractStep, forecastStep, marginStep, milestoneStep } from './explain.ts';
import { network } from './network.ts';
import { backwardPass, forwardPass, type Frame, type Position, type Progress } from './passes.ts';
import type { Driver, Extension, MilestoneDates, Schedule, ScheduleMilestone, ScheduleOptions, Span } from './types.ts';
import { workCalendar, workCalendarTerms } from './work-calendar.ts';

/**
 * A job's schedule by the critical path method: per milestone early and late dates, total and free float in working days, and the
 * forecast that follows from actual ones; the completion date of the contract, which approved days alone move, and the forecast
 * completion, which the network gives. Whole days, no rounding, save that calendar days approved on a milestone lengthen it by
 * days × (days of the work week) ÷ 7, rounded up (common practice, no source). The contract's date is counted as a change's effect
 * counts it: in calendar days, or in Monday-to-Friday office days, whatever week the site works. Order of input never matters.
 * Throws InvalidInput: for a bad date or number, an unknown predecessor, and a cycle, naming its milestones. Method: critical path,
 * common practice; a schedule here informs payments and never replaces the contract.
 */
export function computeSchedule(milestones: readonly ScheduleMilestone[], options: ScheduleOptions): Schedule {
  checkSchedule(milestones, options);
  const terms = workCalendarTerms(options.calendar, 'options.calendar');
  const calendar = workCalendar(terms, originOf(milestones, options));
  const net = network(milestones);
  const frame: Frame = {
    calendar,
    network: net,
    jobStart: calendar.indexFrom(options.startOn),
    today: options.asOf ? calendar.indexFrom(options.asOf) : null,
    holdPlannedStarts: options.plannedStarts !== 'follow',
  };
  const items = milestones.map((milestone): Progress => ({ milestone, state: stateOf(milestone), duration: durationOf(milestone, options, terms.weekdays.length) }));
  const { early, drivers } = forwardPass(items, frame);
  const end = Math.max(...early.map(({ finish }) => finish));
  const { late, total, free } = backwardPass(items, net, early, end);
  const spans = early.map((position) => spanOf(position, frame));
  const forecasts = items.map(({ milestone }, i) => forecastOf(milestone, spans[i]));
  const dates = new Map(items.map(({ milestone }, i) => [milestone.id, { name: milestone.name, finishOn: forecasts[i]?.finishOn ?? '' }]));
  const results = items.map(({ milestone, state, duration }, i): MilestoneDates => {
    const forecast = forecasts[i] ?? { startOn: '', finishOn: '' };
    const driver = drivers[i] ?? { by: 'job_start' };
    const totalFloatDays = total[i] ?? 0;
    return {
      id: milestone.id,
      name: milestone.name,
      state,
      durationDays: duration,
      early: spans[i] ?? forecast,
      late: spanOf(late[i] ?? { start: 0, finish: 0 }, frame),
      totalFloatDays,
      freeFloatDays: free[i] ?? 0,
      critical: state !== 'finished' && totalFloatDays === 0,
      forecast,
      slipDays: milestone.plannedFinishOn ? calendar.indexAfter(forecast.finishOn) - calendar.indexAfter(milestone.plannedFinishOn) : null,
      driver,
      steps: milestoneStep({ milestone, forecast, duration, driver, dates, options }),
    };
  });
  return { milestones: results, ...completion(results, early, end, frame, options, milestones), calendar: terms };
}

const stateOf = ({ actualStartOn, actualFinishOn }: ScheduleMilestone): Progress['state'] => (actualFinishOn ? 'finished' : actualStartOn ? 'under_way' : 'upcoming');

const daysOf = (extensions: readonly Extension[] = []): number => extensions.reduce((total, { days }) => total + days, 0);

function durationOf({ durationDays, extensions }: ScheduleMilestone, { dayKind }: ScheduleOptions, weekLength: number): number {
  const approved = daysOf(extensions);
  return durationDays + (dayKind === 'working' ? approved : Math.ceil((approved * weekLength) / 7));
}

/** Far enough back for every date that is named, and for the start of what is only known to have finished. */
function originOf(milestones: readonly ScheduleMilestone[], { startOn, completeBy, asOf }: ScheduleOptions): BusinessDate {
  let origin = startOn < completeBy ? startOn : completeBy;
  const reach = (date: BusinessDate | null | undefined) => {
    if (date && date < origin) origin = date;
  };
  reach(asOf);
  for (const { plannedStartOn, plannedFinishOn, actualStartOn, actualFinishOn, durationDays } of milestones) {
    for (const date of [plannedStartOn, plannedFinishOn, actualStartOn]) reach(date);
    if (actualFinishOn) reach(actualStartOn ? actualFinishOn : addCalendarDays(actualFinishOn, -(2 * durationDays + 30)));
  }
  return origin;
}

function spanOf({ start, finish }: Position, { calendar, jobStart }: Frame): Span {
  if (finish > start) return { startOn: calendar.dateAt(start), finishOn: calendar.dateAt(finish - 1) };
  // an event comes at the end of the day before; at the job's start there is no such day
  const on = calendar.dateAt(finish === jobStart || finish === 0 ? finish : finish - 1);
  return { startOn: on, finishOn: on };
}

function forecastOf({ actualStartOn, actualFinishOn }: ScheduleMilestone, early: Span = { startOn: '', finishOn: '' }): Span {
  const finishOn = actualFinishOn ?? early.finishOn;
  const startOn = actualStartOn ?? early.startOn;
  return { startOn: startOn < finishOn ? startOn : finishOn, finishOn };
}

function completion(results: readonly MilestoneDates[], early: readonly Position[], end: number, { calendar }: Frame, options: ScheduleOptions, milestones: readonly ScheduleMilestone[]): Omit<Schedule, 'milestones' | 'calendar'> {
  const extensions = [...milestones.flatMap((milestone) => milestone.extensions ?? []), ...(options.otherExtensions ?? [])];
  const approvedDays = daysOf(extensions);
  const contractCompletionOn = addDays(options.dayKind, options.completeBy, approvedDays);
  const forecastCompletionOn = results.reduce((last, { forecast }) => (forecast.finishOn > last ? forecast.finishOn : last), '');
  const marginDays = calendar.indexAfter(contractCompletionOn) - end;
  const criticalPath = chain(results, early, end);
  const contractCompletion = contractStep(contractCompletionOn, options, extensions);
  const forecastCompletion = forecastStep(forecastCompletionOn, criticalPath, results);
  const steps = { contractCompletion, forecastCompletion, margin: marginStep(marginDays, contractCompletion, forecastCompletion) };
  return { contractCompletionOn, approvedDays, forecastCompletionOn, marginDays, criticalPath, steps };
}

/** From the last finish back along what holds each date; of equal ones the one that holds no other, then the smallest id. */
function chain(results: readonly MilestoneDates[], early: readonly Position[], end: number): string[] {
  const drivers = new Map<string, Driver>(results.map(({ id, driver }) => [id, driver]));
  const lasts = results.flatMap(({ id }, i) => (early[i]?.finish === end ? [id] : []));
  const path: string[] = [];
  // an event at the very end comes after the work that it waits for, on the same day
  const holding = new Set(lasts.flatMap((id) => drivers.get(id) ?? []).map((driver) => (driver.by === 'predecessor' ? driver.id : null)));
  let at: string | null = lasts.filter((id) => !holding.has(id)).reduce((a, b) => (b < a ? b : a));
  while (at !== null) {
    path.push(at);
    const driver = drivers.get(at);
    at = driver?.by === 'predecessor' ? driver.id : null;
  }
  return path.reverse();
}
