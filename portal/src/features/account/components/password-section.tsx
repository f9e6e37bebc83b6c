import { Button } from '@mantine/core';
import { SetPassword, type Account } from '@tallypole/shared/schemas/auth-account';
import { useState } from 'react';
import { writtenInstant } from '../../../lib/dates.ts';
import { useMe } from '../../../lib/me.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { Form, PasswordField, useActForm } from '../../../ui/forms/index.ts';
import { Section } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { removePassword, setPassword } from '../api/account.ts';
import { strings } from '../strings.ts';
import { browserZone, useAccountDone } from './use-account.ts';

export function PasswordSection({ password }: { password: Account['password'] }) {
  const { person } = useMe();
  const presence = usePresence();
  const done = useAccountDone();
  const [opened, setOpened] = useState(false);
  return (
    <Section title={strings.passwordTitle}>
      <p style={{ marginBottom: 12 }}>{password ? strings.passwordSince(writtenInstant(password.setAt, browserZone())) : strings.noPassword}</p>
      {opened ? <PasswordForm isFirst={password === null} onClose={() => setOpened(false)} /> : null}
      {opened ? null : (
        <div style={{ display: 'flex', gap: 12, flexWrap: 'wrap' }}>
          {presence.dialog}
          <Button variant="outline" onClick={() => setOpened(true)}>
            {password ? strings.openChange : strings.openPassword}
          </Button>
          {password ? <ActButton scope={`password-remove:${password.setAt}`} label={strings.removePassword} about={person.email} variant="subtle" send={() => presence.guard(removePassword)} onDone={done(strings.passwordRemoved)} /> : null}
        </div>
      )}
    </Section>
  );
}

function PasswordForm({ isFirst, onClose }: { isFirst: boolean; onClose: () => void }) {
  const { person } = useMe();
  const presence = usePresence();
  const done = useAccountDone();
  const act = useActForm({
    name: 'account-password',
    initialValues: { password: '' },
    schema: SetPassword,
    keep: false,
    send: (values) => presence.guard(() => setPassword(values.password)),
    onDone: (account) => {
      onClose();
      done(strings.passwordDone)(account);
    },
  });
  return (
    <>
      {presence.dialog}
      <Form act={act} submitLabel={isFirst ? strings.setPassword : strings.changePassword} aside={<Button variant="subtle" onClick={onClose}>{strings.cancel}</Button>}>
        {/* a password manager keeps the new one under this address */}
        <input type="text" name="username" autoComplete="username" value={person.email} readOnly hidden />
        <PasswordField field={act.field('password')} label={strings.newPassword} hint={strings.passwordHint} autoComplete="new-password" />
      </Form>
    </>
  );
}
