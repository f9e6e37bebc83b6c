import { useQuery } from '@tanstack/react-query';
import type { Milestone, MilestoneState } from '@tallypole/shared/schemas/milestones';
import { may } from '@tallypole/shared/schemas/permissions';
import { Suspense } from 'react';
import { Link } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { milestonesQuery, milestoneStateNames } from '../../../lib/milestones.ts';
import { EmptyState, FailureState, LoadingState, PageHead } from '../../../ui/page.tsx';
import { StateTag, type Meaning } from '../../../ui/state-tag.tsx';
import { LocationForm } from '../components/location-form.tsx';
import classes from '../components/site.module.css';
import { strings } from '../strings.ts';

const MEANING: Readonly<Record<MilestoneState, Meaning>> = { upcoming: 'neutral', under_way: 'neutral', claimed: 'waits', proven: 'settled' };

/** For wet gloves: the milestones as large targets; behind each the camera. */
export function Component() {
  const job = useJob();
  const { data, error, refetch } = useQuery(milestonesQuery(job.id));
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {error ? <FailureState error={error} onRetry={() => void refetch()} /> : data ? <Milestones milestones={data.items} /> : <LoadingState />}
      {may(job.roles, 'site.locate') ? (
        <Suspense fallback={null}>
          <LocationForm jobId={job.id} />
        </Suspense>
      ) : null}
    </>
  );
}

function Milestones({ milestones }: { milestones: readonly Milestone[] }) {
  if (milestones.length === 0) return <EmptyState>{strings.empty}</EmptyState>;
  return (
    <ul className={classes['list']}>
      {milestones.map(({ id, name, state, plannedOn, forecastOn, photos }) => (
        <li key={id}>
          <Link to={id}>
            <strong>{name}</strong>
            <StateTag meaning={MEANING[state]}>{milestoneStateNames[state]}</StateTag>
            <span className={`${classes['about'] ?? ''} quiet`}>
              {strings.photos(photos.ready + photos.waiting)}
              {(forecastOn ?? plannedOn) ? ` · ${strings.planned(writtenDate(forecastOn ?? plannedOn ?? ''))}` : ''}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}
