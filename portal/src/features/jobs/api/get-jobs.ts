import { infiniteQueryOptions } from '@tanstack/react-query';
import type { JobList } from '@tallypole/shared/schemas/jobs';
import { get } from '../../../lib/http.ts';

export const jobsQuery = infiniteQueryOptions({
  queryKey: ['jobs'],
  queryFn: ({ pageParam, signal }) => get<JobList>(`jobs?limit=50${pageParam ? `&cursor=${encodeURIComponent(pageParam)}` : ''}`, signal),
  initialPageParam: '',
  getNextPageParam: (last: JobList) => last.next ?? undefined,
});
