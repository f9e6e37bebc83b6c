import type { Change } from '@tallypole/shared/schemas/changes';
import { photoUrl } from '../../../lib/milestones.ts';
import classes from './changes.module.css';

/** The pictures that explain a change. */
export function Pictures({ jobId, change }: { jobId: string; change: Change }) {
  if (change.photos.length === 0) return null;
  return (
    <div className={classes['pictures']}>
      {change.photos.map(({ id, note, width, height }, i) => (
        <figure key={id}>
          <img src={photoUrl(jobId, id, 'medium')} alt={note || `Picture ${i + 1} of ${change.title}`} width={width} height={height} decoding="async" />
          {note ? <figcaption className="quiet">{note}</figcaption> : null}
        </figure>
      ))}
    </div>
  );
}
