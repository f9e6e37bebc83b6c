import { given, quantity, step, type Step } from '../arithmetic/index.ts';
import { wholeNumber } from './item.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';

/** Fasteners along a length at a largest spacing: ceil(length ÷ spacing) + 1. Throws InvalidInput. */
export const alongLength = (length: Inches, spacing: Inches, field = 'fasteners'): number => countOf(ceilDivide(lengthOf(length, `${field}.length`), lengthOf(spacing, `${field}.spacing`))) + 1;

export interface SheetFastening {
  sheetLength: Inches;
  sheetWidth: Inches;
  supportSpacing: Inches;
  /** At the panel's ends, and at its long edge over a rim. */
  edgeSpacing: Inches;
  /** At the supports in between. */
  fieldSpacing: Inches;
}

/**
 * Fasteners of one whole sheet across its supports: both ends at the edge spacing, the supports in between at the field spacing. A sheet
 * of 4 × 8 ft over joists at 16 in, 6 and 12 in: 2 × 9 + 5 × 5 = 43. Throws InvalidInput.
 */
export function perSheet({ sheetLength, sheetWidth, supportSpacing, edgeSpacing, fieldSpacing }: SheetFastening): number {
  const between = countOf(ceilDivide(lengthOf(sheetLength, 'fasteners.sheetLength'), lengthOf(supportSpacing, 'fasteners.supportSpacing'))) - 1;
  return 2 * alongLength(sheetWidth, edgeSpacing, 'fasteners.edge') + between * alongLength(sheetWidth, fieldSpacing, 'fasteners.field');
}

/** What a long edge over a rim adds: along it at the edge spacing, less the two corners that are there already. Throws InvalidInput. */
export const perRimEdge = ({ sheetLength, edgeSpacing }: SheetFastening): number => alongLength(sheetLength, edgeSpacing, 'fasteners.edge') - 2;

/** All of a deck: so many sheets, of which so many long edges lie over a rim. Throws InvalidInput. */
export function deckFasteners(sheets: number, rimEdges: number, fastening: SheetFastening): { count: number; steps: Step } {
  const [each, edge] = [perSheet(fastening), perRimEdge(fastening)];
  const count = wholeNumber(sheets, 'fasteners.sheets', 0, 100_000) * each + wholeNumber(rimEdges, 'fasteners.rimEdges', 0, 100_000) * edge;
  const steps = step('Fasteners', 'sheets × fasteners of one, and what long edges over a rim add', quantity(count, 'ea'), [
    given('Sheets', quantity(sheets, 'sheet')),
    given('Of one sheet', quantity(each, 'ea')),
    given('Long edges over a rim', quantity(rimEdges, 'ea')),
    given('One such edge adds', quantity(edge, 'ea')),
  ]);
  return { count, steps };
}
