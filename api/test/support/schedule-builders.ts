import { v7 } from 'uuid';
import { readScheduled } from '@tallypole/shared/schedule-of-values';
import type { ImportSchedule, SchedulePreview, ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import type { Visitor } from './visitor.ts';

/** What the import page sends for a preview that was left as it was. */
export function importable(preview: SchedulePreview): ImportSchedule {
  const milestones = preview.milestones.map(({ name, plannedOn }) => ({ id: v7(), name, plannedOn }));
  const idOf = new Map(milestones.map(({ id, name }) => [name, id]));
  const lines = preview.lines.map(({ number, phase, description, scheduled, kind, milestone }) => {
    const scheduledCents = readScheduled(scheduled);
    if (typeof scheduledCents !== 'number') throw new Error(scheduledCents.message);
    return { id: v7(), number, phase, description, scheduledCents, kind, milestoneId: idOf.get(milestone) ?? null };
  });
  return { milestones, lines };
}

export interface SmallSchedule {
  schedule: ScheduleOfValues;
  /** Milestones by name: Foundation, Framing, Finish. */
  milestoneId: Record<'Foundation' | 'Framing' | 'Finish', string>;
}

/** Three milestones and a general line whose lines add up to the 400,000.00 of the builders' job. */
export async function smallSchedule(principal: Visitor, jobId: string): Promise<SmallSchedule> {
  const milestoneId = { Foundation: v7(), Framing: v7(), Finish: v7() };
  const line = (number: string, phase: keyof typeof milestoneId | 'General', description: string, scheduledCents: number) => ({
    id: v7(), number, phase, description, scheduledCents, kind: 'base' as const, milestoneId: phase === 'General' ? null : milestoneId[phase],
  });
  const body: ImportSchedule = {
    milestones: Object.entries(milestoneId).map(([name, id], i) => ({ id, name, plannedOn: `2026-1${i}-15` })),
    lines: [
      line('1', 'Foundation', 'Footings', 5_000_000),
      line('2', 'Foundation', 'Walls', 5_000_000),
      line('3', 'Framing', 'Floor joists', 8_000_000),
      line('4', 'Framing', 'Roof trusses', 7_000_000),
      line('5', 'Finish', 'Trim and paint', 12_000_000),
      line('6', 'General', 'Supervision', 3_000_000),
    ],
  };
  const answer = await principal.post(`/jobs/${jobId}/schedule`, body);
  if (answer.status !== 201) throw new Error(answer.text);
  return { schedule: answer.body as ScheduleOfValues, milestoneId };
}
