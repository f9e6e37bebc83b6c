import { z } from 'zod';
import { BusinessDate, Id, Instant, Line, PositiveCents } from './common.ts';

export const lineKinds = ['base', 'allowance', 'contingency', 'change'] as const;
const draftKinds = ['base', 'allowance', 'contingency'] as const;

/** The most bytes that a schedule's file may have. */
export const MOST_SCHEDULE_BYTES = 5_000_000;

/** The text fields beside the file; the sheet by its name, where a workbook holds several. */
export const PreviewSchedule = z.strictObject({ sheet: z.string().max(60).optional() });

const text = z.string();
export const SchedulePreview = z.object({
  fileName: text,
  sheet: text.nullable(),
  sheets: z.array(text),
  headerRow: z.int(),
  columns: z.array(z.object({ field: z.enum(['number', 'phase', 'description', 'scheduled', 'allowance', 'milestone']), column: text, title: text })),
  lines: z.array(z.object({ row: z.int().nullable(), number: text, phase: text, description: text, scheduled: text, kind: z.enum(draftKinds), milestone: text })),
  problems: z.array(z.object({ row: z.int(), column: text.nullable(), severity: z.enum(['error', 'note']), message: text })),
  sumCents: z.int(),
  contractSumCents: z.int(),
  differenceCents: z.int(),
  /** The contract time, over which milestones are proposed. */
  startOn: BusinessDate,
  completeBy: BusinessDate,
  milestones: z.array(z.object({ name: text, plannedOn: BusinessDate })),
});

export const ImportSchedule = z.strictObject({
  /** In building order, from the ground up. */
  milestones: z.array(z.strictObject({ id: Id, name: Line(120), plannedOn: BusinessDate.nullable() })).max(60, 'A job has at most 60 milestones.'),
  lines: z
    .array(
      z.strictObject({
        id: Id,
        number: Line(20, 0),
        phase: Line(120),
        description: Line(300),
        scheduledCents: PositiveCents,
        kind: z.enum(draftKinds),
        milestoneId: Id.nullable(),
      }),
    )
    .min(1, 'Enter at least one line.')
    .max(2_000, 'A schedule has at most 2,000 lines.'),
});

export const ScheduleLine = z.object({
  id: Id,
  number: text,
  position: z.int(),
  phase: text,
  description: text,
  scheduledCents: z.int(),
  kind: z.enum(lineKinds),
  milestoneId: Id.nullable(),
  changeId: Id.nullable(),
});

export const ScheduleOfValues = z.object({
  lines: z.array(ScheduleLine),
  milestones: z.array(z.object({ id: Id, name: text })),
  importedAt: Instant.nullable(),
  /** Whether another import may still take its place: nothing rests on it. */
  replaceable: z.boolean(),
  sumCents: z.int(),
  contractSumTodayCents: z.int(),
  differenceCents: z.int(),
});

export type PreviewSchedule = z.infer<typeof PreviewSchedule>;
export type SchedulePreview = z.infer<typeof SchedulePreview>;
export type ImportSchedule = z.infer<typeof ImportSchedule>;
export type ScheduleLine = z.infer<typeof ScheduleLine>;
export type ScheduleOfValues = z.infer<typeof ScheduleOfValues>;
