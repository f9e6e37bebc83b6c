import type { Photo, PhotoSize } from '@tallypole/shared/schemas/photos';
import { lazy, Suspense, useState } from 'react';
import { writtenInstant } from '../../lib/dates.ts';
import { photoUrl } from '../../lib/milestones.ts';
import classes from './photo-grid.module.css';

const PhotoViewer = lazy(() => import('./photo-viewer.tsx'));

export interface PhotoGridProps {
  jobId: string;
  photos: readonly Photo[];
  /** What is on them, for who doesn't see them: the milestone's name. */
  subject: string;
  timeZone: string;
  /** Where the pictures come from for somebody without an account. */
  urlOf?: (photoId: string, size: PhotoSize) => string;
}

/** Photos as a grid; one opens with what is known about it. Those that are still being read or can't be say so in their place. */
export function PhotoGrid({ jobId, photos, subject, timeZone, urlOf = (photoId, size) => photoUrl(jobId, photoId, size) }: PhotoGridProps) {
  const [open, setOpen] = useState<number | null>(null);
  const shown = open === null ? undefined : photos[open];
  return (
    <>
      <ul className={classes['grid']}>
        {photos.map((photo, i) => (
          <li key={photo.id}>
            <button type="button" className={classes['tile']} onClick={() => setOpen(i)}>
              {photo.state === 'ready' ? (
                <img src={urlOf(photo.id, 'small')} alt={altOf(photo, subject, timeZone)} loading="lazy" decoding="async" />
              ) : (
                <span className={classes['blank']}>{photo.state === 'stored' ? 'Being read …' : 'Cannot be shown'}</span>
              )}
            </button>
          </li>
        ))}
      </ul>
      {shown ? (
        <Suspense fallback={null}>
          <PhotoViewer
            jobId={jobId}
            photo={shown}
            alt={altOf(shown, subject, timeZone)}
            title={`${subject}, photo ${(open ?? 0) + 1} of ${photos.length}`}
            timeZone={timeZone}
            largeUrl={urlOf(shown.id, 'large')}
            onClose={() => setOpen(null)}
            onMove={(step) => setOpen((at) => Math.min(photos.length - 1, Math.max(0, (at ?? 0) + step)))}
          />
        </Suspense>
      ) : null}
    </>
  );
}

function altOf({ note, takenAt, addedAt }: Photo, subject: string, timeZone: string): string {
  return `${note || subject}, ${takenAt ? 'taken' : 'added'} ${writtenInstant(takenAt ?? addedAt, timeZone)}`;
}
