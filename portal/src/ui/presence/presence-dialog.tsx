import { Modal } from '@mantine/core';
import { ProvePresence, type PresenceAsked } from '@tallypole/shared/schemas/auth';
import { post } from '../../lib/http.ts';
import classes from '../page.module.css';
import { Form, TextField, useActForm } from '../forms/index.ts';

interface PresenceDialogProps {
  by: PresenceAsked;
  onSettled: (present: boolean) => void;
}

/** Asks for the code that was mailed, or for the authenticator's where the person has a second step. */
const PresenceDialog = ({ by, onSettled }: PresenceDialogProps) => (
  // its parts one by one: the header that comes with the whole would be a second banner of the page
  <Modal.Root opened onClose={() => onSettled(false)} centered>
    <Modal.Overlay />
    <Modal.Content>
      <Modal.Body className={classes['question']}>
        <div className={classes['questionHead']}>
          <Modal.Title>Confirm that it is you</Modal.Title>
          <Modal.CloseButton size="lg" aria-label="Close" />
        </div>
        <CodeForm by={by} onDone={() => onSettled(true)} />
      </Modal.Body>
    </Modal.Content>
  </Modal.Root>
);
export default PresenceDialog;

function CodeForm({ by, onDone }: { by: PresenceAsked; onDone: () => void }) {
  const act = useActForm({
    name: 'presence',
    initialValues: { code: '' },
    schema: ProvePresence,
    keep: false,
    send: ({ code }) => post<undefined>('auth/presence', { code }),
    onDone,
  });
  const mailed = by.by === 'mail';
  return (
    <Form act={act} submitLabel="Confirm and go on">
      {mailed ? <p>We mailed a code to {by.sentTo}. It is good for 10 minutes.</p> : null}
      <TextField
        field={act.field('code')}
        label={mailed ? 'Code from the mail' : 'Code of your authenticator'}
        hint={mailed ? undefined : 'Or one of your recovery codes.'}
        inputMode={mailed ? 'numeric' : 'text'}
        autoComplete="one-time-code"
        spellCheck={false}
        autoFocus
      />
    </Form>
  );
}
