import { describe, expect, it } from 'vitest';
import { InvalidInput, type Step } from '../arithmetic/index.ts';
import { addCalendarDays } from '../due/index.ts';
import { compareSchedules, computeSchedule, workingDaysBetween, type MilestoneDates, type Schedule, type ScheduleMilestone, type ScheduleOptions } from './index.ts';

const everyDay = { weekdays: [0, 1, 2, 3, 4, 5, 6], holidays: 'none' as const };
// 2027-03-01 is a Monday
const options: ScheduleOptions = { startOn: '2027-03-01', completeBy: '2027-12-31', dayKind: 'working' };
const milestone = (id: string, durationDays: number, predecessors: (string | [string, number])[] = [], more: Partial<ScheduleMilestone> = {}): ScheduleMilestone => ({
  id,
  name: id[0]?.toUpperCase() + id.slice(1),
  durationDays,
  predecessors: predecessors.map((given) => (typeof given === 'string' ? { id: given } : { id: given[0], lagDays: given[1] })),
  ...more,
});
const of = (schedule: Schedule, id: string): MilestoneDates => schedule.milestones.find((found) => found.id === id)!;
const house = [milestone('foundation', 5), milestone('frame', 8, ['foundation']), milestone('roof', 3, ['frame']), milestone('plumbing', 4, ['frame']), milestone('drywall', 6, ['roof', 'plumbing']), milestone('final', 0, ['drywall'])];

describe('a published network', () => {
  // M. Vanhoucke, Integrated Project Management and Control, Springer 2014, p. 6 (project 1), early and late times as they stand in the tests
  // of the R package criticalpath (github.com/rubens2005/criticalpath, tests of a schedule from a data frame). The free floats are worked by hand.
  const durations = [1, 2, 2, 4, 3, 3, 3, 2, 1, 1, 2, 1, 1, 1, 1, 2, 1];
  const links = [[1, 2], [1, 3], [2, 4], [2, 5], [2, 6], [3, 7], [3, 8], [3, 9], [3, 10], [4, 11], [5, 11], [6, 11], [7, 12], [8, 13], [9, 14], [10, 15], ...[11, 12, 13, 14, 15].flatMap((from) => [[from, 16], [from, 17]])];
  const early = [[0, 1], [1, 3], [1, 3], [3, 7], [3, 6], [3, 6], [3, 6], [3, 5], [3, 4], [3, 4], [7, 9], [6, 7], [5, 6], [4, 5], [4, 5], [9, 11], [9, 10]];
  const late = [[0, 1], [1, 3], [3, 5], [3, 7], [4, 7], [4, 7], [5, 8], [6, 8], [7, 8], [7, 8], [7, 9], [8, 9], [8, 9], [8, 9], [8, 9], [9, 11], [10, 11]];
  const free = [0, 0, 0, 0, 1, 1, 0, 0, 0, 0, 0, 2, 3, 4, 4, 0, 1];
  const schedule = computeSchedule(
    durations.map((duration, i) => milestone(String(i + 1), duration, links.filter(([, to]) => to === i + 1).map(([from]) => String(from)))),
    { ...options, calendar: everyDay },
  );
  const span = ([start = 0, finish = 0]: number[]) => ({ startOn: addCalendarDays('2027-03-01', start), finishOn: addCalendarDays('2027-03-01', finish - 1) });

  it.each(durations.map((_, i) => i))('dates activity %# as printed', (i) => {
    const { early: soon, late: atLatest, totalFloatDays, freeFloatDays } = of(schedule, String(i + 1));
    expect({ soon, atLatest, totalFloatDays, freeFloatDays }).toEqual({ soon: span(early[i]!), atLatest: span(late[i]!), totalFloatDays: late[i]![0]! - early[i]![0]!, freeFloatDays: free[i] });
  });

  it('takes 11 days, along the printed critical activities', () => {
    expect(schedule.forecastCompletionOn).toBe(addCalendarDays('2027-03-01', 10));
    expect(schedule.milestones.filter(({ critical }) => critical).map(({ id }) => id)).toEqual(['1', '2', '4', '11', '16']);
    expect(schedule.criticalPath).toEqual(['1', '2', '4', '11', '16']);
  });
});

