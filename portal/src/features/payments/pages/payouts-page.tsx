import { Button } from '@mantine/core';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { useMe } from '../../../lib/me.ts';
import { FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { payoutsQuery, setUpPayouts } from '../api/payments.ts';
import classes from '../components/payments.module.css';
import { strings } from '../strings.ts';

const words = strings.payouts;

/** Where the principal sets up how each firm is paid; the payment service sends people back here. */
export function Component() {
  const firms = useMe().firms.filter(({ role }) => role === 'principal');
  return (
    <main id="main" tabIndex={-1} style={{ maxWidth: 760, margin: '0 auto', padding: '36px 16px' }}>
      <PageHead title={words.title}>
        <p className="quiet">{words.explain}</p>
      </PageHead>
      {firms.map(({ id, name }, i) => (
        <Section key={id} title={name} ruled={i > 0}>
          <FirmPayouts firmId={id} />
        </Section>
      ))}
    </main>
  );
}

function FirmPayouts({ firmId }: { firmId: string }) {
  const [waiting, setWaiting] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const { key, spend } = useIdempotencyKey(`payouts-${firmId}`);
  const queries = useQueryClient();
  const { data, error, refetch } = useQuery(payoutsQuery(firmId, waiting));
  if (error && !data) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState lines={2} />;
  const start = async () => {
    setFailure(null);
    try {
      queries.setQueryData(payoutsQuery(firmId, false).queryKey, await setUpPayouts(firmId, key));
      setWaiting(true);
    } catch (caught) {
      setFailure(caught);
    } finally {
      spend();
    }
  };
  const { state, linkUrl, trouble } = data;
  return (
    <div className={classes['progress']}>
      <StateTag meaning={state === 'ready' ? 'settled' : 'waits'}>{words.state[state]}</StateTag>
      {state === 'ready' ? <p>{words.ready}</p> : null}
      {state === 'incomplete' ? <p>{words.incomplete}</p> : null}
      {trouble ? <p role="status">{trouble}</p> : null}
      {failure ? <FailureState error={failure} /> : null}
      {state === 'ready' ? null : linkUrl ? (
        <Button component="a" href={linkUrl}>
          {words.goOn}
        </Button>
      ) : waiting ? (
        <p role="status">{words.opening}</p>
      ) : (
        <Button onClick={() => void start()}>{words.start}</Button>
      )}
    </div>
  );
}
