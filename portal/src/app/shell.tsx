import { Button, Menu, useMantineColorScheme } from '@mantine/core';
import type { Me } from '@tallypole/shared/schemas/auth';
import { may } from '@tallypole/shared/schemas/permissions';
import { useNavigate, Link } from 'react-router-dom';
import type { ReactNode } from 'react';
import { signOut } from '../features/auth/api/sign-out.ts';
import { dropEverything } from '../lib/drafts.ts';
import { queryClient } from '../lib/query-client.ts';
import classes from './shell.module.css';

const SCHEMES = [
  { value: 'auto', label: 'Light or dark as the device' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
] as const;

/** The frame of every page: where I am, who I am, and the way out. */
export function Shell({ me, children }: { me: Me; children: ReactNode }) {
  return (
    <>
      <a className="skip" href="#main">
        Skip to the page
      </a>
      <header className={`${classes['top'] ?? ''} no-print`}>
        <Link to="/jobs" className={classes['name']}>
          <img src="/icon.svg" alt="" width={22} height={22} />
          Tallypole
        </Link>
        <div className={classes['side']}>
          <PersonMenu me={me} />
        </div>
      </header>
      {children}
    </>
  );
}

function PersonMenu({ me }: { me: Me }) {
  const { colorScheme, setColorScheme } = useMantineColorScheme();
  const navigate = useNavigate();
  const leave = async () => {
    await signOut().catch(() => undefined);
    dropEverything();
    queryClient.clear();
    await navigate('/sign-in');
  };
  return (
    <Menu position="bottom-end" width={280} shadow="md">
      <Menu.Target>
        <Button variant="subtle" color="ink">
          {me.person.name ?? me.person.email}
        </Button>
      </Menu.Target>
      <Menu.Dropdown>
        {me.firms.map((firm) => (
          <Menu.Item key={firm.id} onClick={() => void navigate(`/firms/${firm.id}`)}>
            {firm.name}, {firm.role}
          </Menu.Item>
        ))}
        {me.firms.filter(({ role }) => may([role], 'firm.pricing')).map(({ id, name }) => (
          <Menu.Item key={id} onClick={() => void navigate(`/firms/${id}/pricing`)}>
            {me.firms.length > 1 ? `${name}: how changes are priced` : 'How changes are priced'}
          </Menu.Item>
        ))}
        <Menu.Item onClick={() => void navigate('/jobs')}>Your jobs</Menu.Item>
        {me.jobs.some(({ roles }) => roles.includes('lender')) ? <Menu.Item onClick={() => void navigate('/lending')}>Draws to fund</Menu.Item> : null}
        {me.firms.some(({ role }) => role === 'principal') ? <Menu.Item onClick={() => void navigate('/payouts')}>How you get paid</Menu.Item> : null}
        <Menu.Divider />
        {SCHEMES.map(({ value, label }) => (
          <Menu.Item key={value} onClick={() => setColorScheme(value)} aria-current={colorScheme === value}>
            {colorScheme === value ? '✓ ' : ''}
            {label}
          </Menu.Item>
        ))}
        <Menu.Divider />
        <Menu.Item onClick={() => void leave()}>Sign out</Menu.Item>
      </Menu.Dropdown>
    </Menu>
  );
}
