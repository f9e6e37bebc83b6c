export { distanceM } from './distance.ts';
export type { Point } from './distance.ts';
export { MOST_BITS_ALIKE, placeFinding, reuseFinding, timeFinding } from './findings.ts';
export type { Earlier, Finding, Period } from './findings.ts';
export { hammingDistance } from './hamming.ts';
