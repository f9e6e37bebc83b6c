import { useQueryClient } from '@tanstack/react-query';
import type { MilestoneDetail } from '@tallypole/shared/schemas/milestones';
import { milestoneQuery } from '../../../lib/milestones.ts';
import { toast } from '../../../ui/toast.ts';

/** After an act: its answer is the milestone now, everything else of the job is asked again. */
export function useDone(jobId: string, message: string): (milestone: MilestoneDetail) => void {
  const queries = useQueryClient();
  return (milestone) => {
    queries.setQueryData(milestoneQuery(jobId, milestone.id).queryKey, milestone);
    void queries.invalidateQueries({ queryKey: ['jobs', jobId] });
    toast(message);
  };
}
