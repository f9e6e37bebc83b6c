import { Button } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import { useState } from 'react';
import { useLocation, useNavigate, useSearchParams } from 'react-router-dom';
import { enter } from '../../../lib/me.ts';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { Note, PageHead } from '../../../ui/page.tsx';
import { askForCode, signIn } from '../api/sign-in.ts';
import { demoPeopleQuery } from '../api/demo-people.ts';
import { AnotherCode } from '../components/another-code.tsx';
import { DemoPeopleList } from '../components/demo-people-list.tsx';
import { safePath } from '../safe-path.ts';
import { strings } from '../strings.ts';
import classes from './sign-in-page.module.css';

export function Component() {
  const [sentTo, setSentTo] = useState<string | null>(null);
  const [params] = useSearchParams();
  const navigate = useNavigate();
  const { data: demo } = useQuery(demoPeopleQuery);
  const state: unknown = useLocation().state;
  const ended = typeof state === 'object' && state !== null && 'ended' in state;
  const goIn = (who: Me) => {
    enter(who);
    void navigate(safePath(params.get('to')), { replace: true });
  };
  return (
    <div className={classes['page']}>
      <main className={classes['card']} id="main">
        <p className={classes['brand']}>
          <img src="/icon.svg" alt="" width={28} height={28} /> Tallypole
        </p>
        <PageHead title={strings.title}>
          <p className="quiet">What changed and what it costs, what is built and what is owed for it: agreed between builder, household and lender.</p>
        </PageHead>
        {ended ? <Note>{strings.ended}</Note> : null}
        {sentTo ? <CodeForm email={sentTo} onDone={goIn} onBack={() => setSentTo(null)} /> : <EmailForm onSent={setSentTo} />}
      </main>
      {demo && !sentTo ? <DemoPeopleList demo={demo} onSent={setSentTo} /> : null}
      {demo?.mailPageUrl && sentTo ? (
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

function EmailForm({ onSent }: { onSent: (email: string) => void }) {
  const act = useActForm({
    name: 'sign-in',
    initialValues: { email: '' },
    keep: false,
    send: ({ email }) => askForCode(email.trim().toLowerCase()),
    onDone: ({ sentTo }) => onSent(sentTo),
  });
  return (
    <Form act={act} submitLabel={strings.send}>
      <TextField field={act.field('email')} label={strings.email} hint={strings.emailHint} type="email" inputMode="email" autoComplete="email" spellCheck={false} />
    </Form>
  );
}

function CodeForm({ email, onDone, onBack }: { email: string; onDone: (me: Me) => void; onBack: () => void }) {
  const act = useActForm({
    name: 'sign-in-code',
    initialValues: { email, code: '' },
    keep: false,
    send: ({ code }) => signIn(email, code.replace(/\s/g, '')),
    onDone,
  });
  return (
    <>
      <p>
        {strings.sentTo} <strong>{email}</strong>.
      </p>
      <Form
        act={act}
        submitLabel={strings.enter}
        aside={
          <Button variant="subtle" onClick={onBack}>
            {strings.otherAddress}
          </Button>
        }
      >
        <TextField field={act.field('code')} label={strings.code} inputMode="numeric" autoComplete="one-time-code" spellCheck={false} maxLength={12} autoFocus />
      </Form>
      <AnotherCode email={email} />
    </>
  );
}
