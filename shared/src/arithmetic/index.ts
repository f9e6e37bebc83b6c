export { date, given, money, quantity, rate, step, text } from './step.ts';
export type { Figure, Origin, Step } from './step.ts';
export { InvalidInput, must } from './invalid-input.ts';
