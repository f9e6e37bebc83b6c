import { Button } from '@mantine/core';
import type { GuestDoor } from '@tallypole/shared/schemas/guest-links';
import { useEffect, useState } from 'react';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { FailureState } from '../../../ui/page.tsx';
import { askForCode, confirm } from '../api/guest.ts';
import { strings } from '../strings.ts';

const WAIT_SECONDS = 30;

/** Takes the code that was mailed; another one can be asked for once the mail had time to arrive. */
export function CodeForm({ submitLabel, onDone }: { submitLabel: string; onDone: (door: GuestDoor) => void }) {
  const act = useActForm({ name: 'guest-code', initialValues: { code: '' }, keep: false, send: ({ code }) => confirm(code), onDone });
  return (
    <>
      <Form act={act} submitLabel={submitLabel}>
        <TextField field={act.field('code')} label={strings.code} inputMode="numeric" autoComplete="one-time-code" spellCheck={false} maxLength={12} autoFocus />
      </Form>
      <AnotherCode />
    </>
  );
}

function AnotherCode() {
  const [left, setLeft] = useState(WAIT_SECONDS);
  const [sent, setSent] = useState(0);
  const [failure, setFailure] = useState<unknown>(null);
  useEffect(() => {
    const clock = setInterval(() => setLeft((seconds) => Math.max(0, seconds - 1)), 1_000);
    return () => clearInterval(clock);
  }, []);
  const again = () => {
    setLeft(WAIT_SECONDS);
    setFailure(null);
    askForCode().then(
      () => setSent((times) => times + 1),
      (error: unknown) => setFailure(error),
    );
  };
  return (
    <div>
      {failure === null ? null : <FailureState error={failure} />}
      <p role="status">{sent > 0 && failure === null ? strings.sentAgain : ''}</p>
      <Button variant="subtle" disabled={left > 0} onClick={again}>
        {left > 0 ? strings.againIn(left) : strings.again}
      </Button>
    </div>
  );
}
