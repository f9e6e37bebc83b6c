import { Readable } from 'node:stream';
import { buffer } from 'node:stream/consumers';
import { Problem } from '../common/problem.ts';
import type { UnitOfWork } from '../common/unit-of-work.ts';
import type { FileStorage } from '../files/file-storage.ts';
import { newStorageKey } from '../files/storage-key.ts';
import type { QueueRepository } from '../queue/queue.repository.ts';
import { askToWeigh } from './weigh-photos.ts';
import { markReady, markUnreadable, photoToProcess } from './photo-work.repository.ts';
import type { StoredSize } from './photos.repository.ts';
import { readOrigin } from './read-exif.ts';
import { UnreadablePicture, renderSizes, type Rendered } from './render-sizes.ts';

export interface PhotoJob {
  photoId: string;
  firmId: string;
}

/** Worker: reads when and where a photo was taken and makes its sizes. Run again it does nothing more. */
export async function processPhoto(work: UnitOfWork, storage: FileStorage, queue: QueueRepository, { photoId, firmId }: PhotoJob): Promise<void> {
  const photo = await work.writeAsFirm(firmId, (tx) => photoToProcess(tx, photoId));
  if (!photo) throw new Problem('not_found');
  if (photo.state !== 'stored') return;
  const original = await buffer(await storage.get(photo.storageKey));
  const rendered = await renderSizes(original, photo.mediaType).catch((error: unknown) => {
    if (error instanceof UnreadablePicture) return error;
    throw error;
  });
  if (rendered instanceof UnreadablePicture) {
    await work.writeAsFirm(firmId, (tx) => markUnreadable(tx, photoId, rendered.message));
    return;
  }
  const origin = await readOrigin(original, photo.timeZone);
  const sizes = await store(storage, { firmId, jobId: photo.jobId }, rendered);
  const { width, height, phash } = rendered;
  const first = await work.writeAsFirm(firmId, async (tx) => {
    await askToWeigh(tx, queue, photo.jobId, firmId);
    return await markReady(tx, photoId, { ...origin, width, height, phash, sizes });
  });
  if (!first) await Promise.all(sizes.map(({ key }) => storage.remove(key)));
}

async function store(storage: FileStorage, { firmId, jobId }: { firmId: string; jobId: string }, rendered: Rendered): Promise<StoredSize[]> {
  return await Promise.all(
    rendered.sizes.map(async ({ size, content, width, height }) => {
      const key = newStorageKey(firmId, jobId, new Date());
      await storage.put(key, Readable.from([content]));
      return { size, key, width, height, bytes: content.length };
    }),
  );
}
