export { paidByMilestone } from './paid.ts';
export type { PaidDraw } from './paid.ts';
export { polePicture, poleRows, withoutPrices } from './picture.ts';
export { poleSvg, printColors } from './svg.ts';
export type { PoleColors, SvgOptions } from './svg.ts';
export type { Band, MilestoneState, PoleChange, PoleInput, PoleMilestone, PolePicture, PoleRow } from './types.ts';
