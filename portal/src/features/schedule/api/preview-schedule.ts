import type { SchedulePreview } from '@tallypole/shared/schemas/schedule-of-values';
import { postForm } from '../../../lib/http.ts';

/** Has a file read; nothing is written. */
export function previewSchedule(jobId: string, file: File, sheet?: string): Promise<SchedulePreview> {
  const form = new FormData();
  if (sheet !== undefined) form.append('sheet', sheet);
  form.append('file', file);
  return postForm<SchedulePreview>(`jobs/${jobId}/schedule/preview`, form);
}
