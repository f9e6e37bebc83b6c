export { atLeastZero, basisPoints, cents, minus, sum } from './cents.ts';
export type { BasisPoints, Cents } from './cents.ts';
export { extend, extendExact, tenThousandths } from './decimal.ts';
export type { Decimal } from './decimal.ts';
export { formatAmount, formatChange, formatMoney, formatRate } from './format.ts';
export { formatFigure } from './format-figure.ts';
export { parseMoney, parseRate } from './parse.ts';
export { divideRounded, fixed, percentExact, percentOf } from './rounding.ts';
export { split } from './split.ts';
