import type { ImportSchedule, ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import { post } from '../../../lib/http.ts';

export const importSchedule = (jobId: string, schedule: ImportSchedule, idempotencyKey: string): Promise<ScheduleOfValues> =>
  post<ScheduleOfValues>(`jobs/${jobId}/schedule`, schedule, { idempotencyKey });
