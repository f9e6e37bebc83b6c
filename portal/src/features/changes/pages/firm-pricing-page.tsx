import { useSuspenseQuery } from '@tanstack/react-query';
import { SetFirmPricing, type FirmPricing } from '@tallypole/shared/schemas/changes';
import { Suspense } from 'react';
import { useParams } from 'react-router-dom';
import { useMe } from '../../../lib/me.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { Form, useActForm } from '../../../ui/forms/index.ts';
import { LoadingState, PageHead } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { pricingQuery, setPricing } from '../api/changes.ts';
import { PricingFields } from '../components/pricing-fields.tsx';

/** How the firm prices changes, unless one has terms of its own. */
export const Component = () => (
  <main style={{ maxWidth: 760, margin: '0 auto', padding: '32px clamp(16px, 3vw, 40px)' }} id="main">
    <Suspense fallback={<LoadingState />}>
      <Pricing />
    </Suspense>
  </main>
);

function Pricing() {
  const { firmId = '' } = useParams();
  const { data } = useSuspenseQuery(pricingQuery(firmId));
  const firm = useMe().firms.find(({ id }) => id === firmId);
  return (
    <>
      <PageHead title="How changes are priced">
        <p className="quiet">
          {firm ? `${firm.name}'s terms for every job. ` : ''}What is priced already keeps the terms it was priced by. Nobody outside the firm sees them.
        </p>
      </PageHead>
      <PricingForm firmId={firmId} pricing={data} key={data.version} />
    </>
  );
}

function PricingForm({ firmId, pricing }: { firmId: string; pricing: FirmPricing }) {
  const act = useActForm({
    name: `pricing-${firmId}-${pricing.version}`,
    initialValues: pricing,
    schema: SetFirmPricing,
    send: (values, key) => setPricing(firmId, values, key),
    onDone: (after) => {
      toast('The terms hold for what is priced from now on.');
      queryClient.setQueryData(pricingQuery(firmId).queryKey, after);
    },
  });
  return (
    <Form act={act} submitLabel="Keep these terms">
      <PricingFields act={act} terms={act.form.values.terms} />
      <p className="quiet">Whether and on what sales tax is due, and how far mark-up may be agreed, is for your state&apos;s law and your contract to say.</p>
    </Form>
  );
}
