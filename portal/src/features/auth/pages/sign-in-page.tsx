import { Button } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { SignIn, AskForCode, Name, type Me } from '@tallypole/shared/schemas/auth';
import { useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { meQuery } from '../../../lib/me.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { Form, TextField, useActForm } from '../../../ui/forms/index.ts';
import { PageHead } from '../../../ui/page.tsx';
import { askForCode, setName, signIn } from '../api/sign-in.ts';
import { demoPeopleQuery } from '../api/demo-people.ts';
import { DemoPeopleList } from '../components/demo-people-list.tsx';
import { strings } from '../strings.ts';
import classes from './sign-in-page.module.css';

/** Only a path of our own is gone back to. */
const safePath = (to: string | null): string => (to && /^\/(?![/\\])/.test(to) ? to : '/jobs');

export function Component() {
  const [sentTo, setSentTo] = useState<string | null>(null);
  const [me, setMe] = useState<Me | null>(null);
  const [params] = useSearchParams();
  const navigate = useNavigate();
  const { data: demo } = useQuery(demoPeopleQuery);
  const enter = async (who: Me) => {
    queryClient.setQueryData(meQuery.queryKey, who);
    await navigate(safePath(params.get('to')), { replace: true });
  };
  const signedIn = (who: Me) => {
    if (who.person.name === null) setMe(who);
    else void enter(who);
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
        {me ? <NameForm onDone={(who) => void enter(who)} /> : sentTo ? <CodeForm email={sentTo} onDone={signedIn} onBack={() => setSentTo(null)} /> : <EmailForm onSent={setSentTo} />}
      </main>
      {demo && !sentTo && !me ? <DemoPeopleList demo={demo} onSent={setSentTo} /> : null}
      {demo?.mailPageUrl && sentTo && !me ? (
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
    schema: AskForCode,
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
    schema: SignIn,
    keep: false,
    send: ({ code }) => signIn(email, code.replace(/\s/g, '')),
    onDone,
  });
  const [again, setAgain] = useState(false);
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
      <p>
        <Button variant="subtle" disabled={again} onClick={() => void askForCode(email).then(() => setAgain(true))}>
          {again ? 'Another code is on its way' : strings.again}
        </Button>
      </p>
    </>
  );
}

function NameForm({ onDone }: { onDone: (me: Me) => void }) {
  const act = useActForm({ name: 'my-name', initialValues: { name: '' }, schema: Name, send: ({ name }) => setName(name), onDone });
  return (
    <Form act={act} submitLabel="Go on">
      <TextField field={act.field('name')} label={strings.name} hint={strings.nameHint} autoComplete="name" autoFocus />
    </Form>
  );
}
