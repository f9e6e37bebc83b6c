import { Checkbox } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { FieldGroup, FieldRow, PercentField, TextField, type ActForm } from '../../../ui/forms/index.ts';
import { pricingQuery } from '../api/changes.ts';
import type { EditorValues } from './change-editor.tsx';

/** Other terms than the firm's, for this change alone, with the reason. */
export function TermsFields({ act, firmId }: { act: ActForm<EditorValues>; firmId: string }) {
  const { data } = useQuery(pricingQuery(firmId));
  const { terms } = act.form.values;
  const toggle = (own: boolean) => act.form.setFieldValue('terms', own && data ? data.terms : null);
  return (
    <FieldGroup legend="Terms">
      <Checkbox checked={terms !== null} disabled={!data} onChange={(event) => toggle(event.currentTarget.checked)} label="Other terms than the firm's" description="Overhead, profit and tax for this change alone." size="md" />
      {terms?.mode === 'markup' ? (
        <>
          <FieldRow>
            <PercentField field={act.field('terms.own.overheadRate')} label="Overhead, own work" />
            <PercentField field={act.field('terms.own.profitRate')} label="Profit, own work" />
          </FieldRow>
          <FieldRow>
            <PercentField field={act.field('terms.subcontract.overheadRate')} label="Overhead, subcontracts" />
            <PercentField field={act.field('terms.subcontract.profitRate')} label="Profit, subcontracts" />
          </FieldRow>
          <PercentField field={act.field('terms.tax.rate')} label={terms.tax.on === 'materials' ? 'Sales tax on materials' : 'Tax on the price'} />
        </>
      ) : null}
      {terms !== null ? <TextField field={act.field('termsReason')} label="Why they differ" /> : null}
    </FieldGroup>
  );
}
