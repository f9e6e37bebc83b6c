import { ReturnDraw, type Draw } from '@tallypole/shared/schemas/draws';
import { Form, TextAreaField, useActForm } from '../../../ui/forms/index.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';

/** Gives the whole draw back for correction. */
export function ReturnForm({ jobId, draw }: { jobId: string; draw: Draw }) {
  const drawn = useDrawn(jobId);
  const act = useActForm({
    name: `draw-return-${draw.id}`,
    initialValues: { reason: '' },
    schema: ReturnDraw,
    send: (values, key) => actOnDraw(jobId, draw.id, 'return', values, key),
    onDone: (after) => drawn(after, strings.back.done),
  });
  return (
    <Form act={act} submitLabel={strings.back.button} color="oxide">
      <p className="quiet">{strings.back.explain}</p>
      <TextAreaField field={act.field('reason')} label={strings.back.reason} rows={3} />
    </Form>
  );
}
