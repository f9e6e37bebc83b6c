/**
 * What a new firm's pricing starts from, to be set to its own figures before the first change: nothing is marked up silently.
 * Rates in basis points; the shape is that of the computation of a change's price.
 */
export const defaultPricing = {
  mode: 'markup',
  laborBurdenRate: 0,
  own: { overheadRate: 1000, profitRate: 1000 },
  subcontract: { overheadRate: 500, profitRate: 500 },
  profitOn: 'cost_and_overhead',
  deducts: 'keep',
  tax: { on: 'materials', rate: 0 },
  insuranceRate: 0,
  flatFeeCents: 0,
} as const;
