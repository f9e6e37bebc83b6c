import { queryOptions } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import type { Invite, JobPeople, MyInvitation, RemovePerson } from '@tallypole/shared/schemas/people';
import { get, post } from '../../../lib/http.ts';

export const peopleQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'people'], queryFn: ({ signal }) => get<JobPeople>(`jobs/${jobId}/people`, signal) });
export const invite = (jobId: string, input: Invite, idempotencyKey: string): Promise<JobPeople> => post(`jobs/${jobId}/invitations`, input, { idempotencyKey });
export const actOnInvitation = (jobId: string, invitationId: string, act: 'again' | 'revoke', idempotencyKey: string): Promise<JobPeople> =>
  post(`jobs/${jobId}/invitations/${invitationId}/${act}`, {}, { idempotencyKey });
export const removePerson = (jobId: string, personId: string, input: RemovePerson, idempotencyKey: string): Promise<JobPeople> =>
  post(`jobs/${jobId}/people/${personId}/remove`, input, { idempotencyKey });

export const myInvitationQuery = (invitationId: string) =>
  queryOptions({ queryKey: ['invitations', invitationId], queryFn: ({ signal }) => get<MyInvitation>(`invitations/${invitationId}`, signal), retry: false });
export const acceptInvitations = (): Promise<Me> => post('invitations/accept', {});
