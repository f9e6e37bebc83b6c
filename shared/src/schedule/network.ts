import { must } from '../arithmetic/index.ts';
import type { ScheduleMilestone } from './types.ts';

/** A link of the network by places in the list. */
export interface Link {
  from: number;
  to: number;
  lagDays: number;
}

export interface Network {
  /** Every milestone after all of its predecessors. */
  order: number[];
  before: Link[][];
  after: Link[][];
}

/** Links by place and an order that follows them; in time linear in milestones and links. An unknown predecessor or a cycle throws InvalidInput. */
export function network(milestones: readonly ScheduleMilestone[]): Network {
  const places = new Map(milestones.map(({ id }, i) => [id, i]));
  const before: Link[][] = milestones.map(() => []);
  const after: Link[][] = milestones.map(() => []);
  milestones.forEach(({ predecessors = [] }, to) => {
    predecessors.forEach(({ id, lagDays = 0 }, i) => {
      const from = places.get(id);
      must(from !== undefined, `milestones.${to}.predecessors.${i}.id`, id, 'must be a milestone of the schedule');
      const link = { from, to, lagDays };
      before[to]?.push(link);
      after[from]?.push(link);
    });
  });
  return { order: sorted(milestones, before, after), before, after };
}

function sorted(milestones: readonly ScheduleMilestone[], before: readonly Link[][], after: readonly Link[][]): number[] {
  const waiting = before.map((links) => links.length);
  const order = waiting.flatMap((count, i) => (count === 0 ? [i] : []));
  for (let next = 0; next < order.length; next += 1) {
    for (const { to } of after[order[next] ?? -1] ?? []) {
      const left = (waiting[to] ?? 0) - 1;
      waiting[to] = left;
      if (left === 0) order.push(to);
    }
  }
  if (order.length < milestones.length) {
    const names = circle(milestones, before, waiting).map((i) => milestones[i]?.name ?? '');
    must(false, 'milestones', names, `must not wait for one another in a circle: ${names.join(' → ')}`);
  }
  return order;
}

/** Walks back along predecessors that can't be ordered until one comes again; in the order in which work would flow, first and last the same. */
function circle(milestones: readonly ScheduleMilestone[], before: readonly Link[][], waiting: readonly number[]): number[] {
  const id = (i: number) => milestones[i]?.id ?? '';
  const least = (places: readonly number[]) => places.reduce((a, b) => (id(b) < id(a) ? b : a));
  const stuck = waiting.flatMap((count, i) => (count > 0 ? [i] : []));
  const path: number[] = [];
  const seen = new Map<number, number>();
  let at = least(stuck);
  while (!seen.has(at)) {
    seen.set(at, path.length);
    path.push(at);
    at = least((before[at] ?? []).map(({ from }) => from).filter((from) => (waiting[from] ?? 0) > 0));
  }
  const around = path.slice(seen.get(at)).reverse();
  // the same circle is named the same way whatever order the milestones came in
  const start = around.indexOf(least(around));
  const turned = [...around.slice(start), ...around.slice(0, start)];
  return [...turned, ...turned.slice(0, 1)];
}
