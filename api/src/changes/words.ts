import type { Funding } from '@tallypole/shared/changes';

/** Who funds a change, in words for people. */
export const fundingWords: Readonly<Record<Funding, string>> = {
  nothing_to_pay: 'nothing is to be paid',
  homeowner: 'you, in cash',
  homeowner_until_lender_agrees: 'you, in cash, unless the bank agrees to take it into the loan',
  less_to_pay: 'less is to be paid',
};

/** The first draw in which a change is asked for. */
export const nextDrawName = ({ milestoneName }: { milestoneName: string | null }): string => (milestoneName ? `Draw once "${milestoneName}" is proven` : 'Next draw');

/** The same in the paper, which others read as well. */
export const paperFundingWords: Readonly<Record<Funding, string>> = {
  nothing_to_pay: 'nothing is to be paid',
  homeowner: 'the homeowners, in cash',
  homeowner_until_lender_agrees: 'the homeowners, in cash, unless the bank agrees to take it into the loan',
  less_to_pay: 'less is to be paid',
};

export const reviewWords = {
  designer_review: "The designer's review",
  engineered_sheet: "The supplier's engineered sheet",
  official_approval: "The building official's approval",
} as const;

export const structuralCaution =
  'This change touches the structure of the house. The plans, the designer of record and the local code decide what may be built; the figures here are for the price.';
