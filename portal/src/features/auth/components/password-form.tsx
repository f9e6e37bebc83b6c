import { Button } from '@mantine/core';
import { Form, PasswordField, TextField, useActForm } from '../../../ui/forms/index.ts';
import { signInByPassword, type Arrived } from '../api/sign-in.ts';
import { strings } from '../strings.ts';

/** Address and password, for whoever has set one. */
export function PasswordForm({ onDone, onCode }: { onDone: (arrived: Arrived) => void; onCode: () => void }) {
  const act = useActForm({
    name: 'sign-in-password',
    initialValues: { email: '', password: '' },
    keep: false,
    send: ({ email, password }) => signInByPassword(email.trim().toLowerCase(), password),
    onDone,
  });
  return (
    <Form act={act} submitLabel={strings.enter} aside={<Button variant="subtle" onClick={onCode}>{strings.byCode}</Button>}>
      <TextField field={act.field('email')} label={strings.email} type="email" inputMode="email" autoComplete="username" spellCheck={false} autoFocus />
      <PasswordField field={act.field('password')} label={strings.password} hint={strings.passwordHint} autoComplete="current-password" />
    </Form>
  );
}
