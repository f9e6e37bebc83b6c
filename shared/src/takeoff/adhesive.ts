import { given, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, fixed, type BasisPoints, type Decimal } from '../money/index.ts';
import { notNegative, wholeNumber } from './item.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';

/** Cubic inches in a US fluid ounce: 231 in³ ÷ 128, from the definition of the US gallon; 1.8047 rounded. */
const OUNCE = { over: 231n, under: 128n };
const PI = 3_141_592_653_589_793n;
const PI_SCALE = 1_000_000_000_000_000n;

/** Feet that one cartridge gives: volume ÷ (π d² ÷ 4), d the bead's diameter; rounded to a tenth. 28 oz at 1/4 in is 85.8 ft. Throws InvalidInput. */
export function feetPerCartridge(ounces: number, beadDiameter: Inches): Decimal {
  const { over, under } = inchesPerCartridge(ounces, beadDiameter);
  // inches to tenths of a foot
  return fixed((over * 20n + under * 12n) / (under * 24n), 1);
}

function inchesPerCartridge(ounces: number, beadDiameter: Inches): { over: bigint; under: bigint } {
  const diameter = lengthOf(beadDiameter, 'adhesive.beadDiameter');
  const volume = BigInt(wholeNumber(ounces, 'adhesive.ounces', 1, 1_000)) * OUNCE.over;
  return { over: volume * 4n * 100_000_000n * PI_SCALE, under: OUNCE.under * PI * diameter * diameter };
}

export interface AdhesiveInput {
  /** Length of the beads in feet: along supports and in grooves. */
  beadFt: Decimal;
  ounces: number;
  beadDiameter: Inches;
  wasteRate: BasisPoints;
}

/** Cartridges for a bead with its waste, rounded up. Throws InvalidInput. */
export function adhesive({ beadFt, ounces, beadDiameter, wasteRate }: AdhesiveInput): { cartridges: number; steps: Step } {
  const bead = notNegative(beadFt, 'adhesive.beadFt') * 12n * BigInt(10_000 + basisPoints(wasteRate, 'wasteRate'));
  const { over, under } = inchesPerCartridge(ounces, beadDiameter);
  const cartridges = countOf(ceilDivide(bead * under, over * 100_000_000n));
  const steps = step('Cartridges', 'bead with its waste ÷ feet of one cartridge, rounded up', quantity(cartridges, 'cartridge'), [
    given('Bead', quantity(beadFt, 'ft')),
    step('Feet of one cartridge', 'volume ÷ (π × bead diameter² ÷ 4)', quantity(feetPerCartridge(ounces, beadDiameter), 'ft'), [given('Volume', quantity(ounces, 'fl oz')), given('Bead diameter', quantity(beadDiameter, 'in'))]),
    given('Waste', rate(wasteRate)),
  ]);
  return { cartridges, steps };
}
