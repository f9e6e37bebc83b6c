import { useSuspenseQuery } from '@tanstack/react-query';
import type { SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import { Suspense, useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { safePath } from '../../../lib/safe-path.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { LoadingState, PageHead } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { accountQuery, startSecondStep } from '../api/account.ts';
import { ConfirmKey } from '../components/confirm-key.tsx';
import { RecoveryCodeList } from '../components/recovery-code-list.tsx';
import { strings as accountStrings, stepStrings as strings } from '../strings.ts';
import classes from '../components/account.module.css';

/** Setting up a second step: what it is, the key, a first code, the recovery codes. */
export const Component = () => (
  <main className={classes['page']} id="main">
    <Suspense fallback={<LoadingState />}>
      <Steps />
    </Suspense>
  </main>
);

function Steps() {
  const { data } = useSuspenseQuery(accountQuery);
  const [params] = useSearchParams();
  const navigate = useNavigate();
  const presence = usePresence();
  const [key, setKey] = useState<SecondStepKey | null>(null);
  const [codes, setCodes] = useState<readonly string[] | null>(null);
  const to = safePath(params.get('to') ?? '/account');
  if (codes) {
    return (
      <div className={classes['stack']}>
        <PageHead title={strings.onTitle} key="on" />
        <RecoveryCodeList codes={codes} onKept={() => void navigate(to)} />
      </div>
    );
  }
  if (data.secondStep.since !== null) {
    return (
      <>
        <PageHead title={strings.title}>
          <p>{strings.already}</p>
        </PageHead>
        <LinkButton to="/account">{strings.toAccount}</LinkButton>
      </>
    );
  }
  const { use } = data.secondStep;
  return (
    <div className={classes['stack']}>
      {presence.dialog}
      <PageHead title={strings.title}>
        <p>{accountStrings.stepUse[use]}</p>
      </PageHead>
      {key ? (
        <ConfirmKey enrolment={key} onDone={setCodes} />
      ) : (
        <>
          <p>{strings.what}</p>
          <p>{strings.takes}</p>
          <div className={classes['acts']}>
            <ActButton scope="second-step-start" label={strings.begin} about={strings.title} variant="filled" send={() => presence.guard(startSecondStep)} onDone={setKey} />
            <LinkButton to={to} variant="subtle">
              {strings.notNow}
            </LinkButton>
          </div>
          {use === 'required' ? <p className="quiet">{strings.later}</p> : null}
        </>
      )}
    </div>
  );
}
