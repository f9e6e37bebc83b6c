import { Button, Progress } from '@mantine/core';
import type { PhotoQueue, QueuedPhoto } from '../photo-queue.ts';
import { strings } from '../strings.ts';
import classes from './site.module.css';

/** The photos of this visit with how far each is; one that wasn't sent can be tried again by itself. */
export const QueueList = ({ photos, queue }: { photos: readonly QueuedPhoto[]; queue: PhotoQueue }) => (
  <section aria-label={strings.queue}>
    <p role="status" className={classes['count']}>
      {strings.sending(photos.filter(({ state }) => state === 'sent').length, photos.length)}
    </p>
    <ul className={classes['queue']}>
      {photos.map((photo) => (
        <QueueItem key={photo.id} photo={photo} queue={queue} />
      ))}
    </ul>
  </section>
);

function QueueItem({ photo, queue }: { photo: QueuedPhoto; queue: PhotoQueue }) {
  const { id, file, preview, state, percent, message } = photo;
  return (
    <li data-state={state}>
      <img src={preview} alt="" width={64} height={48} onError={(event) => event.currentTarget.removeAttribute('src')} />
      <div className={classes['about']}>
        <div className={classes['name']}>{photo.note || file.name}</div>
        <div className="quiet">
          {strings.states[state]}
          {state === 'sending' ? ` ${strings.percent(percent)}` : ''}
          {message ? `: ${message}` : ''}
        </div>
        {state === 'sending' ? <Progress value={percent} size="sm" aria-label={`${file.name}: ${strings.percent(percent)}`} /> : null}
      </div>
      {state === 'failed' ? <Button variant="outline" onClick={() => queue.retry(id)}>{strings.retry}</Button> : null}
      {state === 'refused' ? <Button variant="subtle" onClick={() => queue.drop(id)}>{strings.drop}</Button> : null}
    </li>
  );
}
