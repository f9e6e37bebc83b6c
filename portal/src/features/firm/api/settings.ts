import { queryOptions } from '@tanstack/react-query';
import type { FirmSettings, FirmSettingsInput, PeopleWhoLeft } from '@tallypole/shared/schemas/firms';
import { get, post } from '../../../lib/http.ts';
import { upload } from '../../../lib/upload.ts';

const WHILE_WAITING_MS = 1_000;

/** What stands on papers; asked again while the logo is being made. */
export const settingsQuery = (firmId: string) =>
  queryOptions({
    queryKey: ['firms', firmId, 'settings'],
    queryFn: ({ signal }) => get<FirmSettings>(`firms/${firmId}/settings`, signal),
    refetchInterval: ({ state }) => (state.data?.logo.state === 'stored' ? WHILE_WAITING_MS : false),
  });
export const setSettings = (firmId: string, input: FirmSettingsInput, idempotencyKey: string): Promise<FirmSettings> => post(`firms/${firmId}/settings`, input, { idempotencyKey });

export function sendLogo(firmId: string, file: File): Promise<FirmSettings> {
  const form = new FormData();
  form.append('file', file);
  return upload<FirmSettings>(`firms/${firmId}/logo`, form);
}
export const removeLogo = (firmId: string, idempotencyKey: string): Promise<FirmSettings> => post(`firms/${firmId}/logo/remove`, {}, { idempotencyKey });
/** The version is in the address, so that a new logo is not shown as the old one. */
export const logoUrl = (firmId: string, version: number): string => `/api/firms/${firmId}/logo?v=${version}`;

export const whoLeftQuery = (firmId: string) => queryOptions({ queryKey: ['firms', firmId, 'people-who-left'], queryFn: ({ signal }) => get<PeopleWhoLeft>(`firms/${firmId}/people-who-left`, signal) });
export const erasePerson = (firmId: string, personId: string, idempotencyKey: string): Promise<PeopleWhoLeft> => post(`firms/${firmId}/people-who-left/${personId}/erase`, {}, { idempotencyKey });
