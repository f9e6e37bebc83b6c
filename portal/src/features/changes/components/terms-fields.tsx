import { Checkbox } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { FieldGroup, TextField, type ActForm } from '../../../ui/forms/index.ts';
import { pricingQuery } from '../api/changes.ts';
import type { EditorValues } from './change-editor.tsx';
import { PricingFields } from './pricing-fields.tsx';

/** Other terms than the firm's, for this change alone, with the reason. */
export function TermsFields({ act, firmId }: { act: ActForm<EditorValues>; firmId: string }) {
  const { data } = useQuery(pricingQuery(firmId));
  const { terms } = act.form.values;
  const toggle = (own: boolean) => act.form.setFieldValue('terms', own && data ? data.terms : null);
  return (
    <FieldGroup legend="Terms">
      <Checkbox checked={terms !== null} disabled={!data} onChange={(event) => toggle(event.currentTarget.checked)} label="Other terms than the firm's" description="Mark-up, burden and tax for this change alone." size="md" />
      {terms === null ? (
        <p className="quiet">
          <Link to={`/firms/${firmId}/pricing`}>How the firm prices changes</Link>
        </p>
      ) : (
        <>
          <PricingFields act={act} terms={terms} />
          <TextField field={act.field('termsReason')} label="Why they differ" />
        </>
      )}
    </FieldGroup>
  );
}
