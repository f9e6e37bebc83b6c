import { useQuery } from '@tanstack/react-query';
import type { MilestoneDetail, MilestoneState } from '@tallypole/shared/schemas/milestones';
import { may } from '@tallypole/shared/schemas/permissions';
import { useParams } from 'react-router-dom';
import { useJob } from '../../../lib/job.ts';
import { milestoneQuery, milestoneStateNames, photosQuery } from '../../../lib/milestones.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { PhotoGrid } from '../../../ui/photo-grid/photo-grid.tsx';
import { StateTag, type Meaning } from '../../../ui/state-tag.tsx';
import type { ActProps } from '../components/act-props.ts';
import { ClaimForm } from '../components/claim-form.tsx';
import { InspectForm } from '../components/inspect-form.tsx';
import { InspectionList } from '../components/inspection-list.tsx';
import { MilestoneFacts } from '../components/milestone-facts.tsx';
import { PlanForm } from '../components/plan-form.tsx';
import { ReopenForm } from '../components/reopen-form.tsx';
import { StartButton } from '../components/start-button.tsx';
import classes from '../components/milestone.module.css';
import { strings } from '../strings.ts';

const MEANING: Readonly<Record<MilestoneState, Meaning>> = { upcoming: 'neutral', under_way: 'neutral', claimed: 'waits', proven: 'settled' };

/** One milestone: what waits for the reader first, then its days, its photos and who looked at it. */
export function Component() {
  const job = useJob();
  const { milestoneId = '' } = useParams();
  const { data, error, refetch } = useQuery(milestoneQuery(job.id, milestoneId));
  if (error) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState />;
  return (
    <>
      <PageHead key={data.id} title={data.name}>
        <div><StateTag meaning={MEANING[data.state]}>{milestoneStateNames[data.state]}</StateTag></div>
      </PageHead>
      <MilestoneFacts milestone={data} timeZone={job.timeZone} />
      {/* whoever looks sees the photos before saying what they saw */}
      {may(job.roles, 'milestone.prove') ? <Photos job={job} milestone={data} /> : null}
      <Acts key={data.version} job={job} milestone={data} />
      {may(job.roles, 'milestone.prove') ? null : <Photos job={job} milestone={data} />}
      <Section title={strings.looks}>
        <InspectionList inspections={data.inspections} />
        {data.state !== 'proven' && may(job.roles, 'guest_link.send') ? (
          <div className={classes['acts']}><LinkButton to={`/jobs/${job.id}/inspectors?milestone=${data.id}`} variant="outline">{strings.sendLink}</LinkButton></div>
        ) : null}
        {data.state === 'proven' && may(job.roles, 'milestone.reopen') ? <ReopenForm key={data.version} job={job} milestone={data} /> : null}
      </Section>
      {may(job.roles, 'milestone.plan') && data.state !== 'proven' ? <PlanForm key={`plan ${data.version}`} job={job} milestone={data} /> : null}
    </>
  );
}

/** What the reader can do with it in its state. */
function Acts(props: ActProps) {
  const { job, milestone: { state } } = props;
  const claims = may(job.roles, 'milestone.claim');
  const looks = may(job.roles, 'milestone.prove');
  return (
    <>
      {claims && state === 'upcoming' ? <div className={classes['acts']}><StartButton {...props} /></div> : null}
      {claims && state === 'under_way' ? <ClaimForm {...props} /> : null}
      {looks && (state === 'claimed' || state === 'under_way') ? <InspectForm {...props} /> : null}
    </>
  );
}

function Photos({ job, milestone }: { job: ActProps['job']; milestone: MilestoneDetail }) {
  const { data, error, refetch } = useQuery(photosQuery(job.id, milestone.id));
  return (
    <Section title={strings.photos}>
      {may(job.roles, 'photo.add') ? (
        <div className={classes['photoHead']}><LinkButton to={`/jobs/${job.id}/site/${milestone.id}`} variant="outline">{strings.photograph}</LinkButton></div>
      ) : null}
      {error ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {data ? data.items.length === 0 ? <p className="quiet">{strings.noPhotos}</p> : <PhotoGrid jobId={job.id} photos={data.items} subject={milestone.name} timeZone={job.timeZone} /> : <LoadingState lines={2} />}
    </Section>
  );
}
