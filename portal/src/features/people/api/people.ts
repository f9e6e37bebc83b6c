import { queryOptions } from '@tanstack/react-query';
import type { Invite, JobPeople } from '@tallypole/shared/schemas/people';
import { get, post } from '../../../lib/http.ts';

export const peopleQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'people'], queryFn: ({ signal }) => get<JobPeople>(`jobs/${jobId}/people`, signal) });
export const invite = (jobId: string, input: Invite, idempotencyKey: string): Promise<JobPeople> => post(`jobs/${jobId}/invitations`, input, { idempotencyKey });
