import { queryOptions } from '@tanstack/react-query';
import type { DemoPeople } from '@tallypole/shared/schemas/auth';
import { get } from '../../../lib/http.ts';

/** Who can be tried out; nobody unless demo data is on. */
export const demoPeopleQuery = queryOptions({
  queryKey: ['demo-people'],
  queryFn: ({ signal }) => get<DemoPeople>('demo/people', signal).catch(() => null),
  staleTime: Infinity,
});
