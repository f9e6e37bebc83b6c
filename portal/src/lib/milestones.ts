import { queryOptions } from '@tanstack/react-query';
import type { MilestoneDetail, MilestoneList, MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { PhotoList, PhotoSize } from '@tallypole/shared/schemas/photos';
import { get } from './http.ts';

const WHILE_WAITING_MS = 2_000;

export const milestonesQuery = (jobId: string) =>
  queryOptions({ queryKey: ['jobs', jobId, 'milestones'], queryFn: ({ signal }) => get<MilestoneList>(`jobs/${jobId}/milestones`, signal) });

export const milestoneQuery = (jobId: string, milestoneId: string) =>
  queryOptions({ queryKey: ['jobs', jobId, 'milestones', milestoneId], queryFn: ({ signal }) => get<MilestoneDetail>(`jobs/${jobId}/milestones/${milestoneId}`, signal) });

/** The newest photos of a milestone; asked again while some of them are still being read. */
export const photosQuery = (jobId: string, milestoneId: string) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'photos', milestoneId],
    queryFn: ({ signal }) => get<PhotoList>(`jobs/${jobId}/photos?milestoneId=${milestoneId}&limit=100`, signal),
    refetchInterval: ({ state }) => (state.data?.items.some((photo) => photo.state === 'stored') ? WHILE_WAITING_MS : false),
  });

/** Where a photo's picture is shown from. */
export const photoUrl = (jobId: string, photoId: string, size: PhotoSize): string => `/api/jobs/${jobId}/photos/${photoId}/${size}`;

/** The states of a milestone in words. */
export const milestoneStateNames: Readonly<Record<MilestoneState, string>> = { upcoming: 'Upcoming', under_way: 'Under way', claimed: 'Claimed', proven: 'Proven' };