// own figures, worked by hand on a calendar of 2027
describe('a house on working days', () => {
  const plan = computeSchedule(house, options);

  it('skips weekends, and an event comes at the end of the last day before it', () => {
    expect(house.map(({ id }) => of(plan, id).early)).toEqual([
      { startOn: '2027-03-01', finishOn: '2027-03-05' },
      { startOn: '2027-03-08', finishOn: '2027-03-17' },
      { startOn: '2027-03-18', finishOn: '2027-03-22' },
      { startOn: '2027-03-18', finishOn: '2027-03-23' },
      { startOn: '2027-03-24', finishOn: '2027-03-31' },
      { startOn: '2027-03-31', finishOn: '2027-03-31' },
    ]);
    expect(of(plan, 'roof')).toMatchObject({ totalFloatDays: 1, freeFloatDays: 1, critical: false, late: { startOn: '2027-03-19', finishOn: '2027-03-23' } });
    expect(plan.criticalPath).toEqual(['foundation', 'frame', 'plumbing', 'drywall', 'final']);
  });

  it('keeps holidays, Saturday ones too where Saturdays are worked, and days the caller closes', () => {
    const one = (days: number, startOn: string, calendar: ScheduleOptions['calendar']) => computeSchedule([milestone('a', days)], { ...options, startOn, completeBy: '2028-01-01', calendar: calendar ?? {} }).forecastCompletionOn;
    // July 4, 2027 is a Sunday, observed on Monday; June 19, 2027 is a Saturday, observed on Friday
    expect(one(2, '2027-07-02', {})).toBe('2027-07-06');
    expect(one(2, '2027-07-02', { holidays: 'none' })).toBe('2027-07-05');
    expect(one(2, '2027-06-17', { weekdays: [1, 2, 3, 4, 5, 6] })).toBe('2027-06-21');
    expect(one(2, '2027-06-17', { weekdays: [1, 2, 3, 4, 5, 6], holidays: 'bank' })).toBe('2027-06-18');
    expect(one(2, '2027-03-04', { closedOn: ['2027-03-05'] })).toBe('2027-03-08');
    expect(workingDaysBetween({ weekdays: [1, 2, 3, 4, 5], holidays: 'office', closedOn: [] }, '2027-07-02', '2027-07-06')).toBe(1);
    expect(workingDaysBetween({ weekdays: [1, 2, 3, 4, 5], holidays: 'office', closedOn: [] }, '2027-07-06', '2027-07-02')).toBe(-1);
  });

  it('waits out a lag in working days', () => {
    const cured = computeSchedule([milestone('walls', 2), milestone('deck', 1, [['walls', 3]])], options);
    expect(of(cured, 'deck').early).toEqual({ startOn: '2027-03-08', finishOn: '2027-03-08' });
    expect(of(cured, 'walls')).toMatchObject({ critical: true, freeFloatDays: 0 });
  });

  it('holds a booked planned start, or follows the network', () => {
    const booked = house.map((given) => (given.id === 'drywall' ? { ...given, plannedStartOn: '2027-04-05', plannedFinishOn: '2027-04-12' } : given));
    const held = computeSchedule(booked, options);
    expect(of(held, 'drywall')).toMatchObject({ early: { startOn: '2027-04-05', finishOn: '2027-04-12' }, driver: { by: 'planned_start' }, slipDays: 0 });
    expect(of(held, 'plumbing')).toMatchObject({ totalFloatDays: 8, freeFloatDays: 8 });
    expect(of(computeSchedule(booked, { ...options, plannedStarts: 'follow' }), 'drywall')).toMatchObject({ early: { startOn: '2027-03-24' }, slipDays: -8 });
    expect(of(computeSchedule([milestone('cabinets', 3, [], { plannedFinishOn: '2027-05-12' })], options), 'cabinets').early).toEqual({ startOn: '2027-05-10', finishOn: '2027-05-12' });
    expect(of(computeSchedule([milestone('permit', 0, [], { plannedFinishOn: '2027-03-10' }), milestone('dig', 1, ['permit'])], options), 'dig').early.startOn).toBe('2027-03-11');
  });
});

