import { cents, minus, split, sum, type Cents } from '../money/index.ts';
import type { PriceLine, PricedChange } from './types.ts';

export type Presentation = 'itemized' | 'grouped' | 'one_sum';

/** A line as the homeowner sees it: what is done and what it costs, without cost and mark-up. */
export interface OwnersLine {
  description: string;
  effect: 'add' | 'deduct';
  cents: Cents;
}

const GROUP_NAMES = { labor: 'Labor', material: 'Materials', equipment: 'Equipment', subcontract: 'Subcontract work', fee: 'Fees' } as const;

/**
 * What the homeowner sees of a price, as the firm chose: each line with its share of everything that isn't a line (itemized), one line
 * per kind of cost (grouped), or one sum. The parts always add up to what is charged. Itemized, the mark-up is spread over the adding
 * lines in proportion to their cost; where nothing is added, over the deducting ones.
 */
export function ownersView(lines: readonly PriceLine[], priced: PricedChange, presentation: Presentation, title: string): OwnersLine[] {
  if (presentation === 'one_sum' || lines.length === 0) return [ownersLine(title, priced.chargedCents)];
  const amounts = new Map(priced.lines.map((line) => [line.id, line.cents]));
  const own = lines.map((line) => ({ line, cents: amounts.get(line.id) ?? 0 }));
  const spread = spreadOver(own.map((item) => item.cents), minus(priced.chargedCents, sum(own.map((item) => item.cents))));
  if (spread === null) return [ownersLine(title, priced.chargedCents)];
  const items = own.map((item, i) => ({ line: item.line, cents: sum([item.cents, spread[i] ?? 0]) }));
  if (presentation === 'itemized') return items.map((item) => ({ description: item.line.description, effect: item.line.effect, cents: item.cents }));
  const groups = new Map<string, Cents>();
  for (const item of items) groups.set(GROUP_NAMES[item.line.class], sum([groups.get(GROUP_NAMES[item.line.class]) ?? 0, item.cents]));
  return [...groups].map(([description, amount]) => ownersLine(description, amount));
}

function spreadOver(amounts: readonly Cents[], rest: Cents): Cents[] | null {
  const adds = amounts.map((amount) => (amount > 0 ? amount : 0));
  const deducts = amounts.map((amount) => (amount < 0 ? -amount : 0));
  const weights = adds.some((weight) => weight > 0) ? adds : deducts;
  if (rest === 0) return amounts.map(() => 0);
  return weights.some((weight) => weight > 0) ? split(rest, weights) : null;
}

const ownersLine = (description: string, amount: Cents): OwnersLine => ({ description, effect: amount < 0 ? 'deduct' : 'add', cents: cents(amount) });
