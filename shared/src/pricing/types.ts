import type { Step } from '../arithmetic/index.ts';
import type { BasisPoints, Cents, Decimal } from '../money/index.ts';

export const lineClasses = ['labor', 'material', 'equipment', 'subcontract', 'fee'] as const;
export type LineClass = (typeof lineClasses)[number];

/** One line of a change: quantity × unit cost (dollars, up to 4 places each), added or deducted. */
export interface PriceLine {
  id: string;
  description: string;
  class: LineClass;
  effect: 'add' | 'deduct';
  quantity: Decimal;
  unit: string;
  unitCost: Decimal;
  /** Whether sales tax on materials is due on it. */
  taxable: boolean;
}

export interface GroupRates {
  overheadRate: BasisPoints;
  profitRate: BasisPoints;
}

/** A marginal tier: the rate on what lies between the tier before and `upToCents`; the last tier has none. */
export interface Tier {
  upToCents: Cents | null;
  rate: BasisPoints;
}

export type MarkupTerms =
  | { mode: 'markup'; own: GroupRates; subcontract: GroupRates; profitOn: 'cost' | 'cost_and_overhead' }
  | { mode: 'margin'; marginRate: BasisPoints }
  | { mode: 'tiers'; overhead: readonly Tier[]; profit: readonly Tier[] };

/** How a firm prices changes on a job; part of the agreed terms, never sent to the homeowner unless the book is open. */
export type PricingTerms = MarkupTerms & {
  /** On the net of labor lines, where labor is priced bare. */
  laborBurdenRate: BasisPoints;
  tax: { on: 'materials' | 'price'; rate: BasisPoints };
  /** A negative total mark-up is zero (`keep`) or given back. */
  deducts: 'keep' | 'give_back';
  flatFeeCents: Cents;
  /** Insurance or bond, on the sum. */
  insuranceRate: BasisPoints;
};

export interface PricedLine {
  id: string;
  cents: Cents;
}

/** The price of a change with its parts; every part is printed, and they add up to the price. */
export interface PricedChange {
  lines: PricedLine[];
  laborBurdenCents: Cents;
  materialsTaxCents: Cents;
  ownCostCents: Cents;
  subcontractCostCents: Cents;
  /** Cost of both groups, before mark-up; fees stand apart. */
  netCostCents: Cents;
  overheadCents: Cents;
  profitCents: Cents;
  /** Overhead and profit, or what the margin adds; zero where a negative one is kept. */
  markupCents: Cents;
  feesCents: Cents;
  flatFeeCents: Cents;
  sumCents: Cents;
  insuranceCents: Cents;
  priceTaxCents: Cents;
  priceCents: Cents;
  /** What the homeowner pays: the price, or 0 for a no-charge change, whose cost the firm keeps. */
  chargedCents: Cents;
  steps: Step | null;
}

export interface PriceOptions {
  /** Leave the arithmetic out, for speed. */
  steps?: boolean;
}