describe('the forecast', () => {
  const with_ = (changes: Record<string, Partial<ScheduleMilestone>>, more: Partial<ScheduleOptions> = {}) => computeSchedule(house.map((given) => ({ ...given, ...changes[given.id] })), { ...options, ...more });

  it('follows from actual dates', () => {
    const late = with_({ foundation: { actualStartOn: '2027-03-02', actualFinishOn: '2027-03-10' }, frame: { actualStartOn: '2027-03-11' } }, { asOf: '2027-03-12' });
    expect(of(late, 'foundation')).toMatchObject({ state: 'finished', forecast: { startOn: '2027-03-02', finishOn: '2027-03-10' }, critical: false, totalFloatDays: 0 });
    expect(of(late, 'frame')).toMatchObject({ state: 'under_way', forecast: { startOn: '2027-03-11', finishOn: '2027-03-22' }, driver: { by: 'actual_start' } });
    expect(late.forecastCompletionOn).toBe('2027-04-05');
    expect(late.contractCompletionOn).toBe('2027-12-31');
  });

  it('shows a Saturday that was worked, and goes on from the next working day', () => {
    const saturday = with_({ foundation: { actualFinishOn: '2027-03-06' } }, { asOf: '2027-03-08' });
    expect(of(saturday, 'foundation').forecast).toEqual({ startOn: '2027-03-01', finishOn: '2027-03-06' });
    expect(of(saturday, 'frame').forecast.startOn).toBe('2027-03-08');
  });

  it('pushes what has not come past today', () => {
    const idle = with_({}, { asOf: '2027-03-15' });
    expect(of(idle, 'foundation')).toMatchObject({ forecast: { startOn: '2027-03-15', finishOn: '2027-03-19' }, driver: { by: 'today' } });
    const slow = with_({ foundation: { actualStartOn: '2027-03-01' } }, { asOf: '2027-03-15' });
    expect(of(slow, 'foundation')).toMatchObject({ forecast: { startOn: '2027-03-01', finishOn: '2027-03-15' }, driver: { by: 'today' } });
    expect(of(computeSchedule([milestone('permit', 0, [], { plannedFinishOn: '2027-03-02' })], { ...options, asOf: '2027-03-15' }), 'permit').forecast.finishOn).toBe('2027-03-15');
  });

  it('lets what started out of sequence finish no sooner than what it rests on', () => {
    const out = with_({ foundation: { actualStartOn: '2027-03-01' }, frame: { actualStartOn: '2027-03-02', durationDays: 1 } }, { asOf: '2027-03-03' });
    expect(of(out, 'frame')).toMatchObject({ forecast: { startOn: '2027-03-02', finishOn: '2027-03-05' }, driver: { by: 'predecessor', id: 'foundation' } });
    expect(of(out, 'foundation')).toMatchObject({ totalFloatDays: 0, critical: true });
  });
});

describe('approved days', () => {
  const change = (days: number) => ({ id: 'c7', label: 'Change 7', days });
  const on = (id: string, days: number, more: Partial<ScheduleOptions> = {}) => computeSchedule(house.map((given) => (given.id === id ? { ...given, extensions: [change(days)] } : given)), { ...options, completeBy: '2027-03-31', ...more });
  const before = computeSchedule(house, { ...options, completeBy: '2027-03-31' });

  it('move the contract by all of them, the forecast by what the network lets through', () => {
    const moved = compareSchedules(before, on('roof', 3));
    expect(moved.moved.map(({ id, workingDays }) => [id, workingDays])).toEqual([['roof', 3], ['drywall', 2], ['final', 2]]);
    expect(moved.forecastCompletion).toEqual({ before: '2027-03-31', after: '2027-04-02', workingDays: 2, calendarDays: 2 });
    expect(moved.contractCompletion).toEqual({ before: '2027-03-31', after: '2027-04-05', workingDays: 3, calendarDays: 5 });
    expect(on('roof', 3).marginDays).toBe(1);
  });

  it('are swallowed by float, yet still move the contract', () => {
    const moved = compareSchedules(before, on('roof', 1));
    expect(moved.moved.map(({ id }) => id)).toEqual(['roof']);
    expect(moved.forecastCompletion.workingDays).toBe(0);
    expect(moved.contractCompletion.workingDays).toBe(1);
  });

  it('in calendar days lengthen a milestone by their share of the work week, rounded up', () => {
    const calendar = on('foundation', 3, { dayKind: 'calendar' });
    expect(calendar.contractCompletionOn).toBe('2027-04-03');
    expect(of(calendar, 'foundation').durationDays).toBe(8);
    expect(of(on('foundation', 14, { dayKind: 'calendar' }), 'foundation').durationDays).toBe(15);
  });

  it('of a change on no milestone move the contract alone', () => {
    const elsewhere = computeSchedule(house, { ...options, completeBy: '2027-03-31', otherExtensions: [change(2)] });
    expect([elsewhere.contractCompletionOn, elsewhere.forecastCompletionOn, elsewhere.approvedDays, elsewhere.marginDays]).toEqual(['2027-04-02', '2027-03-31', 2, 2]);
    expect(elsewhere.steps.contractCompletion.inputs.map(({ label }) => label)).toEqual(['Completion date as signed', 'Change 7']);
  });

  it('never lengthen what has finished', () => {
    const finished = computeSchedule([milestone('a', 2, [], { actualFinishOn: '2027-03-03', extensions: [change(9)] })], options);
    expect(finished.forecastCompletionOn).toBe('2027-03-03');
  });

  it('names milestones that came or went', () => {
    const after = computeSchedule([...house.slice(0, 5), milestone('punch', 2, ['drywall'])], options);
    expect(compareSchedules(before, after)).toMatchObject({ added: [{ id: 'punch', name: 'Punch' }], removed: [{ id: 'final', name: 'Final' }], moved: [] });
  });
});

