import { Injectable } from '@nestjs/common';
import type { Request, Response } from 'express';
import { may } from '@tallypole/shared/schemas/permissions';
import { AddPhoto, MOST_PHOTO_BYTES, type Photo, type PhotoList, type PhotoQuery, type Site, type SiteLocation } from '@tallypole/shared/schemas/photos';
import { requireOnJob } from '../common/access.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { decodeCursor, encodeCursor } from '../common/cursor.ts';
import { parsed } from '../common/parsed.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { FilesRepository } from '../files/files.repository.ts';
import { isAcceptedPhoto } from '../files/media-kind.ts';
import { UploadReceiver, type Received } from '../files/upload-receiver.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { askToWeigh } from './weigh-photos.ts';
import { PhotosRepository, type StoredSize } from './photos.repository.ts';

@Injectable()
export class PhotosService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: PhotosRepository,
    private readonly files: FilesRepository,
    private readonly receiver: UploadReceiver,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  /** Keeps the original as it came; the worker reads it afterwards. The phone's id is also the key of the act. */
  async add(actor: Actor, jobId: string, request: Request, response: Response): Promise<Answered<Photo>> {
    const firmId = await this.work.readJob(actor, jobId, 'photo.add', (tx) => this.files.firmOf(tx, jobId));
    return await this.receiver.take(request, response, { firmId, jobId, mostBytes: MOST_PHOTO_BYTES }, (received) => this.write(actor, { firmId, jobId }, received));
  }

  list(actor: Actor, jobId: string, query: PhotoQuery): Promise<PhotoList> {
    return this.work.readJob(actor, jobId, 'photo.read', async (tx, roles) => {
      const page = { milestoneId: query.milestoneId ?? null, limit: query.limit + 1, after: decodeCursor(query.cursor) };
      const rows = await this.repository.list(tx, jobId, may(roles, 'photo.place'), page);
      const items = rows.slice(0, query.limit);
      const last = items.at(-1);
      return { items, next: rows.length > query.limit && last ? encodeCursor({ createdAt: last.addedAt, id: last.id }) : null };
    });
  }

  photo(actor: Actor, jobId: string, photoId: string): Promise<Photo> {
    return this.work.readJob(actor, jobId, 'photo.read', async (tx, roles) => {
      const photo = await this.repository.find(tx, jobId, photoId, may(roles, 'photo.place'));
      if (!photo) throw new Problem('not_found');
      return photo;
    });
  }

  size(actor: Actor, jobId: string, photoId: string, size: string): Promise<StoredSize> {
    return this.work.readJob(actor, jobId, 'photo.read', async (tx) => {
      const stored = await this.repository.size(tx, jobId, photoId, size);
      if (!stored) throw new Problem('not_found');
      return stored;
    });
  }

  site(actor: Actor, jobId: string): Promise<Site> {
    return this.work.readJob(actor, jobId, 'photo.place', (tx) => this.repository.site(tx, jobId));
  }

  /** Says where the site is; the photos that are there already are weighed again. */
  locate(actor: Actor, jobId: string, location: SiteLocation, key: string): Promise<Answered<Site>> {
    return this.commands.run<Site>(actor, {
      operation: 'site.locate',
      key,
      input: { jobId, ...location },
      authorize: (tx) => requireOnJob(tx, 'site.locate', jobId),
      act: async (tx) => {
        const firmId = await this.repository.locate(tx, jobId, location);
        if (firmId === undefined) throw new Problem('not_found');
        await askToWeigh(tx, this.queue, jobId, firmId);
        await this.record.append(tx, { firmId, jobId, act: 'site.located', by: actor.personId, data: { ...location } });
        return { location };
      },
    });
  }

  private write(actor: Actor, { firmId, jobId }: { firmId: string; jobId: string }, received: Received): Promise<Answered<Photo>> {
    const { id, milestoneId, note } = parsed(AddPhoto, received.fields);
    const { name, bytes, sha256, mediaType, storageKey } = received;
    if (!isAcceptedPhoto(mediaType)) throw new Problem('wrong_file_kind', { detail: 'This is not a photo. JPEG, PNG, WebP and HEIC pictures are accepted.' });
    return this.commands.run<Photo>(actor, {
      operation: 'photo.add',
      key: id,
      input: { jobId, milestoneId, sha256 },
      authorize: (tx) => requireOnJob(tx, 'photo.add', jobId),
      act: async (tx) => {
        if (!(await this.repository.hasMilestone(tx, jobId, milestoneId))) throw Problem.field('/milestoneId', 'Choose a milestone of this job.');
        const createdAt = this.clock.now();
        await this.files.add(tx, { firmId, jobId, id, name, purpose: 'photo', mediaType, bytes, sha256, storageKey, createdBy: actor.personId, createdAt });
        await this.repository.add(tx, { firmId, jobId, id, milestoneId, note, createdAt });
        await this.queue.enqueue(tx, 'process_photo', { photoId: id, firmId }, { key: `photo:${id}` });
        await this.record.append(tx, { firmId, jobId, act: 'photo.added', by: actor.personId, data: { photo: id, milestone: milestoneId, sha256, bytes } });
        const photo = await this.repository.find(tx, jobId, id, false);
        if (!photo) throw new Error('A photo must be visible to who added it.');
        return photo;
      },
    });
  }
}
