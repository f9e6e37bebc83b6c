import { queryOptions } from '@tanstack/react-query';
import type { ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import { get } from '../../../lib/http.ts';

export const scheduleQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'schedule'], queryFn: ({ signal }) => get<ScheduleOfValues>(`jobs/${jobId}/schedule`, signal) });
