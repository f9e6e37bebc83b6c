export { changeEffect, changeSteps, priceSteps } from './effect.ts';
export type { ChangeEffect, ChangeSnapshot, Funding, ReviewFact, ScopeLine } from './effect.ts';
