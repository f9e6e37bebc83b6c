import { given, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, tenThousandths, type BasisPoints, type Decimal } from '../money/index.ts';
import { ceilDivide } from './length.ts';

export type TakeoffUnit = 'ea' | 'ft' | 'bf' | 'sheet' | 'box' | 'cartridge' | 'yd3';

/** One thing that a worksheet counts: what is built in, and what is bought for it, with the waste it used. */
export interface TakeoffItem {
  /** The same thing has the same key in every worksheet, so that two can be compared. */
  key: string;
  label: string;
  /** What it is bought in. */
  unit: TakeoffUnit;
  net: Decimal;
  /** What the net is in: feet of rim, or fasteners that are bought in boxes. */
  netUnit: TakeoffUnit;
  purchased: Decimal;
  wasteRate: BasisPoints;
  steps: Step;
}

/** A count that is bought as it is. */
export function countItem(key: string, label: string, count: number, steps: Step, unit: TakeoffUnit = 'ea'): TakeoffItem {
  return { key, label, unit, net: String(count), netUnit: unit, purchased: String(count), wasteRate: 0, steps };
}

/** A count with waste on it, bought in whole units of so many pieces: rounded up once. Throws InvalidInput. */
export function boughtIn(net: number, wasteRate: BasisPoints, perUnit: number, unit: TakeoffUnit, netStep: Step, label: string): { purchased: number; steps: Step } {
  must(Number.isSafeInteger(perUnit) && perUnit > 0, 'perUnit', perUnit, 'must be a whole number of at least 1');
  const withWaste = BigInt(net) * BigInt(10_000 + basisPoints(wasteRate, 'wasteRate'));
  const purchased = Number(ceilDivide(withWaste, 10_000n * BigInt(perUnit)));
  const inputs = [netStep, given('Waste', rate(wasteRate)), ...(perUnit === 1 ? [] : [given('In one', quantity(perUnit, 'ea'))])];
  return { purchased, steps: step(label, 'net and its waste, rounded up to whole ones', quantity(purchased, unit), inputs) };
}

/** A whole number within bounds, as people enter a count. Throws InvalidInput. */
export function wholeNumber(value: number, field: string, least: number, most: number): number {
  must(Number.isSafeInteger(value) && value >= least && value <= most, field, value, `must be a whole number from ${least} to ${most}`);
  return value;
}

/** A decimal that must not be negative. Throws InvalidInput. */
export function notNegative(value: Decimal, field: string): bigint {
  const size = tenThousandths(value, field);
  must(size >= 0n, field, value, 'must not be negative');
  return size;
}
