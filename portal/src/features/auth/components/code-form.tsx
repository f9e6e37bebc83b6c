import { Button } from '@mantine/core';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { signIn, type Arrived } from '../api/sign-in.ts';
import { strings } from '../strings.ts';
import { AnotherCode } from './another-code.tsx';

/** The six digits from the mail. */
export function CodeForm({ email, onDone, onBack }: { email: string; onDone: (arrived: Arrived) => void; onBack: () => void }) {
  const act = useActForm({
    name: 'sign-in-code',
    initialValues: { email, code: '' },
    keep: false,
    send: ({ code }) => signIn(email, code.replace(/\s/g, '')),
    onDone,
  });
  return (
    <>
      <p>
        {strings.sentTo} <strong>{email}</strong>.
      </p>
      <Form
        act={act}
        submitLabel={strings.enter}
        aside={
          <Button variant="subtle" onClick={onBack}>
            {strings.otherAddress}
          </Button>
        }
      >
        <TextField field={act.field('code')} label={strings.code} inputMode="numeric" autoComplete="one-time-code" spellCheck={false} maxLength={12} autoFocus />
      </Form>
      <AnotherCode email={email} />
    </>
  );
}
