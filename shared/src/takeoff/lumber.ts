import { given, must, quantity, step, type Step } from '../arithmetic/index.ts';
import { fixed, tenThousandths, type Decimal } from '../money/index.ts';
import { wholeNumber } from './item.ts';
import type { Inches } from './length.ts';

/**
 * Actual dressed sizes of dry dimension lumber, in inches, by nominal size. Source: American Softwood Lumber Standard, PS 20 (table of
 * dimension lumber), from memory.
 */
export const dressedSizes = {
  '2x4': { thickness: '1.5', width: '3.5' },
  '2x6': { thickness: '1.5', width: '5.5' },
  '2x8': { thickness: '1.5', width: '7.25' },
  '2x10': { thickness: '1.5', width: '9.25' },
  '2x12': { thickness: '1.5', width: '11.25' },
} as const satisfies Record<string, { thickness: Inches; width: Inches }>;

export type LumberSize = keyof typeof dressedSizes;
export const lumberSizes = Object.keys(dressedSizes) as LumberSize[];

/** Nominal thickness and width in inches, as lumber is sold by. */
export function nominal(size: LumberSize): { thickness: number; width: number } {
  const [thickness = 0, width = 0] = size.split('x').map(Number);
  return { thickness, width };
}

/** Lengths that lumber is commonly sold in, in feet: common practice, no source. */
export const commonStock: readonly number[] = [8, 10, 12, 14, 16, 18, 20, 22, 24];

/** A size that has its dressed sizes. Throws InvalidInput. */
export function checkedSize(size: LumberSize, field: string): LumberSize {
  must(lumberSizes.includes(size), field, size, `must be one of ${lumberSizes.join(', ')}`);
  return size;
}

/** Stock lengths in feet. Throws InvalidInput. */
export function checkedStock(stock: readonly number[], field: string): readonly number[] {
  must(stock.length > 0 && stock.every((feet) => Number.isSafeInteger(feet) && feet > 0 && feet <= 60), field, stock, 'must be whole feet from 1 to 60');
  return stock;
}

/** The next length that is sold, in feet, for a member of so many inches. Throws InvalidInput where none is long enough. */
export function stockLength(needed: bigint, stock: readonly number[], field: string): number {
  const found = [...checkedStock(stock, 'stock')].sort((a, b) => a - b).find((feet) => BigInt(feet) * 120_000n >= needed);
  must(found !== undefined, field, fixed(needed, 4), 'must not be longer than the longest stock length');
  return found;
}

export interface Pieces {
  /** Nominal inches. */
  thickness: number;
  width: number;
  /** Feet, up to 4 places. */
  length: Decimal;
  count: number;
}

/**
 * Board feet: nominal thickness × nominal width (in) × length (ft) ÷ 12, summed over the pieces and rounded once, half up, to 3 places.
 * Throws InvalidInput. Source: definition of the board foot, as NIST Handbook 130 gives it.
 */
export function boardFeet(pieces: readonly Pieces[]): { boardFeet: Decimal; steps: Step } {
  let total = 0n;
  const inputs = pieces.map(({ thickness, width, length, count }, i) => {
    const at = `pieces.${i}`;
    const feet = tenThousandths(length, `${at}.length`);
    must(feet > 0n, `${at}.length`, length, 'must be more than 0');
    total += BigInt(wholeNumber(thickness, `${at}.thickness`, 1, 24)) * BigInt(wholeNumber(width, `${at}.width`, 1, 24)) * feet * BigInt(wholeNumber(count, `${at}.count`, 0, 100_000));
    return given(`${count} pieces ${thickness}×${width}`, quantity(length, 'ft'));
  });
  // twelfths of ten-thousandths, to thousandths
  const rounded = (total * 2n + 120n) / 240n;
  const text = fixed(rounded, 3);
  return { boardFeet: text, steps: step('Board feet', 'nominal thickness × nominal width × length in feet ÷ 12, summed, rounded once', quantity(text, 'bf'), inputs) };
}
