import { useMediaQuery } from '@mantine/hooks';
import { useQuery } from '@tanstack/react-query';
import { houseQuery } from '../lib/house.ts';
import { useJobId } from '../lib/job.ts';
import { FailureState, LoadingState } from '../ui/page.tsx';
import { Pole } from '../ui/pole.tsx';

const STRIP_HEIGHT = 78;

/** The pole beside every page of a job. */
export function JobPole() {
  const jobId = useJobId();
  const phone = useMediaQuery('(max-width: 47.99em)', window.matchMedia('(max-width: 47.99em)').matches);
  const { data, error, refetch } = useQuery(houseQuery(jobId));
  if (error) return <FailureState error={error} onRetry={() => void refetch()} />;
  // on a phone as high as the strip that takes its place, so that the page below doesn't jump
  if (!data) return phone ? <div style={{ minHeight: STRIP_HEIGHT }}><LoadingState lines={0} /></div> : <LoadingState lines={8} />;
  return <Pole input={data.pole} strip={phone} bandHref={(milestone) => (milestone ? `/jobs/${jobId}/milestones/${milestone}` : `/jobs/${jobId}/schedule`)} />;
}
