import type { GuestDoor } from '@tallypole/shared/schemas/guest-links';
import { useState } from 'react';
import { Form, useActForm } from '../../../ui/forms/index.ts';
import { PageHead } from '../../../ui/page.tsx';
import { askForCode } from '../api/guest.ts';
import { strings } from '../strings.ts';
import { CodeForm } from './code-form.tsx';

/** Before the code: the firm's name, a masked address, and one button. Opening the page mails nothing. */
export function Door({ door, onOpened }: { door: GuestDoor; onOpened: (door: GuestDoor) => void }) {
  const [asked, setAsked] = useState(false);
  const act = useActForm({ name: 'guest-ask', initialValues: {}, keep: false, send: () => askForCode(), onDone: () => setAsked(true) });
  return (
    <>
      <PageHead title={strings.doorTitle(door.firmName)}>
        <p className="quiet">{strings.doorExplain}</p>
      </PageHead>
      <p>
        {asked ? strings.sentTo : strings.goesTo} <strong>{door.sentTo}</strong>.
      </p>
      {asked ? <CodeForm submitLabel={strings.enter} onDone={onOpened} /> : <Form act={act} submitLabel={strings.sendCode}>{null}</Form>}
    </>
  );
}
