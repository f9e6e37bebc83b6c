import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addCalendarDays, addDays, daysBetween } from '../due/index.ts';
import { computeSchedule, type Schedule, type ScheduleMilestone, type ScheduleOptions } from './index.ts';

const START = '2027-03-01';
const everyDay = { weekdays: [0, 1, 2, 3, 4, 5, 6], holidays: 'none' as const };
const options: ScheduleOptions = { startOn: START, completeBy: '2027-12-31', dayKind: 'working' };
const daily: ScheduleOptions = { ...options, calendar: everyDay };

/** A random network without cycles: a milestone waits only for earlier ones. */
const networks = (least = 1) =>
  fc.integer({ min: 1, max: 9 }).chain((size) =>
    fc.tuple(
      ...Array.from({ length: size }, (_, i) =>
        fc.record({
          durationDays: fc.integer({ min: least, max: 12 }),
          before: fc.subarray(Array.from({ length: i }, (_, place) => place)),
          lags: fc.array(fc.integer({ min: 0, max: 4 }), { minLength: i, maxLength: i }),
        }).map(({ durationDays, before, lags }): ScheduleMilestone => ({ id: `m${i}`, name: `M${i}`, durationDays, predecessors: before.map((place) => ({ id: `m${place}`, lagDays: lags[place] ?? 0 })) })),
      ),
    ),
  );

const offset = (date: string) => daysBetween(START, date);
const without = (schedule: Schedule, id: string) => schedule.milestones.filter((milestone) => milestone.id !== id).map(({ early }) => early);
const longer = (milestones: readonly ScheduleMilestone[], id: string, days: number) => milestones.map((milestone) => (milestone.id === id ? { ...milestone, durationDays: milestone.durationDays + days } : milestone));

/** The oracle: every path that leads to a milestone (or from it), each added up on its own; no order, no passes. */
function pathsTo(milestones: readonly ScheduleMilestone[], id: string): number[] {
  const { predecessors = [] } = milestones.find((milestone) => milestone.id === id)!;
  return [0, ...predecessors.flatMap(({ id: from, lagDays = 0 }) => pathsTo(milestones, from).map((length) => length + milestones.find((milestone) => milestone.id === from)!.durationDays + lagDays))];
}
function pathsFrom(milestones: readonly ScheduleMilestone[], id: string): number[] {
  const followers = milestones.flatMap((milestone) => (milestone.predecessors ?? []).filter((link) => link.id === id).map(({ lagDays = 0 }) => ({ to: milestone, lagDays })));
  return [0, ...followers.flatMap(({ to, lagDays }) => pathsFrom(milestones, to.id).map((length) => length + to.durationDays + lagDays))];
}

describe('any network', () => {
  it('has the dates that adding up every path gives', () => {
    fc.assert(
      fc.property(networks(), (milestones) => {
        const schedule = computeSchedule(milestones, daily);
        const working = computeSchedule(milestones, options);
        const end = Math.max(...milestones.map(({ id, durationDays }) => Math.max(...pathsTo(milestones, id)) + durationDays));
        expect(offset(schedule.forecastCompletionOn)).toBe(end - 1);
        schedule.milestones.forEach(({ id, durationDays, early, late, totalFloatDays, critical }, i) => {
          const start = Math.max(...pathsTo(milestones, id));
          const finish = end - Math.max(...pathsFrom(milestones, id));
          expect([offset(early.startOn), offset(early.finishOn)]).toEqual([start, start + durationDays - 1]);
          expect([offset(late.startOn), offset(late.finishOn)]).toEqual([finish - durationDays, finish - 1]);
          expect([totalFloatDays, critical]).toEqual([finish - durationDays - start, finish - durationDays === start]);
          // the same network on office days, counted by the office calendar itself
          expect(working.milestones[i]?.early.finishOn).toBe(addDays('working', addCalendarDays(START, -1), start + durationDays));
          expect(working.milestones[i]?.totalFloatDays).toBe(totalFloatDays);
        });
      }),
    );
  });

  it('moves nothing when a milestone slips by its free float, and something when it slips by a day more', () => {
    fc.assert(
      fc.property(networks(), fc.nat(), (milestones, pick) => {
        const { id } = milestones[pick % milestones.length]!;
        const before = computeSchedule(milestones, options);
        const { freeFloatDays } = before.milestones.find((milestone) => milestone.id === id)!;
        const slipped = computeSchedule(longer(milestones, id, freeFloatDays), options);
        expect(without(slipped, id)).toEqual(without(before, id));
        expect(slipped.forecastCompletionOn).toBe(before.forecastCompletionOn);
        const beyond = computeSchedule(longer(milestones, id, freeFloatDays + 1), options);
        expect([...without(beyond, id), beyond.forecastCompletionOn]).not.toEqual([...without(before, id), before.forecastCompletionOn]);
      }),
    );
  });

  it('keeps its completion when a milestone slips by its total float, and moves it by what goes beyond', () => {
    fc.assert(
      fc.property(networks(), fc.nat(), fc.integer({ min: 1, max: 9 }), (milestones, pick, more) => {
        const { id } = milestones[pick % milestones.length]!;
        const before = computeSchedule(milestones, daily);
        const { totalFloatDays } = before.milestones.find((milestone) => milestone.id === id)!;
        expect(computeSchedule(longer(milestones, id, totalFloatDays), daily).forecastCompletionOn).toBe(before.forecastCompletionOn);
        expect(computeSchedule(longer(milestones, id, totalFloatDays + more), daily).forecastCompletionOn).toBe(addCalendarDays(before.forecastCompletionOn, more));
      }),
    );
  });
});

