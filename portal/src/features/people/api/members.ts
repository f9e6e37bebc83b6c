import { queryOptions } from '@tanstack/react-query';
import type { InviteMember, Members } from '@tallypole/shared/schemas/members';
import { get, post } from '../../../lib/http.ts';

export const membersQuery = (firmId: string) => queryOptions({ queryKey: ['firms', firmId, 'members'], queryFn: ({ signal }) => get<Members>(`firms/${firmId}/members`, signal) });
export const inviteMember = (firmId: string, input: InviteMember, idempotencyKey: string): Promise<Members> => post(`firms/${firmId}/invitations`, input, { idempotencyKey });
