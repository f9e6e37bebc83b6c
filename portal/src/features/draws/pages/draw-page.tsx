import { useQuery } from '@tanstack/react-query';
import { may } from '@tallypole/shared/schemas/permissions';
import { mayDraw } from '@tallypole/shared/schemas/draw-states';
import { lazy } from 'react';
import { useParams } from 'react-router-dom';
import { drawQuery } from '../../../lib/draws.ts';
import { useJob } from '../../../lib/job.ts';
import { FailureState, LoadingState } from '../../../ui/page.tsx';
import { DrawView } from '../components/draw-view.tsx';

// the sheet is the firm's; a homeowner's page doesn't wait for it
const DrawEditor = lazy(() => import('../components/draw-editor.tsx').then((module) => ({ default: module.DrawEditor })));

/** One draw: a sheet to write in for the firm while it is being written, else what is asked and decided. */
export function Component() {
  const job = useJob();
  const { drawId = '' } = useParams();
  const { data: draw, error, refetch } = useQuery(drawQuery(job.id, drawId));
  if (error && !draw) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!draw) return <LoadingState lines={8} />;
  const writes = may(job.roles, 'draw.prepare') && mayDraw(draw.state, 'adjust');
  return writes ? <DrawEditor key={draw.id} job={job} draw={draw} /> : <DrawView key={draw.id} job={job} draw={draw} />;
}