describe('any job under way', () => {
  const day = fc.integer({ min: -20, max: 60 }).map((days) => addCalendarDays(START, days));
  const underWay = networks(0).chain((milestones) =>
    fc.record({
      asOf: fc.option(fc.constant(addCalendarDays(START, 60))),
      plannedStarts: fc.constantFrom('hold' as const, 'follow' as const),
      weekdays: fc.subarray([0, 1, 2, 3, 4, 5, 6], { minLength: 1 }),
      milestones: fc.tuple(...milestones.map((milestone) =>
        fc.record({ planned: fc.option(day), days: fc.array(day, { maxLength: 2 }), approved: fc.integer({ min: 0, max: 5 }) }).map(({ planned, days, approved }): ScheduleMilestone => {
          const [actualStartOn = null, actualFinishOn = null] = [...days].sort();
          return { ...milestone, plannedStartOn: planned, actualStartOn, actualFinishOn, extensions: approved ? [{ id: 'c', label: 'Change', days: approved }] : [] };
        }))),
    }));

  it('has no float below zero, free float within the total, a critical milestone while work is left that ends last, and one answer for any order', () => {
    fc.assert(
      fc.property(underWay, fc.infiniteStream(fc.nat()), ({ milestones, weekdays, asOf, plannedStarts }, random) => {
        const given: ScheduleOptions = { ...options, asOf, plannedStarts, calendar: { weekdays } };
        const schedule = computeSchedule(milestones, given);
        for (const { freeFloatDays, totalFloatDays, early, late, forecast } of schedule.milestones) {
          expect(freeFloatDays).toBeGreaterThanOrEqual(0);
          expect(totalFloatDays).toBeGreaterThanOrEqual(freeFloatDays);
          expect(early.startOn <= early.finishOn && late.finishOn >= early.finishOn && forecast.startOn <= forecast.finishOn).toBe(true);
        }
        const last = schedule.milestones.find(({ id }) => id === schedule.criticalPath.at(-1))!;
        expect(last.critical).toBe(last.state !== 'finished');
        const shuffled = milestones.map((milestone) => ({ milestone, key: random.next().value! })).sort((a, b) => a.key - b.key).map(({ milestone }) => milestone);
        const again = computeSchedule(shuffled, given);
        const byId = (a: { id: string }, b: { id: string }) => (a.id < b.id ? -1 : 1);
        expect([...again.milestones].sort(byId)).toEqual([...schedule.milestones].sort(byId));
        expect([again.criticalPath, again.forecastCompletionOn, again.marginDays]).toEqual([schedule.criticalPath, schedule.forecastCompletionOn, schedule.marginDays]);
      }),
    );
  });
});

it('takes 2,000 milestones in its stride', () => {
  const many = Array.from({ length: 2000 }, (_, i): ScheduleMilestone => ({ id: `m${i}`, name: `M${i}`, durationDays: 1 + (i % 3), predecessors: [...new Set([i - 1, i - 7, Math.floor(i / 2)])].filter((from) => from >= 0 && from < i).map((from) => ({ id: `m${from}` })) }));
  const took = () => {
    const before = performance.now();
    computeSchedule(many, options);
    return performance.now() - before;
  };
  // about 100 ms on a small machine; the best of three, since others work on it too. Following every path would never come to an end.
  expect(Math.min(took(), took(), took())).toBeLessThan(1000);
});
