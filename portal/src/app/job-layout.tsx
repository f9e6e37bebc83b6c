import { useQuery } from '@tanstack/react-query';
import { may, type Permission } from '@tallypole/shared/schemas/permissions';
import { Suspense } from 'react';
import { NavLink, Outlet } from 'react-router-dom';
import { houseQuery } from '../lib/house.ts';
import { useJob } from '../lib/job.ts';
import { LoadingState } from '../ui/page.tsx';
import { JobPole } from './job-pole.tsx';
import classes from './shell.module.css';

/** The job-wide pages, as words; everything else hangs on a band of the pole. */
const PAGES: readonly { to: string; label: string; permission: Permission }[] = [
  { to: '.', label: 'House', permission: 'job.read' },
  { to: 'schedule', label: 'Schedule', permission: 'schedule_of_values.read' },
  { to: 'site', label: 'Site', permission: 'photo.add' },
  { to: 'changes', label: 'Changes', permission: 'change.read' },
  { to: 'draws', label: 'Draws', permission: 'draw.read' },
  { to: 'money', label: 'Money', permission: 'money.read' },
  { to: 'people', label: 'People', permission: 'people.read' },
  { to: 'record', label: 'Record', permission: 'record.read' },
];

export const JobLayout = () => (
  <Suspense fallback={<div className={classes['body']}><LoadingState /></div>}>
    <JobFrame />
  </Suspense>
);

function JobFrame() {
  const job = useJob();
  return (
    <>
      <nav className={`${classes['nav'] ?? ''} no-print`} aria-label={job.name}>
        <span className={classes['place']}>{job.name}</span>
        <Waiting jobId={job.id} />
        {PAGES.filter(({ permission }) => may(job.roles, permission)).map(({ to, label }) => (
          <NavLink key={to} to={to} end={to === '.'} relative="route">
            {label}
          </NavLink>
        ))}
      </nav>
      <div className={`${classes['body'] ?? ''} ${classes['job'] ?? ''}`}>
        <aside aria-label="The pole" className="no-print">
          <JobPole />
        </aside>
        <main id="main" tabIndex={-1}>
          <Suspense fallback={<LoadingState />}>
            <Outlet />
          </Suspense>
        </main>
      </div>
    </>
  );
}

/** How much is open, in one line, whose place is kept until it is known: nothing below it may jump. */
function Waiting({ jobId }: { jobId: string }) {
  const { data } = useQuery(houseQuery(jobId));
  const mine = data?.waits.filter((wait) => wait.mine).length;
  return (
    <span className="quiet" aria-busy={!data}>
      waiting for you: {mine ?? '–'} · waiting for others: {data && mine !== undefined ? data.waits.length - mine : '–'}
    </span>
  );
}
