import { useQuery } from '@tanstack/react-query';
import { FieldGroup } from '../../../ui/forms/index.ts';
import { photoUrl } from '../../../lib/milestones.ts';
import { jobPhotosQuery } from '../api/changes.ts';
import classes from './changes.module.css';

export interface PictureChoiceProps {
  jobId: string;
  /** Its photos come first. */
  milestoneId: string | null;
  chosen: readonly string[];
  onChange: (ids: string[]) => void;
  error: React.ReactNode;
}

/** Chooses among the photos of the job the ones that explain the change. */
export function PictureChoice({ jobId, milestoneId, chosen, onChange, error }: PictureChoiceProps) {
  const { data } = useQuery(jobPhotosQuery(jobId));
  const ready = (data?.items ?? []).filter(({ state }) => state === 'ready');
  if (ready.length === 0) return null;
  const photos = [...ready.filter((photo) => photo.milestoneId === milestoneId), ...ready.filter((photo) => photo.milestoneId !== milestoneId)];
  return (
    <FieldGroup legend="Pictures that explain it">
      <p className="quiet">Up to 6 of the photos of this job; the homeowner sees them beside the reason, and they stand in the paper.</p>
      {error ? <p style={{ color: 'var(--oxide)' }}>{error}</p> : null}
      <ul className={classes['pick']}>
        {photos.map(({ id, note }, i) => (
          <li key={id}>
            <label>
              <input type="checkbox" checked={chosen.includes(id)} onChange={(event) => onChange(event.currentTarget.checked ? [...chosen, id] : chosen.filter((other) => other !== id))} aria-label={note || `Photo ${i + 1}`} />
              <img src={photoUrl(jobId, id, 'small')} alt="" loading="lazy" decoding="async" />
            </label>
          </li>
        ))}
      </ul>
    </FieldGroup>
  );
}
