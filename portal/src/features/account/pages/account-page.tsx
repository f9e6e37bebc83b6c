import { useSuspenseQuery } from '@tanstack/react-query';
import { Suspense } from 'react';
import { LoadingState, PageHead } from '../../../ui/page.tsx';
import { accountQuery } from '../api/account.ts';
import { AddressSection } from '../components/address-section.tsx';
import { NameSection } from '../components/name-section.tsx';
import { PasswordSection } from '../components/password-section.tsx';
import { SecondStepSection } from '../components/second-step-section.tsx';
import { SessionsSection } from '../components/sessions-section.tsx';
import { strings } from '../strings.ts';
import classes from '../components/account.module.css';

export const Component = () => (
  <main className={classes['page']} id="main">
    <Suspense fallback={<LoadingState />}>
      <Sections />
    </Suspense>
  </main>
);

function Sections() {
  const { data } = useSuspenseQuery(accountQuery);
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.lead}</p>
      </PageHead>
      <NameSection />
      <AddressSection />
      <PasswordSection password={data.password} />
      <SecondStepSection step={data.secondStep} />
      <SessionsSection sessions={data.sessions} />
    </>
  );
}
