import { Button } from '@mantine/core';
import { formatChange } from '@tallypole/shared/money';
import { mayChange } from '@tallypole/shared/schemas/change-states';
import { WithdrawChange, type Change } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { Form, TextAreaField, useActForm } from '../../../ui/forms/index.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { FailureState, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnChange } from '../api/changes.ts';
import { AskReview } from './ask-review.tsx';
import { useChanged } from './use-changed.ts';

/** What the firm can do: ask for a review, edit, send out, withdraw, revise. */
export function FirmActs({ job, change }: { job: Job; change: Change }) {
  return (
    <>
      {change.structural ? <AskReview job={job} change={change} /> : null}
      {mayChange(change.state, 'edit') ? <SendOut job={job} change={change} key={change.version} /> : null}
      {mayChange(change.state, 'supersede') ? (
        <Section title="If it must be different">
          <p style={{ marginBottom: 12 }}>What was sent out is not edited. A revision takes its place under the same number, and is signed anew.</p>
          <LinkButton to="revise" variant="outline">
            Make a revision
          </LinkButton>
        </Section>
      ) : null}
      {mayChange(change.state, 'withdraw') ? <Withdraw job={job} change={change} /> : null}
    </>
  );
}

function SendOut({ job, change }: { job: Job; change: Change }) {
  const { key, spend } = useIdempotencyKey(`issue-${change.id}-${change.version}`);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const changed = useChanged(job.id);
  const send = async () => {
    if (busy) return;
    setBusy(true);
    try {
      const after = await actOnChange(job.id, change.id, 'issue', { version: change.version }, key);
      spend();
      toast('The paper is being made; then the homeowners are asked by mail.');
      changed(after);
    } catch (error) {
      setFailure(error);
    } finally {
      setBusy(false);
    }
  };
  const names = change.signers.map(({ name }) => name).join(' and ');
  return (
    <Section title="Send it out">
      {failure ? <FailureState error={failure} /> : null}
      <p style={{ margin: '0 0 12px' }}>
        {names ? `${names} will be asked by mail to sign for ${formatChange(change.chargedCents ?? 0)}.` : 'Nobody can sign yet: invite the homeowners first.'} After that it can&apos;t be edited.
      </p>
      <div style={{ display: 'flex', gap: 12, flexWrap: 'wrap' }}>
        <Button loading={busy} onClick={() => void send()}>
          Send out for {formatChange(change.chargedCents ?? 0)}
        </Button>
        <LinkButton to="edit" variant="outline">
          Edit
        </LinkButton>
      </div>
    </Section>
  );
}

function Withdraw({ job, change }: { job: Job; change: Change }) {
  const changed = useChanged(job.id);
  const act = useActForm({
    name: `withdraw-${change.id}`,
    initialValues: { reason: '' },
    schema: WithdrawChange,
    send: (values, key) => actOnChange(job.id, change.id, 'withdraw', values, key),
    onDone: (after) => {
      toast('The homeowners hear that it was withdrawn.');
      changed(after);
    },
  });
  return (
    <Section title="Withdraw it">
      <Form act={act} submitLabel="Withdraw the change" color="oxide">
        <TextAreaField field={act.field('reason')} label="Why" hint="The homeowners read this." rows={2} />
      </Form>
    </Section>
  );
}
