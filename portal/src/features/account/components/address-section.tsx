import { Button } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import { AskForAddress, ChangeAddress } from '@tallypole/shared/schemas/auth-account';
import { useState } from 'react';
import { enter, useMe } from '../../../lib/me.ts';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { Section } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { toast } from '../../../ui/toast.ts';
import { accountQuery, askForAddress, changeAddress } from '../api/account.ts';
import { strings } from '../strings.ts';

type Stage = { at: 'rest' } | { at: 'address' } | { at: 'code'; sentTo: string };

/** Another address: a code at the new one, then it counts. */
export function AddressSection() {
  const { person } = useMe();
  const [stage, setStage] = useState<Stage>({ at: 'rest' });
  return (
    <Section title={strings.addressTitle}>
      <p>{strings.addressNow(person.email)}</p>
      <div style={{ marginTop: 12 }}>
        {stage.at === 'rest' ? (
          <Button variant="outline" onClick={() => setStage({ at: 'address' })}>
            {strings.change}
          </Button>
        ) : null}
        {stage.at === 'address' ? <AddressForm onSent={(sentTo) => setStage({ at: 'code', sentTo })} onCancel={() => setStage({ at: 'rest' })} /> : null}
        {stage.at === 'code' ? <AddressCodeForm sentTo={stage.sentTo} onDone={() => setStage({ at: 'rest' })} onBack={() => setStage({ at: 'address' })} /> : null}
      </div>
    </Section>
  );
}

function AddressForm({ onSent, onCancel }: { onSent: (sentTo: string) => void; onCancel: () => void }) {
  const presence = usePresence();
  const act = useActForm({
    name: 'account-address',
    initialValues: { email: '' },
    schema: AskForAddress,
    send: ({ email }) => presence.guard(() => askForAddress(email)),
    onDone: ({ sentTo }) => onSent(sentTo),
  });
  return (
    <>
      {presence.dialog}
      <Form act={act} submitLabel={strings.sendCode} aside={<Button variant="subtle" onClick={onCancel}>{strings.cancel}</Button>}>
        <TextField field={act.field('email')} label={strings.newAddress} hint={strings.newAddressHint} type="email" inputMode="email" autoComplete="email" spellCheck={false} autoFocus />
      </Form>
    </>
  );
}

function AddressCodeForm({ sentTo, onDone, onBack }: { sentTo: string; onDone: () => void; onBack: () => void }) {
  const presence = usePresence();
  const queries = useQueryClient();
  const act = useActForm({
    name: 'account-address-code',
    initialValues: { code: '' },
    schema: ChangeAddress,
    keep: false,
    send: ({ code }) => presence.guard(() => changeAddress(code)),
    onDone: (me) => {
      enter(me);
      void queries.invalidateQueries(accountQuery);
      toast(strings.addressDone(me.person.email));
      onDone();
    },
  });
  return (
    <>
      {presence.dialog}
      <p role="status" style={{ marginBottom: 12 }}>
        {strings.codeSent(sentTo)}
      </p>
      <Form act={act} submitLabel={strings.confirmAddress} aside={<Button variant="subtle" onClick={onBack}>{strings.anotherAddress}</Button>}>
        <TextField field={act.field('code')} label={strings.code} inputMode="numeric" autoComplete="one-time-code" spellCheck={false} maxLength={12} autoFocus />
      </Form>
    </>
  );
}
