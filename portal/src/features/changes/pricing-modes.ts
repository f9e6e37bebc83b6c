import type { PricingTermsInput } from '@tallypole/shared/schemas/changes';

export type PricingMode = PricingTermsInput['mode'];
export type Tier = Extract<PricingTermsInput, { mode: 'tiers' }>['overhead'][number];

export const modes = [
  { value: 'markup', label: 'Overhead and profit, for own work and for subcontracts' },
  { value: 'margin', label: 'A margin on the price of the whole change' },
  { value: 'tiers', label: 'Overhead and profit by tiers' },
] as const;

/** The same terms in another mode; what both have stays, what is new starts at nothing. */
export function inMode(terms: PricingTermsInput, mode: PricingMode): PricingTermsInput {
  const { laborBurdenRate, tax, deducts, flatFeeCents, insuranceRate } = terms;
  const kept = { laborBurdenRate, tax, deducts, flatFeeCents, insuranceRate };
  const none = { overheadRate: 0, profitRate: 0 };
  switch (mode) {
    case 'markup':
      return { mode, own: none, subcontract: none, profitOn: 'cost_and_overhead', ...kept };
    case 'margin':
      return { mode, marginRate: 0, ...kept };
    case 'tiers':
      return { mode, overhead: [{ upToCents: null, rate: 0 }], profit: [{ upToCents: null, rate: 0 }], ...kept };
  }
}

/** One more bounded tier before the open one, or the last bounded one taken out. */
export const withTier = (tiers: readonly Tier[]): Tier[] => [...tiers.slice(0, -1), { upToCents: tiers.at(-2)?.upToCents ?? 0, rate: tiers.at(-1)?.rate ?? 0 }, ...tiers.slice(-1)];
export const withoutTier = (tiers: readonly Tier[]): Tier[] => [...tiers.slice(0, -2), ...tiers.slice(-1)];
