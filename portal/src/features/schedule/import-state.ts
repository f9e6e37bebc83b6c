import { v7 } from 'uuid';
import { checkDrafts, proposeMilestones, readScheduled, type DraftCheck, type DraftField, type DraftLine, type ReadingProblem } from '@tallypole/shared/schedule-of-values';
import type { ImportSchedule, SchedulePreview } from '@tallypole/shared/schemas/schedule-of-values';
import type { CellEdit } from '../../ui/line-sheet/types.ts';

/** A line on the import page; its id is the line's own, so that every try to import sends the same. */
export interface SheetLine {
  id: string;
  draft: DraftLine;
  problems: Partial<Record<DraftField, string>>;
}

export interface PlannedMilestone {
  id: string;
  name: string;
  plannedOn: string | null;
}

export interface ImportState {
  fileName: string;
  sheet: string | null;
  sheets: string[];
  notes: ReadingProblem[];
  /** The contract time. */
  startOn: string;
  completeBy: string;
  lines: SheetLine[];
  milestones: PlannedMilestone[];
  check: DraftCheck;
}

const BLANK: DraftLine = { row: null, number: '', phase: '', description: '', scheduled: '', kind: 'base', milestone: '' };

export function fromPreview(preview: SchedulePreview): ImportState {
  const { fileName, sheet, sheets, startOn, completeBy, contractSumCents } = preview;
  const notes = preview.problems.filter(({ severity }) => severity === 'note');
  const lines = preview.lines.map((draft) => ({ id: v7(), draft, problems: {} }));
  const milestones = preview.milestones.map(({ name, plannedOn }) => ({ id: v7(), name, plannedOn }));
  return checked({ fileName, sheet, sheets, notes, startOn, completeBy, milestones, check: checkDrafts([], contractSumCents) }, lines);
}

/** Edits of the sheet; a paste may name rows beyond the last one, which are then added. */
export function edited(state: ImportState, edits: readonly CellEdit[]): ImportState {
  const lines = [...state.lines];
  for (const { row, column, text } of edits) {
    while (lines.length <= row) lines.push(newLine(lines.at(-1)));
    const line = lines[row];
    if (line) lines[row] = { ...line, draft: { ...line.draft, [column]: text } };
  }
  return checked(state, lines);
}

export const added = (state: ImportState, scheduled: string): ImportState => {
  const line = newLine(state.lines.at(-1));
  return checked(state, [...state.lines, { ...line, draft: { ...line.draft, scheduled } }]);
};

export const removed = (state: ImportState, id: string): ImportState => checked(state, state.lines.filter((line) => line.id !== id));

export const planned = (state: ImportState, id: string, plannedOn: string | null): ImportState => ({
  ...state,
  milestones: state.milestones.map((milestone) => (milestone.id === id ? { ...milestone, plannedOn } : milestone)),
});

/** What the server is sent; only for a state that is ready. */
export function toImport({ lines, milestones }: ImportState): ImportSchedule {
  const idOf = new Map(milestones.map(({ id, name }) => [name, id]));
  return {
    milestones,
    lines: lines.map(({ id, draft: { number, phase, description, scheduled, kind, milestone } }) => {
      const scheduledCents = readScheduled(scheduled);
      return { id, number, phase, description, scheduledCents: typeof scheduledCents === 'number' ? scheduledCents : 0, kind, milestoneId: idOf.get(milestone.trim()) ?? null };
    }),
  };
}

/** A new line goes on in the phase of the one before it. */
const newLine = (before: SheetLine | undefined): SheetLine => ({ id: v7(), draft: { ...BLANK, phase: before?.draft.phase ?? '', milestone: before?.draft.milestone ?? '' }, problems: {} });

/** Checks all lines; those about which nothing changed stay the same object, so that they aren't drawn anew. */
function checked(state: Omit<ImportState, 'lines'>, lines: SheetLine[]): ImportState {
  const drafts = lines.map(({ draft }) => draft);
  const check = checkDrafts(drafts, state.check.contractSumCents);
  const problems = lines.map((): SheetLine['problems'] => ({}));
  for (const { line, field, message } of check.problems) {
    const own = problems[line];
    if (own) own[field] ??= message;
  }
  const marked = lines.map((line, i) => (sameProblems(line.problems, problems[i] ?? {}) ? line : { ...line, problems: problems[i] ?? {} }));
  return { ...state, lines: marked, check, milestones: milestonesOf(drafts, state) };
}

function milestonesOf(drafts: DraftLine[], { milestones, startOn, completeBy }: Omit<ImportState, 'lines'>): PlannedMilestone[] {
  const before = new Map(milestones.map((milestone) => [milestone.name, milestone]));
  return proposeMilestones(drafts, startOn, completeBy).map(({ name, plannedOn }) => before.get(name) ?? { id: v7(), name, plannedOn });
}

function sameProblems(a: SheetLine['problems'], b: SheetLine['problems']): boolean {
  const fields = Object.keys({ ...a, ...b }) as DraftField[];
  return fields.every((field) => a[field] === b[field]);
}
