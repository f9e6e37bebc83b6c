import type { ChangeCost } from '@tallypole/shared/schemas/changes';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { Section } from '../../../ui/page.tsx';
import classes from './changes.module.css';

/** What a change costs the firm and what it earns; nobody outside the firm is sent this. */
export function CostView({ cost }: { cost: ChangeCost }) {
  const { netCostCents, markupCents, priceCents, chargedCents, steps } = cost.priced;
  return (
    <Section title="For the firm alone" ruled={false}>
      <dl className={classes['cost']}>
        <dt>Net cost</dt>
        <dd><Money cents={netCostCents} /></dd>
        <dt>Mark-up</dt>
        <dd><Money cents={markupCents} /></dd>
        <dt>Price</dt>
        <dd><Figure label="Price" steps={steps}><Money cents={priceCents} /></Figure></dd>
        {chargedCents === priceCents ? null : (
          <>
            <dt>Charged</dt>
            <dd><Money cents={chargedCents} /></dd>
          </>
        )}
      </dl>
      {cost.ownTerms ? <p className="quiet">Other terms than the firm&apos;s: {cost.termsReason}</p> : null}
    </Section>
  );
}
