import { useQueryClient } from '@tanstack/react-query';
import type { Draw } from '@tallypole/shared/schemas/draws';
import { drawQuery } from '../../../lib/draws.ts';
import { toast } from '../../../ui/toast.ts';

/** After an act: its answer is the draw now, everything else of the job is asked again. */
export function useDrawn(jobId: string): (draw: Draw, message?: string) => void {
  const queries = useQueryClient();
  return (draw, message) => {
    queries.setQueryData(drawQuery(jobId, draw.id).queryKey, draw);
    void queries.invalidateQueries({ queryKey: ['jobs', jobId], predicate: ({ queryKey }) => queryKey[3] !== draw.id });
    if (message) toast(message);
  };
}
