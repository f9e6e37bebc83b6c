export { changeEffect, changeSteps, priceSteps } from './effect.ts';
export type { ChangeEffect, ChangeSnapshot, Funding, ReviewFact, ScopeLine } from './effect.ts';
export { contractSumSteps, signedSteps } from './log-steps.ts';
export type { LoggedChange } from './log-steps.ts';
