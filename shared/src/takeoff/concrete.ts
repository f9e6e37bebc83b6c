import { given, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, fixed, type BasisPoints, type Decimal } from '../money/index.ts';
import { countItem, wholeNumber, type TakeoffItem } from './item.ts';
import { ceilDivide, formatLength, lengthOf, type Inches } from './length.ts';

export interface Pour {
  label: string;
  length: Inches;
  width: Inches;
  thickness: Inches;
  count: number;
}

const YARD = 46_656n; // in³
const CUBE = 1_000_000_000_000n; // ten-thousandths, three times

/**
 * Concrete: yd³ = ft³ ÷ 27, with waste, ordered in quarter yards. Net is rounded half up to 4 places, what is ordered is rounded up once.
 * Throws InvalidInput.
 */
export function concrete(pours: readonly Pour[], wasteRate: BasisPoints): { net: Decimal; ordered: Decimal; steps: Step } {
  must(pours.length > 0, 'pours', pours, 'must name at least one pour');
  let volume = 0n;
  const inputs = pours.map(({ label, length, width, thickness, count }, i) => {
    volume += lengthOf(length, `pours.${i}.length`) * lengthOf(width, `pours.${i}.width`) * lengthOf(thickness, `pours.${i}.thickness`) * BigInt(wholeNumber(count, `pours.${i}.count`, 1, 10_000));
    return given(`${label}: ${count} × ${formatLength(length)} × ${formatLength(width)}`, quantity(thickness, 'in'));
  });
  const whole = YARD * CUBE;
  const net = fixed((volume * 20_000n + whole) / (whole * 2n), 4);
  const quarters = ceilDivide(volume * 4n * BigInt(10_000 + basisPoints(wasteRate, 'wasteRate')), whole * 10_000n);
  const ordered = fixed(quarters * 25n, 2);
  const steps = step('Concrete to order', 'with waste, rounded up to a quarter yard', quantity(ordered, 'yd³'), [step('Concrete', 'length × width × thickness of each pour, in cubic yards', quantity(net, 'yd³'), inputs), given('Waste', rate(wasteRate))]);
  return { net, ordered, steps };
}

/** The pours of a worksheet as its one item. Throws InvalidInput. */
export function concreteTakeoff(pours: readonly Pour[], wasteRate: BasisPoints): TakeoffItem[] {
  const { net, ordered, steps } = concrete(pours, wasteRate);
  return [{ ...countItem('concrete', 'Concrete', 0, steps, 'yd3'), net, purchased: ordered, wasteRate }];
}
