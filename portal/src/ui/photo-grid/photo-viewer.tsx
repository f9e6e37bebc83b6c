import { Button, CloseButton, Modal } from '@mantine/core';
import type { Photo } from '@tallypole/shared/schemas/photos';
import type { KeyboardEvent, ReactNode } from 'react';
import { writtenInstant } from '../../lib/dates.ts';
import classes from './photo-grid.module.css';

interface PhotoViewerProps {
  jobId: string;
  photo: Photo;
  alt: string;
  title: string;
  timeZone: string;
  largeUrl: string;
  onClose: () => void;
  onMove: (step: 1 | -1) => void;
}

/** One photo large, with when, where and by whom, and what was found out about it. */
export default function PhotoViewer({ jobId, photo, alt, title, timeZone, largeUrl, onClose, onMove }: PhotoViewerProps) {
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === 'ArrowRight') onMove(1);
    if (event.key === 'ArrowLeft') onMove(-1);
  };
  return (
    <Modal opened onClose={onClose} withCloseButton={false} size="xl" onKeyDown={onKeyDown} aria-label={title}>
      <div className={classes['viewer']}>
        <div className={classes['moves']}>
          <h2>{title}</h2>
          <CloseButton size="lg" aria-label="Close" onClick={onClose} />
        </div>
        {photo.state === 'ready' ? (
          <img key={photo.id} src={largeUrl} alt={alt} width={photo.width ?? undefined} height={photo.height ?? undefined} />
        ) : (
          <p className={classes['trouble']}>{photo.trouble ?? 'The picture arrived and is being read. It will be here in a moment.'}</p>
        )}
        <div className={classes['moves']}>
          <Button variant="subtle" onClick={() => onMove(-1)}>Previous</Button>
          <Button variant="subtle" onClick={() => onMove(1)}>Next</Button>
        </div>
        <PhotoFacts jobId={jobId} photo={photo} timeZone={timeZone} />
      </div>
    </Modal>
  );
}

function PhotoFacts({ jobId, photo, timeZone }: { jobId: string; photo: Photo; timeZone: string }) {
  const { note, takenAt, addedAt, addedBy, place, sha256, findings, fileId } = photo;
  return (
    <dl className={classes['facts']}>
      {note ? <Fact name="Note">{note}</Fact> : null}
      <Fact name="Taken">{takenAt ? writtenInstant(takenAt, timeZone) : 'unknown; the picture carries no time'}</Fact>
      <Fact name="Added">{writtenInstant(addedAt, timeZone)} by {addedBy.name}</Fact>
      {place ? <Fact name="Where">{place.latitude.toFixed(5)}, {place.longitude.toFixed(5)}{place.accuracyM === null ? '' : `, within ${Math.round(place.accuracyM)} m`}</Fact> : null}
      {findings.map(({ kind, sentence }) => <Fact key={kind} name={FINDINGS[kind]}>{sentence}</Fact>)}
      <Fact name="Original">
        {place ? <a href={`/api/jobs/${jobId}/files/${fileId}`}>Download</a> : null} <span className={classes['hash']}>SHA-256 {sha256}</span>
      </Fact>
    </dl>
  );
}

const FINDINGS = { place: 'On site', time: 'In time', reuse: 'Seen before' } as const;

const Fact = ({ name, children }: { name: string; children: ReactNode }) => (
  <div>
    <dt>{name}</dt>
    <dd>{children}</dd>
  </div>
);
