import { useQueryClient } from '@tanstack/react-query';
import type { Change } from '@tallypole/shared/schemas/changes';
import { changeQuery } from '../api/changes.ts';

/** After an act: the change as it is now, and everything of the job that may have moved with it. */
export function useChanged(jobId: string): (after: Change) => void {
  const queries = useQueryClient();
  return (after) => {
    queries.setQueryData(changeQuery(jobId, after.id).queryKey, after);
    void queries.invalidateQueries({ queryKey: ['jobs', jobId] });
    void queries.invalidateQueries({ queryKey: ['waits'] });
  };
}
