import { queryOptions } from '@tanstack/react-query';
import type { CodeSent } from '@tallypole/shared/schemas/auth';
import type { GuestDoor, GuestInspect, GuestVisit } from '@tallypole/shared/schemas/guest-links';
import type { Photo, PhotoSize } from '@tallypole/shared/schemas/photos';
import { get, post } from '../../../lib/http.ts';
import { upload } from '../../../lib/upload.ts';

const WHILE_WAITING_MS = 2_000;

/** A token opens a new visit; without one the visit goes on that the browser's cookie names. */
export const doorQuery = (token: string | null) =>
  queryOptions({
    queryKey: ['guest', 'door', token],
    queryFn: ({ signal }) => (token === null ? get<GuestDoor>('guest/door', signal) : post<GuestDoor>('guest/visits', { token })),
    staleTime: Infinity,
  });

/** What the link is for; asked again while photos are still being read. */
export const visitQuery = queryOptions({
  queryKey: ['guest', 'visit'],
  queryFn: ({ signal }) => get<GuestVisit>('guest/visit', signal),
  refetchInterval: ({ state }) => (state.data?.milestones.some(({ photos }) => photos.some((photo) => photo.state === 'stored')) ? WHILE_WAITING_MS : false),
});

export const askForCode = (): Promise<CodeSent> => post('guest/codes', {});
export const confirm = (code: string): Promise<GuestDoor> => post('guest/confirm', { code: code.replace(/\s/g, '') });
export const leave = (): Promise<undefined> => post('guest/leave', {});

export const inspect = (milestoneId: string, input: GuestInspect, idempotencyKey: string): Promise<GuestVisit> =>
  post(`guest/milestones/${milestoneId}/inspections`, input, { idempotencyKey });

export interface GuestPhoto {
  id: string;
  milestoneId: string;
  note: string;
  file: File;
}

export function sendPhoto({ id, milestoneId, note, file }: GuestPhoto, onProgress: (percent: number) => void): Promise<Photo> {
  const form = new FormData();
  for (const [name, value] of Object.entries({ id, milestoneId, note })) form.append(name, value);
  form.append('file', file);
  return upload<Photo>('guest/photos', form, { onProgress: (sent, total) => onProgress(total > 0 ? Math.round((sent / total) * 100) : 0) });
}

export const guestPhotoUrl = (photoId: string, size: PhotoSize): string => `/api/guest/photos/${photoId}/${size}`;
