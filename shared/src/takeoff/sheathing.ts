import { given, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, type BasisPoints, type Decimal } from '../money/index.ts';
import { notNegative } from './item.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';

export interface SheathingInput {
  /** Along the sheets' long side. */
  run: Inches;
  /** Across the rows. */
  depth: Inches;
  /** What a sheet covers across: 48 square edged, 47.5 in tongue and groove. */
  faceWidth: Inches;
  /** What a sheet covers along, its end gap of 1/8 in included where it isn't sized for it. */
  sheetLength: Inches;
}

/**
 * Sheathing in rows: rows = ceil(depth ÷ face width), and in each row half sheets along the run, so that joints can be staggered; two
 * halves make a sheet. A deck of 24 × 32 ft in tongue and groove is 7 rows of 4 = 28 sheets. Throws InvalidInput.
 */
export function sheathingRows({ run, depth, faceWidth, sheetLength }: SheathingInput): { rows: number; sheets: number; steps: Step } {
  const rows = countOf(ceilDivide(lengthOf(depth, 'sheathing.depth'), lengthOf(faceWidth, 'sheathing.faceWidth')));
  const halves = countOf(ceilDivide(lengthOf(run, 'sheathing.run') * 2n, lengthOf(sheetLength, 'sheathing.sheetLength')));
  const sheets = Math.ceil((rows * halves) / 2);
  const steps = step('Sheets in rows', 'rows × half sheets along the run ÷ 2, rounded up', quantity(sheets, 'sheet'), [
    step('Rows', 'depth ÷ face width, rounded up', quantity(rows, 'ea'), [given('Depth', quantity(depth, 'in')), given('Face width', quantity(faceWidth, 'in'))]),
    step('Half sheets in a row', 'run ÷ half a sheet, rounded up', quantity(halves, 'ea'), [given('Run', quantity(run, 'in')), given('Sheet', quantity(sheetLength, 'in'))]),
  ]);
  return { rows, sheets, steps };
}

const SHEET_FT2 = 32n;

/** The plain rule by area: ceil((area − openings) × (1 + waste) ÷ 32 ft²), for sheets of 4 × 8 ft. Areas in ft². Throws InvalidInput. */
export function sheathingByArea({ areaFt2, openingsFt2, wasteRate }: { areaFt2: Decimal; openingsFt2: Decimal; wasteRate: BasisPoints }): { sheets: number; steps: Step } {
  const net = notNegative(areaFt2, 'areaFt2') - notNegative(openingsFt2, 'openingsFt2');
  must(net > 0n, 'openingsFt2', openingsFt2, 'must be less than the area');
  const sheets = countOf(ceilDivide(net * BigInt(10_000 + basisPoints(wasteRate, 'wasteRate')), SHEET_FT2 * 100_000_000n));
  return { sheets, steps: step('Sheets by area', 'area less openings, with waste, ÷ 32 ft², rounded up', quantity(sheets, 'sheet'), [given('Area', quantity(areaFt2, 'ft²')), given('Openings', quantity(openingsFt2, 'ft²')), given('Waste', rate(wasteRate))]) };
}
