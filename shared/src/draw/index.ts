export { computeDraw } from './compute-draw.ts';
export { draftDraw, moveOnHandToWork, workFromPercent } from './draft.ts';
export type { DraftInput, LineToDraft, ProofState } from './draft.ts';
export { applyObjections } from './objections.ts';
export type { Objection } from './objections.ts';
export { withholdingLimit } from './retainage.ts';
export { firstState } from './types.ts';
export type {
  ComputedDraw,
  ComputedLine,
  ContractStyle,
  DepositTerms,
  DrawInput,
  DrawLine,
  DrawState,
  DrawSummary,
  RetainageRelease,
  RetainageStep,
  RetainageTerms,
} from './types.ts';
export { lineSteps, rowSteps } from './row-steps.ts';
export type { LineFigures, RowFigures } from './row-steps.ts';
export { seenOfBilled } from './seen.ts';
export type { SeenLine } from './seen.ts';
