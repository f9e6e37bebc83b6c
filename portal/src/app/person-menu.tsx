import { Button, useMantineColorScheme } from '@mantine/core';
import { useClickOutside } from '@mantine/hooks';
import type { Me } from '@tallypole/shared/schemas/auth';
import { may } from '@tallypole/shared/schemas/permissions';
import { useRef, useState, type ReactNode } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { signOut } from '../features/auth/api/sign-out.ts';
import { dropEverything } from '../lib/drafts.ts';
import { isProblemWith, Problem } from '../lib/problem.ts';
import { queryClient } from '../lib/query-client.ts';
import { toast } from '../ui/toast.ts';
import classes from './person-menu.module.css';

const SCHEMES = [
  { value: 'auto', label: 'By device' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
] as const;
/** More than these are found on the page of all jobs. */
const MOST_JOBS = 6;

/** Who I am, where else I can go, light or dark, and the way out: a button that shows links, no menu of an application. */
export function PersonMenu({ me }: { me: Me }) {
  const [opened, setOpened] = useState(false);
  const button = useRef<HTMLButtonElement>(null);
  const place = useClickOutside<HTMLDivElement>(() => setOpened(false));
  return (
    <div
      className={classes['place']}
      ref={place}
      onKeyDown={({ key }) => {
        if (key !== 'Escape' || !opened) return;
        setOpened(false);
        button.current?.focus();
      }}
    >
      <Button ref={button} variant="subtle" aria-expanded={opened} aria-controls="person-menu" onClick={() => setOpened(!opened)}>
        {me.person.name ?? me.person.email}
      </Button>
      {opened ? (
        <div id="person-menu" className={classes['dropdown']}>
          <Places me={me} onGo={() => setOpened(false)} />
          <Schemes />
          <SignOut />
        </div>
      ) : null}
    </div>
  );
}

function Places({ me, onGo }: { me: Me; onGo: () => void }) {
  const go = (to: string, words: ReactNode, inner = false) => (
    <li key={to}>
      <Link to={to} onClick={onGo} className={inner ? classes['inner'] : undefined}>
        {words}
      </Link>
    </li>
  );
  return (
    <ul>
      {me.firms.map(({ id, name, role }) => go(`/firms/${id}`, `${name}, ${role}`))}
      {me.firms.filter(({ role }) => may([role], 'firm.pricing')).map(({ id, name }) => go(`/firms/${id}/pricing`, me.firms.length > 1 ? `${name}: how changes are priced` : 'How changes are priced'))}
      {go('/account', 'Your account')}
      {go('/jobs', 'Your jobs')}
      {me.jobs.slice(0, MOST_JOBS).map(({ id, name }) => go(`/jobs/${id}`, name, true))}
      {me.jobs.some(({ roles }) => roles.includes('lender')) ? go('/lending', 'Draws to fund') : null}
      {me.firms.some(({ role }) => role === 'principal') ? go('/payouts', 'How you get paid') : null}
    </ul>
  );
}

function Schemes() {
  const { colorScheme, setColorScheme } = useMantineColorScheme();
  return (
    <div role="group" aria-label="Light or dark" className={classes['schemes']}>
      {SCHEMES.map(({ value, label }) => (
        <button key={value} type="button" aria-pressed={colorScheme === value} onClick={() => setColorScheme(value)}>
          {label}
        </button>
      ))}
    </div>
  );
}

function SignOut() {
  const { colorScheme, setColorScheme } = useMantineColorScheme();
  const navigate = useNavigate();
  const leave = async () => {
    try {
      await signOut();
    } catch (error) {
      // only a server that answered has ended the session
      if (!isProblemWith(error, 'not_signed_in')) {
        toast(error instanceof Problem ? `You are still signed in. ${error.message}` : 'You are still signed in.');
        return;
      }
    }
    dropEverything();
    queryClient.clear();
    // the server had this browser's storage cleared; light or dark is nobody's secret
    setColorScheme(colorScheme);
    await navigate('/sign-in');
  };
  return (
    <button type="button" className={classes['out']} onClick={() => void leave()}>
      Sign out
    </button>
  );
}
