import type { PhotoFinding } from '@tallypole/shared/schemas/photos';
import type { Tx } from '../common/unit-of-work.ts';
import type { StoredSize } from './photos.repository.ts';
import type { PictureOrigin } from './read-exif.ts';

export interface PhotoToProcess {
  jobId: string;
  state: 'stored' | 'ready' | 'unreadable';
  storageKey: string;
  mediaType: string;
  timeZone: string;
}

export interface ReadPicture extends PictureOrigin {
  width: number;
  height: number;
  phash: string;
  sizes: StoredSize[];
}

export async function photoToProcess(tx: Tx, photoId: string): Promise<PhotoToProcess | undefined> {
  return await tx.one<PhotoToProcess>(
    `select p.job_id as "jobId", p.state, f.storage_key as "storageKey", f.media_type as "mediaType", j.time_zone as "timeZone"
     from photo p join file f on f.id = p.file_id join job j on j.id = p.job_id where p.id = $1`,
    [photoId],
  );
}

/** False where somebody else was first. */
export async function markReady(tx: Tx, photoId: string, picture: ReadPicture): Promise<boolean> {
  const { takenAt, latitude, longitude, accuracyM, width, height, phash, sizes } = picture;
  const row = await tx.one(
    `update photo set state = 'ready', taken_at = $2, latitude = $3, longitude = $4, accuracy_m = $5, width = $6, height = $7, phash = $8, sizes = $9
     where id = $1 and state = 'stored' returning id`,
    [photoId, takenAt, latitude, longitude, accuracyM, width, height, phash, JSON.stringify(sizes)],
  );
  return row !== undefined;
}

export async function markUnreadable(tx: Tx, photoId: string, trouble: string): Promise<void> {
  await tx.rows(`update photo set state = 'unreadable', trouble = $2 where id = $1 and state = 'stored'`, [photoId, trouble]);
}

export async function setFindings(tx: Tx, photoId: string, findings: readonly PhotoFinding[]): Promise<void> {
  await tx.rows('update photo set findings = $2 where id = $1', [photoId, JSON.stringify(findings)]);
}
