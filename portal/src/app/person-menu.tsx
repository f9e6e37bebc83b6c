import { Button, Menu, useMantineColorScheme } from '@mantine/core';
import type { Me } from '@tallypole/shared/schemas/auth';
import { may } from '@tallypole/shared/schemas/permissions';
import { useNavigate } from 'react-router-dom';
import { signOut } from '../features/auth/api/sign-out.ts';
import { dropEverything } from '../lib/drafts.ts';
import { isProblemWith, Problem } from '../lib/problem.ts';
import { queryClient } from '../lib/query-client.ts';
import { toast } from '../ui/toast.ts';
import classes from './person-menu.module.css';

const SCHEMES = [
  { value: 'auto', label: 'Light or dark as the device' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
] as const;
/** More than these are found on the page of all jobs. */
const MOST_JOBS = 6;

/** Who I am, where else I can go, light or dark, and the way out. */
export function PersonMenu({ me }: { me: Me }) {
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
    <Menu position="bottom-end" width={280} shadow="md" withinPortal={false} withInitialFocusPlaceholder={false}>
      <Menu.Target>
        <Button variant="subtle" color="ink">
          {me.person.name ?? me.person.email}
        </Button>
      </Menu.Target>
      <Menu.Dropdown className={classes['dropdown']}>
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
        {me.jobs.slice(0, MOST_JOBS).map(({ id, name }) => (
          <Menu.Item key={id} className={classes['job']} onClick={() => void navigate(`/jobs/${id}`)}>
            {name}
          </Menu.Item>
        ))}
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
