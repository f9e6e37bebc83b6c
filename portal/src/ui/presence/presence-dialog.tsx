import { Modal } from '@mantine/core';
import { ProvePresence } from '@tallypole/shared/schemas/auth';
import { post } from '../../lib/http.ts';
import { Form, TextField, useActForm } from '../forms/index.ts';

interface PresenceDialogProps {
  sentTo: string;
  onSettled: (present: boolean) => void;
}

/** Asks for the code that was mailed. */
const PresenceDialog = ({ sentTo, onSettled }: PresenceDialogProps) => (
  <Modal opened onClose={() => onSettled(false)} title="Confirm that it is you" closeButtonProps={{ 'aria-label': 'Close' }} centered>
    <CodeForm sentTo={sentTo} onDone={() => onSettled(true)} />
  </Modal>
);
export default PresenceDialog;

function CodeForm({ sentTo, onDone }: { sentTo: string; onDone: () => void }) {
  const act = useActForm({
    name: 'presence',
    initialValues: { code: '' },
    schema: ProvePresence,
    keep: false,
    send: ({ code }) => post<undefined>('auth/presence', { code: code.replace(/\s/g, '') }),
    onDone,
  });
  return (
    <Form act={act} submitLabel="Confirm and go on">
      <p>We mailed a code to {sentTo}. It is good for 10 minutes.</p>
      <TextField field={act.field('code')} label="Code from the mail" inputMode="numeric" autoComplete="one-time-code" spellCheck={false} autoFocus />
    </Form>
  );
}
