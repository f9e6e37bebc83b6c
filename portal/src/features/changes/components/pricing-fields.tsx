import type { PricingTermsInput } from '@tallypole/shared/schemas/changes';
import { FieldRow, MoneyField, PercentField, SelectField, type ActForm } from '../../../ui/forms/index.ts';
import { inMode, modes, type PricingMode } from '../pricing-modes.ts';
import { TierFields } from './tier-fields.tsx';

export interface PricingValues {
  terms: PricingTermsInput | null;
}

/** How cost becomes a price: mark-up in one of three modes, burden, tax, fees. */
export function PricingFields<Values extends PricingValues>({ act, terms }: { act: ActForm<Values>; terms: PricingTermsInput }) {
  const mode = act.field('terms.mode');
  const set = (next: PricingTermsInput) => act.form.setValues({ terms: next } as Partial<Values>);
  return (
    <>
      <SelectField field={{ ...mode, onChange: (event) => set(inMode(terms, (event as React.ChangeEvent<HTMLSelectElement>).currentTarget.value as PricingMode)) }} label="Marked up by" options={modes} />
      <Markup act={act} terms={terms} />
      <SelectField
        field={act.field('terms.deducts')}
        label="Where more is taken out than added"
        options={[
          { value: 'keep', label: 'The cost is given back, the mark-up kept' },
          { value: 'give_back', label: 'The mark-up is given back as well' },
        ]}
      />
      <FieldRow>
        <PercentField field={act.field('terms.laborBurdenRate')} label="Labor burden" hint="On labor priced bare." />
        <PercentField field={act.field('terms.insuranceRate')} label="Insurance or bond" hint="On the price before tax." />
      </FieldRow>
      <PercentField field={act.field('terms.tax.rate')} label="Sales tax" />
      <SelectField
        field={act.field('terms.tax.on')}
        label="Sales tax is due on"
        options={[
          { value: 'materials', label: 'materials marked as taxed' },
          { value: 'price', label: 'the whole price' },
        ]}
      />
      <MoneyField field={act.field('terms.flatFeeCents')} label="Fee for each change" hint="For its paperwork; 0 if none." />
    </>
  );
}

function Markup<Values extends PricingValues>({ act, terms }: { act: ActForm<Values>; terms: PricingTermsInput }) {
  switch (terms.mode) {
    case 'markup':
      return (
        <>
          <FieldRow>
            <PercentField field={act.field('terms.own.overheadRate')} label="Overhead, own work" />
            <PercentField field={act.field('terms.own.profitRate')} label="Profit, own work" />
          </FieldRow>
          <FieldRow>
            <PercentField field={act.field('terms.subcontract.overheadRate')} label="Overhead, subcontracts" />
            <PercentField field={act.field('terms.subcontract.profitRate')} label="Profit, subcontracts" />
          </FieldRow>
          <SelectField
            field={act.field('terms.profitOn')}
            label="Profit is counted on"
            options={[
              { value: 'cost', label: 'cost' },
              { value: 'cost_and_overhead', label: 'cost and overhead' },
            ]}
          />
        </>
      );
    case 'margin':
      return <PercentField field={act.field('terms.marginRate')} label="Margin" hint="Of the price: 20 % makes 12,500.00 of a cost of 10,000.00." />;
    case 'tiers':
      return (
        <>
          <TierFields act={act} name="overhead" legend="Overhead, by what the change costs" tiers={terms.overhead} terms={terms} />
          <TierFields act={act} name="profit" legend="Profit, by cost and overhead" tiers={terms.profit} terms={terms} />
        </>
      );
  }
}
