import { placeFinding, reuseFinding, timeFinding } from '@tallypole/shared/evidence';
import type { Tx, UnitOfWork } from '../common/unit-of-work.ts';
import type { QueueRepository } from '../queue/queue.repository.ts';
import { photosToWeigh, setFindings, type PhotoToWeigh } from './photo-work.repository.ts';

/** How long photos that come one after the other are waited for, so that a job's photos are weighed once for all of them. */
const GATHER_MS = 1_500;
/** A picture without shapes hashes to no bits at all. */
const BLANK = '0000000000000000';

/** Asks the worker to weigh the photos of a job anew: they, the site or their milestones have changed. */
export async function askToWeigh(tx: Tx, queue: QueueRepository, jobId: string, firmId: string): Promise<void> {
  await queue.enqueue(tx, 'weigh_photos', { jobId, firmId }, { key: `weigh:${jobId}`, runAt: new Date(Date.now() + GATHER_MS) });
}

/** Worker: says of each photo whether it was taken on site, in time, and shown before for something else. Run again it says the same. */
export async function weighPhotos(work: UnitOfWork, { jobId, firmId }: { jobId: string; firmId: string }): Promise<void> {
  await work.writeAsFirm(firmId, async (tx) => {
    const photos = await photosToWeigh(tx, jobId);
    await setFindings(tx, photos.map((photo) => ({ id: photo.id, findings: findingsOf(photo) })));
  });
}

const findingsOf = ({ place, site, takenOn, beganOn, claimedOn, phash, earlier }: PhotoToWeigh) => [
  placeFinding(place, site),
  timeFinding({ takenOn, beganOn, claimedOn }),
  reuseFinding(earlier, phash !== BLANK),
];
