export { changeEffect, changeSteps } from './effect.ts';
export type { ChangeEffect, ChangeSnapshot, Funding, ReviewFact, ScopeLine } from './effect.ts';
