import { useQuery } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import { useState } from 'react';
import { useLocation, useNavigate, useSearchParams } from 'react-router-dom';
import { enter } from '../../../lib/me.ts';
import { safePath } from '../../../lib/safe-path.ts';
import { Note, PageHead } from '../../../ui/page.tsx';
import { demoPeopleQuery } from '../api/demo-people.ts';
import type { Arrived } from '../api/sign-in.ts';
import { CodeForm } from '../components/code-form.tsx';
import { DemoPeopleList } from '../components/demo-people-list.tsx';
import { EmailForm } from '../components/email-form.tsx';
import { PasswordForm } from '../components/password-form.tsx';
import { SecondStepForm } from '../components/second-step-form.tsx';
import { strings } from '../strings.ts';
import classes from './sign-in-page.module.css';

type Way = { by: 'address' } | { by: 'code'; sentTo: string } | { by: 'password' } | { by: 'second_step' };

export function Component() {
  const [way, setWay] = useState<Way>({ by: 'address' });
  const [params] = useSearchParams();
  const navigate = useNavigate();
  const { data: demo } = useQuery(demoPeopleQuery);
  const state: unknown = useLocation().state;
  const ended = typeof state === 'object' && state !== null && 'ended' in state;
  const goIn = (who: Me) => {
    enter(who);
    const to = safePath(params.get('to'));
    // whoever handles money is asked once, when they come in; the page explains and lets them go on
    void navigate(who.secondStep === 'required' ? `/account/second-step?to=${encodeURIComponent(to)}` : to, { replace: true });
  };
  const arrive = (arrived: Arrived) => ('next' in arrived ? setWay({ by: 'second_step' }) : goIn(arrived));
  const back = () => setWay({ by: 'address' });
  const sent = (sentTo: string) => setWay({ by: 'code', sentTo });
  return (
    <div className={classes['page']}>
      <main className={classes['card']} id="main">
        <p className={classes['brand']}>
          <img src="/icon.svg" alt="" width={28} height={28} /> Tallypole
        </p>
        <PageHead title={way.by === 'second_step' ? strings.stepTitle : strings.title}>
          <p className="quiet">What changed and what it costs, what is built and what is owed for it: agreed between builder, household and lender.</p>
        </PageHead>
        {ended ? <Note>{strings.ended}</Note> : null}
        {way.by === 'address' ? <EmailForm onSent={sent} onPassword={() => setWay({ by: 'password' })} /> : null}
        {way.by === 'code' ? <CodeForm email={way.sentTo} onDone={arrive} onBack={back} /> : null}
        {way.by === 'password' ? <PasswordForm onDone={arrive} onCode={back} /> : null}
        {way.by === 'second_step' ? <SecondStepForm onDone={goIn} onBack={back} /> : null}
      </main>
      {demo && way.by === 'address' ? <DemoPeopleList demo={demo} onSent={sent} /> : null}
      {demo?.mailPageUrl && way.by === 'code' ? (
        <p className="quiet">
          The code arrives on the{' '}
          <a href={demo.mailPageUrl} target="_blank" rel="noreferrer">
            {strings.mailPage}
          </a>
          .
        </p>
      ) : null}
    </div>
  );
}
