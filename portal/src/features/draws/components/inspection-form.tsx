import { Inspected, type Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { DateField, Form, TextAreaField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { ProofTable } from './proof-table.tsx';
import { useDrawn } from './use-drawn.ts';

const words = strings.review;

export function InspectionForm({ job, draw }: { job: Job; draw: Draw }) {
  const id = useNewId(`draw-inspect-${draw.id}-${draw.version}`);
  const drawn = useDrawn(job.id);
  const act = useActForm({
    name: `draw-inspect-${draw.id}-${draw.version}`,
    initialValues: { onDate: job.today, note: '' },
    schema: Inspected.omit({ id: true }),
    send: (values, key) => actOnDraw(job.id, draw.id, 'review/inspections', { id, ...values }, key),
    onDone: (after) => drawn(after, words.allowed),
  });
  return (
    <>
      <ProofTable draw={draw} />
      <h3 style={{ margin: '20px 0 12px' }}>{words.inspect}</h3>
      <Form act={act} submitLabel={words.inspectButton}>
        <DateField field={act.field('onDate')} label={words.inspectedOn} near={job.today} />
        <TextAreaField field={act.field('note')} label={words.note} rows={2} />
      </Form>
    </>
  );
}
