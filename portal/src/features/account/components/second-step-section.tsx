import type { Account, RecoveryCodes } from '@tallypole/shared/schemas/auth-account';
import { useState } from 'react';
import { writtenInstant } from '../../../lib/dates.ts';
import { useMe } from '../../../lib/me.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Section } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { newRecoveryCodes, removeSecondStep } from '../api/account.ts';
import { strings } from '../strings.ts';
import { RecoveryCodeList } from './recovery-code-list.tsx';
import { browserZone, useAccountDone } from './use-account.ts';

export function SecondStepSection({ step }: { step: Account['secondStep'] }) {
  const { person } = useMe();
  const presence = usePresence();
  const done = useAccountDone();
  const [codes, setCodes] = useState<readonly string[] | null>(null);
  const renewed = ({ codes: fresh, account }: RecoveryCodes) => {
    setCodes(fresh);
    done()(account);
  };
  if (step.since === null) {
    return (
      <Section title={strings.stepTitle}>
        <p style={{ marginBottom: 12 }}>{strings.stepUse[step.use]}</p>
        <LinkButton to="/account/second-step?to=/account" variant="outline">
          {strings.setUp}
        </LinkButton>
      </Section>
    );
  }
  return (
    <Section title={strings.stepTitle}>
      {presence.dialog}
      <p>{strings.stepOn(writtenInstant(step.since, browserZone()))}</p>
      <p style={{ margin: '8px 0 12px' }}>{strings.codesLeft(step.recoveryCodesLeft)}</p>
      {codes ? <RecoveryCodeList codes={codes} onKept={() => setCodes(null)} /> : null}
      <div style={{ display: 'flex', gap: 12, flexWrap: 'wrap' }}>
        <ActButton scope="recovery-codes" label={strings.newCodes} about={person.email} send={() => presence.guard(newRecoveryCodes)} onDone={renewed} />
        <ActButton
          scope={`second-step-off:${step.since}`}
          label={strings.turnOff}
          about={person.email}
          variant="subtle"
          question={{ title: strings.turnOffTitle, text: strings.turnOffText, confirm: strings.turnOff }}
          send={() => presence.guard(removeSecondStep)}
          onDone={done(strings.turnedOff)}
        />
      </div>
    </Section>
  );
}
