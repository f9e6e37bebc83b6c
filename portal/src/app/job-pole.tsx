import { useMediaQuery } from '@mantine/hooks';
import { useQuery } from '@tanstack/react-query';
import { houseQuery } from '../lib/house.ts';
import { useJobId } from '../lib/job.ts';
import { FailureState, LoadingState } from '../ui/page.tsx';
import { Pole } from '../ui/pole.tsx';

/** The pole beside every page of a job. */
export function JobPole() {
  const jobId = useJobId();
  const phone = useMediaQuery('(max-width: 47.99em)', window.matchMedia('(max-width: 47.99em)').matches);
  const { data, error, refetch } = useQuery(houseQuery(jobId));
  if (error) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState lines={phone ? 0 : 8} />;
  return <Pole input={data.pole} strip={phone} bandHref={(milestone) => (milestone ? `/jobs/${jobId}/milestones/${milestone}` : `/jobs/${jobId}/schedule`)} />;
}
