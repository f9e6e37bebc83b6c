import { StartDraw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useNavigate } from 'react-router-dom';
import { DateField, Form, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { startDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';

/** One step from what is proven to a draft. */
export function StartDrawForm({ job }: { job: Job }) {
  const id = useNewId(`draw-start-${job.id}`);
  const navigate = useNavigate();
  const drawn = useDrawn(job.id);
  const act = useActForm({
    name: `draw-start-${job.id}`,
    initialValues: { throughOn: job.today },
    schema: StartDraw.omit({ id: true }),
    send: ({ throughOn }, key) => startDraw(job.id, { id, throughOn }, key),
    onDone: (draw) => {
      drawn(draw);
      void navigate(`/jobs/${job.id}/draws/${draw.id}`);
    },
  });
  return (
    <Form act={act} submitLabel={strings.draft}>
      <DateField field={act.field('throughOn')} label={strings.throughOn} hint={strings.throughHint} near={job.today} />
    </Form>
  );
}
