import { queryOptions } from '@tanstack/react-query';
import type { House } from '@tallypole/shared/schemas/house';
import { get } from './http.ts';

const ALIVE_MS = 30_000;

/** The pole and what waits; asked for again while the page is open, since others act on the same house. */
export const houseQuery = (jobId: string) =>
  queryOptions({ queryKey: ['jobs', jobId, 'house'], queryFn: ({ signal }) => get<House>(`jobs/${jobId}/house`, signal), refetchInterval: ALIVE_MS });
