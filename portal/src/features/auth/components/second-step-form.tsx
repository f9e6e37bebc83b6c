import { Button } from '@mantine/core';
import type { Me } from '@tallypole/shared/schemas/auth';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { giveSecondStep } from '../api/sign-in.ts';
import { strings } from '../strings.ts';

/** After mail or password: a code of the person's authenticator. */
export function SecondStepForm({ onDone, onBack }: { onDone: (me: Me) => void; onBack: () => void }) {
  const act = useActForm({ name: 'sign-in-step', initialValues: { code: '' }, keep: false, send: ({ code }) => giveSecondStep(code), onDone });
  return (
    <>
      <p>{strings.stepWhy}</p>
      <Form act={act} submitLabel={strings.enter} aside={<Button variant="subtle" onClick={onBack}>{strings.beginAgain}</Button>}>
        <TextField field={act.field('code')} label={strings.stepCode} hint={strings.stepHint} autoComplete="one-time-code" spellCheck={false} maxLength={24} autoFocus />
      </Form>
    </>
  );
}
