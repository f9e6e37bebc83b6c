import { Injectable } from '@nestjs/common';
import type { Request, Response } from 'express';
import { countsAsProof, type GuestInspect, type GuestVisit } from '@tallypole/shared/schemas/guest-links';
import { stateAfter } from '@tallypole/shared/schemas/milestones';
import { AddPhoto, MOST_PHOTO_BYTES, type Photo } from '@tallypole/shared/schemas/photos';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { parsed } from '../common/parsed.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Guest, type Tx } from '../common/unit-of-work.ts';
import { isAcceptedPhoto } from '../files/media-kind.ts';
import { UploadReceiver, type Received } from '../files/upload-receiver.ts';
import { askToWeigh } from '../photos/weigh-photos.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { GuestRepository } from './guest.repository.ts';
import { GuestService, requireConfirmed } from './guest.service.ts';
import { whoHash } from './guest-tokens.ts';

/** What is written needs a code entered within the last ten minutes, as signing does. */
const FRESH_MINUTES = 10;

/** What a guest adds: what they saw, and photos of it. */
@Injectable()
export class GuestActsService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly guests: GuestService,
    private readonly repository: GuestRepository,
    private readonly receiver: UploadReceiver,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  inspect(visit: Buffer, milestoneId: string, input: GuestInspect, key: string): Promise<Answered<GuestVisit>> {
    return this.work.writeAsGuest(visit, (tx, guest) =>
      this.commands.inside<GuestVisit>(tx, guest.personId, {
        operation: 'guest.inspect',
        key,
        input: { milestoneId, ...input },
        authorize: () => Promise.resolve(this.requireFresh(guest)),
        act: async () => {
          await this.writeInspection(tx, guest, milestoneId, input);
          return await this.guests.seen(tx);
        },
      }),
    );
  }

  /** Keeps the original as it came; the worker reads it as it reads every photo. */
  async addPhoto(visit: Buffer, request: Request, response: Response): Promise<Answered<Photo>> {
    const { firmId, jobId } = await this.work.readAsGuest(visit, (_tx, guest) => {
      requireConfirmed(guest);
      return Promise.resolve(guest);
    });
    return await this.receiver.take(request, response, { firmId, jobId, mostBytes: MOST_PHOTO_BYTES }, (received) => this.writePhoto(visit, received));
  }

  private async writeInspection(tx: Tx, guest: Guest, milestoneId: string, input: GuestInspect): Promise<void> {
    const { id, result, note, seenOn, name, company, license, version } = input;
    const milestone = await this.repository.lock(tx, milestoneId);
    if (!milestone) throw new Problem('not_found');
    if (milestone.answeredAt) throw new Problem('wrong_state', { detail: 'What you saw of this milestone is recorded already. Whoever sent the link can send it again.' });
    if (milestone.version !== version) throw new Problem('stale', { version: milestone.version });
    const next = stateAfter(milestone.state, result);
    if (next === null) throw new Problem('wrong_state', { detail: milestone.state === 'proven' ? 'This milestone is proven already.' : 'The firm has not said yet that this milestone is done.' });
    if (seenOn > this.clock.today(milestone.timeZone)) throw Problem.field('/seenOn', 'The day must not lie ahead.');
    const independent = countsAsProof(milestone.senderSide, milestone.onBehalf);
    // a refusal counts from whomever it comes; what was seen by somebody the firm sent proves nothing
    const state = independent || result === 'failed' ? next : null;
    const percent = result === 'passed' ? 10_000 : (input.percent ?? milestone.percent);
    await this.repository.inspect(tx, { id, milestoneId, result, percent, note, seenOn, independent, name, company, license, state }, this.clock.now());
    if (state !== null && state !== milestone.state) await askToWeigh(tx, this.queue, guest.jobId, guest.firmId);
    const tell = { inspectionId: id, firmId: guest.firmId, inside: [milestone.jobCreatedBy, ...(milestone.claimedBy ? [milestone.claimedBy] : [])] };
    await this.queue.enqueue(tx, 'tell_guest_inspection', tell, { key: `guest_inspection:${id}` });
    const who = { link: guest.linkId, onBehalf: milestone.onBehalf, senderSide: milestone.senderSide, independent, whoSha256: whoHash(milestone.salt, [milestone.email, name, company, license]) };
    const data = { milestone: milestoneId, state: state ?? milestone.state, inspection: id, result, percent, seenOn, role: 'inspector', guest: who };
    await this.repository.record(tx, this.record.text({ act: 'milestone.inspected', by: guest.personId, data }));
  }

  private writePhoto(visit: Buffer, received: Received): Promise<Answered<Photo>> {
    const { id, milestoneId, note } = parsed(AddPhoto, received.fields);
    const { name, bytes, sha256, mediaType, storageKey } = received;
    if (!isAcceptedPhoto(mediaType)) throw new Problem('wrong_file_kind', { detail: 'This is not a photo. JPEG, PNG, WebP and HEIC pictures are accepted.' });
    return this.work.writeAsGuest(visit, (tx, guest) =>
      this.commands.inside<Photo>(tx, guest.personId, {
        operation: 'guest.photo',
        key: id,
        input: { milestoneId, sha256 },
        authorize: () => Promise.resolve(requireConfirmed(guest)),
        act: async () => {
          const added = await this.repository.addPhoto(tx, { id, milestoneId, name, mediaType, bytes, sha256, storageKey, note }, this.clock.now());
          if (!added) throw Problem.field('/milestoneId', 'Choose a milestone of this link.');
          await this.queue.enqueue(tx, 'process_photo', { photoId: id, firmId: guest.firmId }, { key: `photo:${id}` });
          await this.repository.record(tx, this.record.text({ act: 'photo.added', by: guest.personId, data: { photo: id, milestone: milestoneId, sha256, bytes, link: guest.linkId } }));
          const { milestones } = await this.guests.seen(tx);
          const photo = milestones.flatMap(({ photos }) => photos).find((found) => found.id === id);
          if (!photo) throw new Error('A photo must be visible to who added it.');
          return photo;
        },
      }),
    );
  }

  private requireFresh(guest: Guest): void {
    const at = requireConfirmed(guest);
    if (this.clock.now().getTime() - at.getTime() > FRESH_MINUTES * 60_000) throw new Problem('presence_needed');
  }
}
