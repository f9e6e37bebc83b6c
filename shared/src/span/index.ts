export { gradeNames, speciesNames } from './design-values.ts';
export type { Grade, Species } from './design-values.ts';
export { SPAN_CAUTION, floorLoads, screenSpan, screenedSpan } from './screen-span.ts';
export type { Member, ScreenedSpan, Screening, SpanInput } from './screen-span.ts';
