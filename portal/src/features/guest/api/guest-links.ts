import { queryOptions } from '@tanstack/react-query';
import type { GuestLinks, SendInspectorLink } from '@tallypole/shared/schemas/guest-links';
import { get, post } from '../../../lib/http.ts';

const WHILE_SENDING_MS = 2_000;

/** The links of a job; asked again while one is on its way. */
export const linksQuery = (jobId: string) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'guest-links'],
    queryFn: ({ signal }) => get<GuestLinks>(`jobs/${jobId}/guest-links`, signal),
    refetchInterval: ({ state }) => (state.data?.items.some((link) => link.state === 'on_its_way') ? WHILE_SENDING_MS : false),
  });

export const sendLink = (jobId: string, input: SendInspectorLink, idempotencyKey: string): Promise<GuestLinks> => post(`jobs/${jobId}/guest-links`, input, { idempotencyKey });

export const actOnLink = (jobId: string, linkId: string, act: 'again' | 'revoke', idempotencyKey: string): Promise<GuestLinks> =>
  post(`jobs/${jobId}/guest-links/${linkId}/${act}`, {}, { idempotencyKey });
