import { Button } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import { formatChange } from '@tallypole/shared/money';
import { CONSENT_VERSION, DeclineChange, SignChange, type Change } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { writtenDate } from '../../../lib/dates.ts';
import { isProblemWith } from '../../../lib/problem.ts';
import { useMe } from '../../../lib/me.ts';
import { CheckboxField, Form, TextAreaField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { Note, Section } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnChange } from '../api/changes.ts';
import { dayCount, strings } from '../strings.ts';
import classes from './changes.module.css';
import { useChanged } from './use-changed.ts';

export interface DecideProps {
  job: Job;
  change: Change;
  /** The server refused since it would do something else than what was shown: what it said. */
  onMoved: (message: string) => void;
}

/** The signature: says in a sentence what will happen, above a button that names the act. Or declining, with a reason. */
export function Decide({ job, change, onMoved }: DecideProps) {
  const [declining, setDeclining] = useState(false);
  const me = change.signers.find((signer) => signer.me);
  if (me?.signedAt) return <Note>You have signed. {waitsFor(change)}</Note>;
  if (!change.document || !change.effectHash) return <p role="status">The paper is being made. It is here in a moment.</p>;
  if (declining) return <Decline job={job} change={change} onBack={() => setDeclining(false)} />;
  // the key makes a new form when the effect moves: what is signed is what is shown
  return <Sign key={change.effectHash} job={job} change={change} onMoved={onMoved} onDecline={() => setDeclining(true)} />;
}

function waitsFor(change: Change): string {
  const missing = change.signers.filter((signer) => !signer.me && signer.signedAt === null).map(({ name }) => name);
  return missing.length > 0 ? `It holds once ${missing.join(' and ')} has signed too.` : '';
}

function Sign({ job, change, onMoved, onDecline }: DecideProps & { onDecline: () => void }) {
  const id = useNewId(`sign-${change.id}-${(change.effectHash ?? '').slice(0, 12)}`);
  const { person } = useMe();
  const presence = usePresence();
  const queries = useQueryClient();
  const changed = useChanged(job.id);
  const price = formatChange(change.chargedCents ?? 0);
  const act = useActForm({
    name: `sign-${change.id}-${(change.effectHash ?? '').slice(0, 12)}`,
    initialValues: { id, typedName: '', consent: false, consentVersion: CONSENT_VERSION, effectHash: change.effectHash, documentSha256: change.document?.sha256 },
    schema: SignChange,
    send: async (values, key) => {
      try {
        return await presence.guard(() => actOnChange(job.id, change.id, 'sign', values, key));
      } catch (error) {
        if (isProblemWith(error, 'effect_changed')) {
          onMoved(error.message);
          await queries.invalidateQueries({ queryKey: ['jobs', job.id] });
        }
        throw error;
      }
    },
    onDone: (after) => {
      toast('Your signature is recorded.');
      changed(after);
    },
  });
  return (
    <Section title="Sign, or decline">
      {presence.dialog}
      <p style={{ marginBottom: 12 }}>
        You agree to the change above, its price of {price} and {dayCount(change.days)}. {change.signersNeeded === 'all' ? waitsFor(change) : ''}
      </p>
      <div className={classes['decide']}>
        <Form
          act={act}
          submitLabel={`Sign for ${price}`}
          aside={
            <Button variant="subtle" color="oxide" onClick={onDecline}>
              Decline, and say why
            </Button>
          }
        >
          <TextField field={act.field('typedName')} label="Type your name to sign" hint={person.name ?? undefined} autoComplete="name" />
          <CheckboxField field={act.field('consent')} label={strings.consent} />
        </Form>
      </div>
      <p className="quiet" style={{ marginTop: 12 }}>
        The price holds until {writtenDate(change.goodUntil, true)}. {strings.refuse}
      </p>
    </Section>
  );
}

function Decline({ job, change, onBack }: { job: Job; change: Change; onBack: () => void }) {
  const changed = useChanged(job.id);
  const act = useActForm({
    name: `decline-${change.id}`,
    initialValues: { reason: '' },
    schema: DeclineChange,
    send: (values, key) => actOnChange(job.id, change.id, 'decline', values, key),
    onDone: (after) => {
      toast('Your builder hears that you declined, and why.');
      changed(after);
    },
  });
  return (
    <Section title="Decline this change">
      <Form
        act={act}
        submitLabel="Decline the change"
        color="oxide"
        aside={
          <Button variant="subtle" onClick={onBack}>
            Back
          </Button>
        }
      >
        <TextAreaField field={act.field('reason')} label="Why" hint="Your builder reads this. The house is built as drawn, and nothing is owed." />
      </Form>
    </Section>
  );
}
