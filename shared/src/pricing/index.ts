export { billCostPlus, settleAllowance } from './allowance.ts';
export type { AllowanceInput, AllowanceSettlement, CostPlusInput } from './allowance.ts';
export { ownersView } from './owners-view.ts';
export type { OwnersLine, Presentation } from './owners-view.ts';
export { lineCents, priceChange } from './price-change.ts';
export type { PriceInput } from './price-change.ts';
export { byTiers } from './tiers.ts';
export { lineClasses } from './types.ts';
export type { GroupRates, LineClass, MarkupTerms, PriceLine, PriceOptions, PricedChange, PricedLine, PricingTerms, Tier } from './types.ts';
