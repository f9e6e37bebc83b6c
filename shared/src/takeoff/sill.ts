import { given, must, quantity, step, type Step } from '../arithmetic/index.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';

export interface AnchorageInput {
  /** Each piece of the plate. */
  pieces: readonly Inches[];
  maxSpacing: Inches;
  endDistance: Inches;
  boltDiameter: Inches;
}

const [MOST_SPACING, MOST_END, DIAMETERS] = [720_000n, 120_000n, 7n];

/**
 * Anchor bolts per plate piece: max(2, ceil((L − 2 × end distance) ÷ max spacing) + 1). 40 ft is 8 bolts as one piece, 10 as 16 + 16 + 8.
 * Spacing at most 72 in, the end distance at most 12 in and at least 7 bolt diameters: International Residential Code R403.1.6; plans and
 * local code decide. Throws InvalidInput.
 */
export function sillAnchorage({ pieces, maxSpacing, endDistance, boltDiameter }: AnchorageInput): { bolts: number; perPiece: number[]; steps: Step } {
  must(pieces.length > 0, 'sill.pieces', pieces, 'must name at least one piece');
  const spacing = lengthOf(maxSpacing, 'sill.maxSpacing');
  must(spacing <= MOST_SPACING, 'sill.maxSpacing', maxSpacing, 'must be at most 72 in');
  const end = lengthOf(endDistance, 'sill.endDistance');
  must(end <= MOST_END, 'sill.endDistance', endDistance, 'must be at most 12 in');
  must(end >= DIAMETERS * lengthOf(boltDiameter, 'sill.boltDiameter'), 'sill.endDistance', endDistance, 'must be at least 7 bolt diameters');
  const perPiece = pieces.map((piece, i) => {
    const between = lengthOf(piece, `sill.pieces.${i}`) - 2n * end;
    return between <= 0n ? 2 : countOf(ceilDivide(between, spacing)) + 1;
  });
  const bolts = perPiece.reduce((sum, count) => sum + count, 0);
  const steps = step('Anchor bolts', 'in each piece at least two: what is between the end bolts ÷ spacing, rounded up, and one more', quantity(bolts, 'ea'), [
    ...pieces.map((piece, i) => step(`Piece of ${piece} in`, 'its bolts', quantity(perPiece[i] ?? 0, 'ea'), [given('Length', quantity(piece, 'in'))])),
    given('Largest spacing', quantity(maxSpacing, 'in')),
    given('End distance', quantity(endDistance, 'in')),
  ]);
  return { bolts, perPiece, steps };
}
