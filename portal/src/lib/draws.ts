import { queryOptions } from '@tanstack/react-query';
import type { Draw, DrawList } from '@tallypole/shared/schemas/draws';
import { get } from './http.ts';

const ALIVE_MS = 10_000;

export const drawsQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'draws'], queryFn: ({ signal }) => get<DrawList>(`jobs/${jobId}/draws`, signal) });

/** One draw; asked for again while it is with others, since they act on it too. */
export const drawQuery = (jobId: string, drawId: string) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'draws', drawId],
    queryFn: ({ signal }) => get<Draw>(`jobs/${jobId}/draws/${drawId}`, signal),
    refetchInterval: ({ state }) => (state.data?.state === 'draft' || state.data?.state === 'returned' ? false : ALIVE_MS),
  });
