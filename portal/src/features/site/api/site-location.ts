import { queryOptions } from '@tanstack/react-query';
import type { Site, SiteLocation } from '@tallypole/shared/schemas/photos';
import { get, post } from '../../../lib/http.ts';

export const siteQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'site'], queryFn: ({ signal }) => get<Site>(`jobs/${jobId}/site`, signal) });

export const locateSite = (jobId: string, location: SiteLocation, idempotencyKey: string): Promise<Site> => post<Site>(`jobs/${jobId}/site`, location, { idempotencyKey });
