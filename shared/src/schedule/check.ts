import { must } from '../arithmetic/index.ts';
import type { Extension, ScheduleMilestone, ScheduleOptions } from './types.ts';
import { scheduleDay } from './work-calendar.ts';

const MOST_DAYS = 5_000;

/** Checks everything about a schedule but its links' ends, which the network checks. Throws InvalidInput naming the field. */
export function checkSchedule(milestones: readonly ScheduleMilestone[], options: ScheduleOptions): void {
  scheduleDay(options.startOn, 'options.startOn');
  scheduleDay(options.completeBy, 'options.completeBy');
  must(options.completeBy >= options.startOn, 'options.completeBy', options.completeBy, 'must not lie before the start');
  if (options.asOf) scheduleDay(options.asOf, 'options.asOf');
  must(['calendar', 'working'].includes(options.dayKind), 'options.dayKind', options.dayKind, 'must be calendar or working');
  checkExtensions(options.otherExtensions ?? [], 'options.otherExtensions');
  must(milestones.length > 0, 'milestones', milestones, 'must hold at least one milestone');
  const ids = new Set<string>();
  milestones.forEach((milestone, i) => {
    must(milestone.id !== '' && !ids.has(milestone.id), `milestones.${i}.id`, milestone.id, 'must be an id of its own');
    ids.add(milestone.id);
    checkMilestone(milestone, options.asOf ?? null, `milestones.${i}`);
  });
  const approved = [...milestones.flatMap(({ extensions = [] }) => extensions), ...(options.otherExtensions ?? [])].reduce((total, { days }) => total + days, 0);
  must(approved <= MOST_DAYS, 'milestones', approved, `must not hold more than ${MOST_DAYS} approved days`);
}

function checkMilestone(milestone: ScheduleMilestone, asOf: string | null, field: string): void {
  wholeDays(milestone.durationDays, `${field}.durationDays`);
  for (const name of ['plannedStartOn', 'plannedFinishOn', 'actualStartOn', 'actualFinishOn'] as const) {
    const date = milestone[name];
    if (!date) continue;
    scheduleDay(date, `${field}.${name}`);
    if (asOf !== null && name.startsWith('actual')) must(date <= asOf, `${field}.${name}`, date, 'must not lie after today');
  }
  const { plannedStartOn, plannedFinishOn, actualStartOn, actualFinishOn } = milestone;
  if (plannedStartOn && plannedFinishOn) must(plannedStartOn <= plannedFinishOn, `${field}.plannedFinishOn`, plannedFinishOn, 'must not lie before the planned start');
  if (actualStartOn && actualFinishOn) must(actualStartOn <= actualFinishOn, `${field}.actualFinishOn`, actualFinishOn, 'must not lie before the actual start');
  const before = new Set<string>();
  milestone.predecessors?.forEach(({ id, lagDays = 0 }, i) => {
    must(!before.has(id), `${field}.predecessors.${i}.id`, id, 'must be named once');
    before.add(id);
    wholeDays(lagDays, `${field}.predecessors.${i}.lagDays`);
  });
  checkExtensions(milestone.extensions ?? [], `${field}.extensions`);
}

function checkExtensions(extensions: readonly Extension[], field: string): void {
  extensions.forEach(({ days }, i) => wholeDays(days, `${field}.${i}.days`));
}

function wholeDays(days: number, field: string): void {
  must(Number.isSafeInteger(days) && days >= 0 && days <= MOST_DAYS, field, days, `must be a whole number of days from 0 to ${MOST_DAYS}`);
}
