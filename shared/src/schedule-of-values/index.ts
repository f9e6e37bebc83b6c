export { MOST_LINES, MOST_MILESTONES, checkDrafts, readScheduled, sumProblem } from './draft.ts';
export type { DraftCheck, DraftField, DraftLine, DraftProblem, LineKind } from './draft.ts';
export type { Cell, GridRow } from './grid.ts';
export type { ColumnField } from './header.ts';
export { proposeMilestones } from './propose-milestones.ts';
export type { ProposedMilestone } from './propose-milestones.ts';
export { isGeneralPhase, readGrid } from './read-grid.ts';
export type { ReadingProblem, ScheduleReading } from './read-grid.ts';
