import { ConfirmSecondStep, type SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { confirmSecondStep } from '../api/account.ts';
import { stepStrings as strings } from '../strings.ts';
import { QrPicture } from './qr-picture.tsx';
import { useAccountDone } from './use-account.ts';
import classes from './account.module.css';

/** The key as a picture and as text, and the first code of it. */
export function ConfirmKey({ enrolment, onDone }: { enrolment: SecondStepKey; onDone: (codes: readonly string[]) => void }) {
  const done = useAccountDone();
  const act = useActForm({
    name: 'second-step',
    initialValues: { code: '' },
    schema: ConfirmSecondStep,
    keep: false,
    send: ({ code }) => confirmSecondStep(code),
    onDone: ({ codes, account }) => {
      onDone(codes);
      done()(account);
    },
  });
  return (
    <>
      <h2>{strings.scan}</h2>
      <QrPicture text={enrolment.uri} label={strings.pictureOf} />
      <p>
        {strings.typeIt}
        <br />
        <span className={classes['key']}>{enrolment.key.replace(/(.{4})(?=.)/g, '$1 ')}</span>
      </p>
      <h2>{strings.enter}</h2>
      <Form act={act} submitLabel={strings.turnOn}>
        <TextField field={act.field('code')} label={strings.code} inputMode="numeric" autoComplete="one-time-code" spellCheck={false} maxLength={12} />
      </Form>
    </>
  );
}
