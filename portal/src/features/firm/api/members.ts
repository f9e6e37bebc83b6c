import { queryOptions } from '@tanstack/react-query';
import type { InviteMember, Members, SetMemberRole } from '@tallypole/shared/schemas/members';
import { get, post } from '../../../lib/http.ts';

export const membersQuery = (firmId: string) => queryOptions({ queryKey: ['firms', firmId, 'members'], queryFn: ({ signal }) => get<Members>(`firms/${firmId}/members`, signal) });
export const inviteMember = (firmId: string, input: InviteMember, idempotencyKey: string): Promise<Members> => post(`firms/${firmId}/invitations`, input, { idempotencyKey });
export const actOnFirmInvitation = (firmId: string, invitationId: string, act: 'again' | 'revoke', idempotencyKey: string): Promise<Members> =>
  post(`firms/${firmId}/invitations/${invitationId}/${act}`, {}, { idempotencyKey });
export const setRole = (firmId: string, personId: string, input: SetMemberRole, idempotencyKey: string): Promise<Members> =>
  post(`firms/${firmId}/members/${personId}/role`, input, { idempotencyKey });
export const endMember = (firmId: string, personId: string, idempotencyKey: string): Promise<Members> => post(`firms/${firmId}/members/${personId}/end`, {}, { idempotencyKey });
