import { useQuery } from '@tanstack/react-query';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { photosQuery } from '../../../lib/milestones.ts';
import { PhotoGrid } from '../../../ui/photo-grid/photo-grid.tsx';
import { strings } from '../strings.ts';
import classes from './draws.module.css';

/** The photos of a draw under the milestone that they show. */
export function BuiltPhotos({ job, draw }: { job: Job; draw: Draw }) {
  const shown = draw.milestones.filter(({ id }) => draw.photos.some(({ milestoneId }) => milestoneId === id));
  if (shown.length === 0) return <p className="quiet">{strings.photos.no}</p>;
  return shown.map(({ id, name }) => (
    <div key={id} className={classes['milestone']}>
      <h3>{name}</h3>
      <MilestonePhotos job={job} milestoneId={id} name={name} ids={draw.photos.map((photo) => photo.id)} />
    </div>
  ));
}

function MilestonePhotos({ job, milestoneId, name, ids }: { job: Job; milestoneId: string; name: string; ids: string[] }) {
  const { data } = useQuery(photosQuery(job.id, milestoneId));
  return <PhotoGrid jobId={job.id} photos={(data?.items ?? []).filter(({ id }) => ids.includes(id))} subject={name} timeZone={job.timeZone} />;
}