describe('the arithmetic', () => {
  const flat = (step: Step): string[] => [step.label, ...step.inputs.flatMap(flat)];
  it('names the chain that the completion hangs on, and what each waits for', () => {
    const { steps } = computeSchedule(house, options);
    expect(steps.forecastCompletion.inputs.map(({ label }) => label)).toEqual(['Foundation finishes', 'Frame finishes', 'Plumbing finishes', 'Drywall finishes', 'Final finishes']);
    expect(flat(steps.margin)).toEqual(expect.arrayContaining(['First day of the job', 'Roof finishes', 'Takes', 'Completion date as signed']));
  });
});

describe('bad input to a schedule', () => {
  const run = (change: Partial<ScheduleMilestone>, more: Partial<ScheduleOptions> = {}) => () => computeSchedule([milestone('a', 1), { ...milestone('b', 1, ['a']), ...change }], { ...options, ...more });
  const fails: [string, () => unknown, string][] = [
    ['no milestone', () => computeSchedule([], options), 'milestones'],
    ['an id twice', run({ id: 'a' }), 'milestones.1.id'],
    ['an unknown predecessor', run({ predecessors: [{ id: 'a' }, { id: 'nobody' }] }), 'milestones.1.predecessors.1.id'],
    ['a predecessor twice', run({ predecessors: [{ id: 'a' }, { id: 'a' }] }), 'milestones.1.predecessors.1.id'],
    ['a negative lag', run({ predecessors: [{ id: 'a', lagDays: -1 }] }), 'milestones.1.predecessors.0.lagDays'],
    ['half a day', run({ durationDays: 0.5 }), 'milestones.1.durationDays'],
    ['a negative duration', run({ durationDays: -1 }), 'milestones.1.durationDays'],
    ['an absurd duration', run({ durationDays: 5001 }), 'milestones.1.durationDays'],
    ['negative approved days', run({ extensions: [{ id: 'c', label: 'c', days: -1 }] }), 'milestones.1.extensions.0.days'],
    ['too many approved days', run({ extensions: [{ id: 'c', label: 'c', days: 3000 }] }, { otherExtensions: [{ id: 'd', label: 'd', days: 3000 }] }), 'milestones'],
    ['a day that does not exist', run({ plannedStartOn: '2027-02-30' }), 'milestones.1.plannedStartOn'],
    ['a day of another century', run({ plannedStartOn: '1801-01-01' }), 'milestones.1.plannedStartOn'],
    ['a planned finish before its start', run({ plannedStartOn: '2027-04-02', plannedFinishOn: '2027-04-01' }), 'milestones.1.plannedFinishOn'],
    ['an actual finish before its start', run({ actualStartOn: '2027-04-02', actualFinishOn: '2027-04-01' }), 'milestones.1.actualFinishOn'],
    ['an actual date after today', run({ actualStartOn: '2027-04-02' }, { asOf: '2027-04-01' }), 'milestones.1.actualStartOn'],
    ['a completion before the start', run({}, { completeBy: '2027-02-28' }), 'options.completeBy'],
    ['an unknown kind of day', run({}, { dayKind: 'banking' as never }), 'options.dayKind'],
    ['a week without days', run({}, { calendar: { weekdays: [] } }), 'options.calendar.weekdays'],
    ['an eighth day', run({}, { calendar: { weekdays: [7] } }), 'options.calendar.weekdays.0'],
    ['unknown holidays', run({}, { calendar: { holidays: 'state' as never } }), 'options.calendar.holidays'],
    ['a closed day that does not exist', run({}, { calendar: { closedOn: ['2027-13-01'] } }), 'options.calendar.closedOn.0'],
    ['more than a hundred years', () => computeSchedule(Array.from({ length: 6 }, (_, i) => milestone(`m${i}`, 5000, i ? [`m${i - 1}`] : [])), options), 'milestones'],
  ];
  it.each(fails)('refuses %s and names the field', (_, attempt, field) => {
    expect(attempt).toThrow(InvalidInput);
    expect(attempt).toThrow(expect.objectContaining({ field }) as Error);
  });

  it('names the milestones of a cycle, the same way in any order, and not those that only wait for it', () => {
    const circle = [milestone('drywall', 1, ['roof']), milestone('frame', 1, ['roof', 'slab']), milestone('slab', 1), milestone('roof', 1, ['windows']), milestone('windows', 1, ['frame'])];
    const waiting = [...circle, milestone('attic', 1, ['windows'])];
    for (const given of [circle, [...circle].reverse(), waiting]) expect(() => computeSchedule(given, options)).toThrow('in a circle: Frame → Windows → Roof → Frame');
    expect(() => computeSchedule([milestone('a', 1, ['a'])], options)).toThrow('A → A');
  });
});
