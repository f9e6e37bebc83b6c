import type { Draw, DrawLine } from '@tallypole/shared/schemas/draws';

/** How far somebody outside the firm has seen a line's milestone to be; null for general lines, which follow time. */
export function seenRate(draw: Draw, line: DrawLine): number | null {
  if (line.milestoneId === null) return null;
  return draw.milestones.find(({ id }) => id === line.milestoneId)?.percent ?? 0;
}

export const photosOf = (draw: Draw, line: DrawLine): number => draw.photos.filter(({ milestoneId }) => milestoneId === line.milestoneId).length;
/** Lines with something billed, which is what a lender looks at. */
export const billedLines = (draw: Draw): DrawLine[] => draw.lines.filter(({ billedRate }) => billedRate > 0);
