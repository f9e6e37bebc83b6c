import { queryOptions, useSuspenseQuery } from '@tanstack/react-query';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useParams } from 'react-router-dom';
import { get } from './http.ts';

const jobQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId], queryFn: ({ signal }) => get<Job>(`jobs/${jobId}`, signal) });

export function useJobId(): string {
  const { jobId } = useParams();
  if (!jobId) throw new Error('This page belongs to a job.');
  return jobId;
}

/** The job of the address; suspends until it is there, and throws what the server refused. */
export const useJob = (): Job => useSuspenseQuery(jobQuery(useJobId())).data;
