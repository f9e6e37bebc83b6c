import { InvalidInput } from '@tallypole/shared/arithmetic';
import { ownersView, priceChange } from '@tallypole/shared/pricing';
import type { ChangeCost, DraftChange, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import { canonicalHash } from '../common/canonical.ts';
import { Problem } from '../common/problem.ts';
import type { PricedDraft } from './changes.repository.ts';

/** A draft as it will stand: priced by its own terms or the firm's, with the lines that the homeowner sees. */
export function priceDraft(draft: Omit<DraftChange, 'id'>, firmTerms: PricingTermsInput): PricedDraft {
  const terms = draft.terms ?? firmTerms;
  if (draft.terms !== null && draft.termsReason.trim() === '') throw Problem.field('/termsReason', "Say why these terms differ from the firm's.");
  const priced = price(draft, terms);
  const ownersLines = draft.lines.length === 0 ? [] : ownersView(draft.lines, priced, draft.noCharge ? 'one_sum' : draft.presentation, draft.title);
  return { ...draft, terms, ownTerms: draft.terms !== null, chargedCents: priced.chargedCents, scopeSha256: scopeOf(draft), ownersLines };
}

/** What is built, as a reviewer looks at it: title and members with their quantities. Hours, fees, prices and terms may move without another review. */
function scopeOf({ title, lines }: Pick<DraftChange, 'title' | 'lines'>): string {
  const members = lines.filter((line) => line.class !== 'labor' && line.class !== 'fee').map((line) => ({ class: line.class, effect: line.effect, description: line.description, quantity: line.quantity, unit: line.unit }));
  return canonicalHash({ title, members });
}

function price(draft: Pick<DraftChange, 'lines' | 'noCharge'>, terms: PricingTermsInput) {
  try {
    return priceChange({ lines: draft.lines, terms, noCharge: draft.noCharge });
  } catch (error) {
    if (!(error instanceof InvalidInput)) throw error;
    throw Problem.field(`/${error.field.replaceAll('.', '/')}`, `The price can't be worked out: ${error.rule}.`);
  }
}

/** What the firm sees of a price. */
export function costOf(cost: { lines: DraftChange['lines']; terms: PricingTermsInput; ownTerms: boolean; termsReason: string }, noCharge: boolean): ChangeCost {
  const { netCostCents, markupCents, priceCents, chargedCents, steps } = price({ lines: cost.lines, noCharge }, cost.terms);
  if (!steps) throw new Error('A price comes with its arithmetic.');
  return { ...cost, priced: { netCostCents, markupCents, priceCents, chargedCents, steps } };
}
