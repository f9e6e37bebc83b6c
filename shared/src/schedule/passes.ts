import type { Link, Network } from './network.ts';
import type { Driver, ScheduleMilestone } from './types.ts';
import type { WorkCalendar } from './work-calendar.ts';

/** A milestone in working days since the origin: it starts on the morning after `start` of them have passed and finishes when `finish` have. */
export interface Position {
  start: number;
  finish: number;
}

export interface Progress {
  milestone: ScheduleMilestone;
  state: 'finished' | 'under_way' | 'upcoming';
  /** With its approved days. */
  duration: number;
}

export interface Frame {
  calendar: WorkCalendar;
  network: Network;
  /** The morning of the job's first day. */
  jobStart: number;
  /** The morning of today, or null for the plan alone. */
  today: number | null;
  holdPlannedStarts: boolean;
}

/** Early positions, and what holds each of them. Of several that hold it alike, a predecessor is named before a date, the smallest id first. */
export function forwardPass(items: readonly Progress[], frame: Frame): { early: Position[]; drivers: Driver[] } {
  const early: Position[] = items.map(() => ({ start: 0, finish: 0 }));
  const drivers: Driver[] = items.map(() => ({ by: 'job_start' }));
  for (const i of frame.network.order) {
    const item = items[i];
    if (!item) continue;
    const { position, driver } = place(item, frame, frame.network.before[i] ?? [], (at) => ({ finish: early[at]?.finish ?? 0, id: items[at]?.milestone.id ?? '' }));
    early[i] = position;
    drivers[i] = driver;
  }
  return { early, drivers };
}

function place(item: Progress, frame: Frame, before: readonly Link[], at: (place: number) => { finish: number; id: string }): { position: Position; driver: Driver } {
  const { calendar, today } = frame;
  const { milestone, duration } = item;
  if (milestone.actualFinishOn) {
    const finish = calendar.indexAfter(milestone.actualFinishOn);
    const start = milestone.actualStartOn ? calendar.indexFrom(milestone.actualStartOn) : Math.max(0, finish - duration);
    return { position: { start: Math.min(start, finish), finish }, driver: { by: 'actual_finish' } };
  }
  if (milestone.actualStartOn) {
    // what was started out of sequence no longer waits to start, but doesn't finish before what it rests on
    const start = calendar.indexFrom(milestone.actualStartOn);
    const bounds: Bound[] = [...before.map((link) => bound(at(link.from), 0)), { at: start + duration, driver: { by: 'actual_start' } }];
    if (today !== null) bounds.push({ at: today + 1, driver: { by: 'today' } });
    const held = latest(bounds);
    return { position: { start, finish: held.at }, driver: held.driver };
  }
  const bounds: Bound[] = before.map((link) => bound(at(link.from), link.lagDays));
  const planned = plannedBound(item, frame, before.length > 0);
  if (planned !== null) bounds.push({ at: planned, driver: { by: 'planned_start' } });
  // an event that hasn't come can come today, at the end of the day
  const eventLater = duration === 0 ? 1 : 0;
  if (today !== null && today > frame.jobStart) bounds.push({ at: today + eventLater, driver: { by: 'today' } });
  bounds.push({ at: frame.jobStart, driver: { by: 'job_start' } });
  const held = latest(bounds);
  return { position: { start: held.at, finish: held.at + duration }, driver: held.driver };
}

interface Bound {
  at: number;
  driver: Driver;
}

const bound = ({ finish, id }: { finish: number; id: string }, lag: number): Bound => ({ at: finish + lag, driver: { by: 'predecessor', id } });

/** The latest bound; of equal ones the earlier in the list, of equal predecessors the one with the smallest id. */
function latest(bounds: readonly Bound[]): Bound {
  return bounds.reduce((a, b) => {
    if (b.at !== a.at) return b.at > a.at ? b : a;
    return a.driver.by === 'predecessor' && b.driver.by === 'predecessor' && b.driver.id < a.driver.id ? b : a;
  });
}

function plannedBound({ milestone, duration }: Progress, { calendar, holdPlannedStarts, jobStart }: Frame, hasPredecessor: boolean): number | null {
  if (hasPredecessor && !holdPlannedStarts) return null;
  const { plannedStartOn, plannedFinishOn } = milestone;
  if (duration === 0) {
    const on = plannedStartOn ?? plannedFinishOn;
    return on ? calendar.indexFrom(on) + 1 : null;
  }
  if (plannedStartOn) return calendar.indexFrom(plannedStartOn);
  return plannedFinishOn ? Math.max(jobStart, calendar.indexAfter(plannedFinishOn) - milestone.durationDays) : null;
}

/** The latest positions that leave the end where it is, with total and free float. What is finished stays where it is. */
export function backwardPass(items: readonly Progress[], { order, after }: Network, early: readonly Position[], end: number): { late: Position[]; total: number[]; free: number[] } {
  const late: Position[] = early.map((position) => ({ ...position }));
  const total = early.map(() => 0);
  const free = early.map(() => 0);
  for (const i of [...order].reverse()) {
    const item = items[i];
    const own = early[i];
    if (!item || !own || item.state === 'finished') continue;
    let latestFinish = end;
    let slack = end - own.finish;
    for (const { to, lagDays } of after[i] ?? []) {
      const next = early[to];
      const nextLate = late[to];
      const state = items[to]?.state;
      // a finished follower waits for nothing, one under way only can't finish first
      if (!next || !nextLate || state === 'finished') continue;
      const [soon, atLatest] = state === 'under_way' ? [next.finish, nextLate.finish] : [next.start - lagDays, nextLate.start - lagDays];
      latestFinish = Math.min(latestFinish, atLatest);
      slack = Math.min(slack, soon - own.finish);
    }
    late[i] = { start: item.state === 'under_way' ? own.start : latestFinish - item.duration, finish: latestFinish };
    total[i] = latestFinish - own.finish;
    free[i] = slack;
  }
  return { late, total, free };
}
