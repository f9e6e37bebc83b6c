import { Button } from '@mantine/core';
import type { PricingTermsInput } from '@tallypole/shared/schemas/changes';
import { FieldGroup, FieldRow, MoneyField, PercentField, type ActForm } from '../../../ui/forms/index.ts';
import { withTier, withoutTier, type Tier } from '../pricing-modes.ts';
import type { PricingValues } from './pricing-fields.tsx';

interface TierFieldsProps<Values extends PricingValues> {
  act: ActForm<Values>;
  name: 'overhead' | 'profit';
  legend: string;
  tiers: readonly Tier[];
  terms: PricingTermsInput;
}

const MOST = 10;

/** Rates by marginal tiers; the last one is open. */
export function TierFields<Values extends PricingValues>({ act, name, legend, tiers, terms }: TierFieldsProps<Values>) {
  const set = (next: Tier[]) => act.form.setValues({ terms: { ...terms, [name]: next } } as unknown as Partial<Values>);
  return (
    <FieldGroup legend={legend}>
      {tiers.map((tier, i) => (
        // the fields keep what was typed, so they are made anew when tiers come or go
        <FieldRow key={`${tiers.length}-${i}`}>
          {tier.upToCents === null ? <p style={{ alignSelf: 'center' }}>{tiers.length === 1 ? 'On everything' : 'On what is above'}</p> : <MoneyField field={act.field(`terms.${name}.${i}.upToCents`)} label={`${i === 0 ? 'On the first part, up to' : 'On the next part, up to'}`} />}
          <PercentField field={act.field(`terms.${name}.${i}.rate`)} label="Rate" />
        </FieldRow>
      ))}
      <div style={{ display: 'flex', gap: 12, flexWrap: 'wrap' }}>
        {tiers.length < MOST ? (
          <Button variant="subtle" onClick={() => set(withTier(tiers))}>
            Add a tier
          </Button>
        ) : null}
        {tiers.length > 1 ? (
          <Button variant="subtle" color="oxide" onClick={() => set(withoutTier(tiers))}>
            Take out a tier
          </Button>
        ) : null}
      </div>
    </FieldGroup>
  );
}
