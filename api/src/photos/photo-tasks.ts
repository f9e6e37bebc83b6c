import type { INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { processPhoto } from './process-photo.ts';
import { weighPhotos } from './weigh-photos.ts';

const WeighJob = z.object({ jobId: z.uuid(), firmId: z.uuid() });
const PhotoJob = z.object({ photoId: z.uuid(), firmId: z.uuid() });

export function photoTasks(app: INestApplicationContext): TaskList {
  const work = app.get(UnitOfWork);
  const storage = app.get<FileStorage>(FILE_STORAGE);
  return {
    weigh_photos: (payload) => weighPhotos(work, WeighJob.parse(payload)),
    process_photo: (payload) => processPhoto(work, storage, app.get(QueueRepository), PhotoJob.parse(payload)),
  };
}
