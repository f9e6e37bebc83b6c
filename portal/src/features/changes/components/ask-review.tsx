import { Button } from '@mantine/core';
import { mayChange } from '@tallypole/shared/schemas/change-states';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { FailureState, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnChange } from '../api/changes.ts';
import { useChanged } from './use-changed.ts';

/** Asks the designer by mail; they see what is built, without its price. */
export function AskReview({ job, change }: { job: Job; change: Change }) {
  const { key, spend } = useIdempotencyKey(`ask-review-${change.id}-${change.version}`);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const changed = useChanged(job.id);
  const ask = async () => {
    if (busy) return;
    setBusy(true);
    try {
      const after = await actOnChange(job.id, change.id, 'ask-review', { version: change.version }, key);
      spend();
      toast('The designer is asked by mail.');
      changed(after);
    } catch (error) {
      setFailure(error);
    } finally {
      setBusy(false);
    }
  };
  if (!mayChange(change.state, 'ask_review')) return null;
  return (
    <Section title="Ask the designer">
      {failure ? <FailureState error={failure} /> : null}
      <p style={{ margin: '0 0 12px' }}>The designer on this job sees what is built, without its price, and attaches the review. Or attach below what you were given.</p>
      <Button variant="outline" loading={busy} onClick={() => void ask()}>
        Ask for a review
      </Button>
    </Section>
  );
}
