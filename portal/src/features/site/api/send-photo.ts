import type { Photo } from '@tallypole/shared/schemas/photos';
import { upload } from '../../../lib/upload.ts';
import type { SendPhoto } from '../photo-queue.ts';

/** Sends one photo as it is; the server keeps it under the id that it was given here. */
export const sendPhoto = (jobId: string): SendPhoto => ({ id, milestoneId, note, file }, onProgress) => {
  const form = new FormData();
  form.append('id', id);
  form.append('milestoneId', milestoneId);
  form.append('note', note);
  form.append('file', file);
  return upload<Photo>(`jobs/${jobId}/photos`, form, { onProgress: (sent, total) => onProgress(total > 0 ? Math.round((sent / total) * 100) : 0) });
};
