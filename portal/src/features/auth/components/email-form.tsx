import { Button } from '@mantine/core';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { askForCode } from '../api/sign-in.ts';
import { strings } from '../strings.ts';

/** The first way in: six digits by mail. */
export function EmailForm({ onSent, onPassword }: { onSent: (email: string) => void; onPassword: () => void }) {
  const act = useActForm({
    name: 'sign-in',
    initialValues: { email: '' },
    keep: false,
    send: ({ email }) => askForCode(email.trim().toLowerCase()),
    onDone: ({ sentTo }) => onSent(sentTo),
  });
  return (
    <Form act={act} submitLabel={strings.send} aside={<Button variant="subtle" onClick={onPassword}>{strings.byPassword}</Button>}>
      <TextField field={act.field('email')} label={strings.email} hint={strings.emailHint} type="email" inputMode="email" autoComplete="email" spellCheck={false} />
    </Form>
  );
}
