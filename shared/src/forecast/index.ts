export { cashAhead } from './cash-ahead.ts';
export { compareCashAhead } from './compare.ts';
export type { CashAheadComparison, MonthDifference } from './compare.ts';
export type { AheadLine, AheadLoan, CashAhead, CashAheadInput, CashMonth, Expected, IssuedChange, Month, UnpaidDraw } from './types.ts';
