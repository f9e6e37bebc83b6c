import { given, must, quantity, step, type Step } from '../arithmetic/index.ts';
import { fixed, tenThousandths, type Decimal } from '../money/index.ts';
import type { PriceLine } from '../pricing/index.ts';
import type { TakeoffItem, TakeoffUnit } from './item.ts';

export interface DifferenceItem {
  key: string;
  label: string;
  unit: TakeoffUnit;
  /** What is bought as drawn and as proposed; "0" where it isn't needed. */
  drawn: Decimal;
  proposed: Decimal;
  /** How much more (add) or less (deduct) is bought; never "0". */
  effect: 'add' | 'deduct';
  quantity: Decimal;
  steps: Step;
}

/** Compared, and not bought: board feet stand beside the pieces they are made of. */
const NOT_BOUGHT = /^board-feet-/;

/**
 * What the proposed worksheet buys more or less than the drawn one, item by item: another size is another item, so the drawn one is
 * deducted whole and the proposed one added. Items without a difference are left out. Throws InvalidInput for a key that comes twice.
 */
export function takeoffDifference(asDrawn: readonly TakeoffItem[], asProposed: readonly TakeoffItem[]): DifferenceItem[] {
  const [drawn, proposed] = [byKey(asDrawn, 'asDrawn'), byKey(asProposed, 'asProposed')];
  return [...new Set([...proposed.keys(), ...drawn.keys()])].filter((key) => !NOT_BOUGHT.test(key)).flatMap((key): DifferenceItem[] => {
    const [before, after] = [drawn.get(key), proposed.get(key)];
    const item = after ?? before;
    const more = tenThousandths(after?.purchased ?? '0') - tenThousandths(before?.purchased ?? '0');
    if (!item || more === 0n) return [];
    const amount = plain(more < 0n ? -more : more);
    const side = (name: string, found: TakeoffItem | undefined) => found?.steps ?? given(name, quantity('0', item.unit));
    const steps = step(item.label, 'bought as proposed − bought as drawn', quantity(more < 0n ? `-${amount}` : amount, item.unit), [side('As proposed', after), side('As drawn', before)]);
    return [{ key, label: item.label, unit: item.unit, drawn: before?.purchased ?? '0', proposed: after?.purchased ?? '0', effect: more < 0n ? 'deduct' : 'add', quantity: amount, steps }];
  });
}

function byKey(items: readonly TakeoffItem[], field: string): Map<string, TakeoffItem> {
  const found = new Map<string, TakeoffItem>();
  items.forEach((item, i) => {
    must(!found.has(item.key), `${field}.${i}.key`, item.key, 'must come once');
    found.set(item.key, item);
  });
  return found;
}

const plain = (scaled: bigint): Decimal => fixed(scaled, 4).replace(/\.00$/, '').replace(/(\.\d)0$/, '$1');

/** What the firm's price list has for an item. */
export interface ListedPrice {
  /** Dollars, up to 4 places. */
  unitCost: Decimal;
  taxable: boolean;
}

export interface PricedDifference {
  lines: PriceLine[];
  /** Items without a price: asked for, never taken as nothing. */
  missing: DifferenceItem[];
}

/** A difference as lines of a change, each with the item's key as its id; what has no price is named instead. Throws InvalidInput. */
export function differenceLines(difference: readonly DifferenceItem[], prices: ReadonlyMap<string, ListedPrice>): PricedDifference {
  const lines: PriceLine[] = [];
  const missing: DifferenceItem[] = [];
  for (const item of difference) {
    const price = prices.get(item.key);
    if (!price) {
      missing.push(item);
      continue;
    }
    must(tenThousandths(price.unitCost, `prices.${item.key}`) > 0n, `prices.${item.key}`, price.unitCost, 'must be more than nothing');
    lines.push({ id: item.key, description: item.label, class: 'material', effect: item.effect, quantity: item.quantity, unit: item.unit, unitCost: price.unitCost, taxable: price.taxable });
  }
  return { lines, missing };
}
