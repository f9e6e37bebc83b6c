import { useSuspenseQuery } from '@tanstack/react-query';
import { FirmSettingsInput, type FirmSettings } from '@tallypole/shared/schemas/firms';
import { Suspense } from 'react';
import { useParams } from 'react-router-dom';
import { queryClient } from '../../../lib/query-client.ts';
import { CheckboxField, FieldRow, Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { LoadingState, PageHead } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { setSettings, settingsQuery } from '../api/settings.ts';
import classes from '../components/firm.module.css';
import { LogoChoice } from '../components/logo-choice.tsx';
import { strings } from '../strings.ts';

/** What stands on the firm's papers, and what its site people see. */
export const Component = () => (
  <main className={classes['page']} id="main">
    <Suspense fallback={<LoadingState />}>
      <Settings />
    </Suspense>
  </main>
);

function Settings() {
  const { firmId = '' } = useParams();
  const { data } = useSuspenseQuery(settingsQuery(firmId));
  return (
    <>
      <PageHead title={strings.settingsTitle}>
        <p className="quiet">{strings.settingsExplain}</p>
        <div className={classes['ways']}>
          <LinkButton to={`/firms/${firmId}`} variant="outline">{strings.toMembers}</LinkButton>
          <LinkButton to={`/firms/${firmId}/pricing`} variant="outline">{strings.toPricing}</LinkButton>
        </div>
      </PageHead>
      <SettingsForm firmId={firmId} settings={data} key={data.version} />
      <LogoChoice firmId={firmId} logo={data.logo} />
    </>
  );
}

function SettingsForm({ firmId, settings: { id: _id, logo: _logo, ...values } }: { firmId: string; settings: FirmSettings }) {
  const act = useActForm<FirmSettingsInput, FirmSettings>({
    name: `firm-settings-${firmId}-${values.version}`,
    initialValues: values,
    schema: FirmSettingsInput,
    send: (input, key) => setSettings(firmId, input, key),
    onDone: (after) => {
      queryClient.setQueryData(settingsQuery(firmId).queryKey, after);
      void queryClient.invalidateQueries({ queryKey: ['me'] });
      toast(strings.saved);
    },
  });
  return (
    <Form act={act} submitLabel={strings.save}>
      <TextField field={act.field('name')} label={strings.firmName} autoComplete="organization" />
      <TextField field={act.field('street')} label={strings.street} autoComplete="street-address" />
      <FieldRow>
        <TextField field={act.field('city')} label={strings.city} autoComplete="address-level2" />
        <TextField field={act.field('state')} label={strings.state} autoComplete="address-level1" />
        <TextField field={act.field('zip')} label={strings.zip} inputMode="numeric" autoComplete="postal-code" />
      </FieldRow>
      <FieldRow>
        <TextField field={act.field('phone')} label={strings.phone} autoComplete="tel" />
        <TextField field={act.field('license')} label={strings.license} hint={strings.licenseHint} autoComplete="off" />
      </FieldRow>
      <CheckboxField field={act.field('siteSeesPrices')} label={strings.sitePrices} hint={strings.sitePricesHint} />
    </Form>
  );
}
