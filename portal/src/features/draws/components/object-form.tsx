import { Button } from '@mantine/core';
import { ObjectToLine, type Draw, type DrawLine } from '@tallypole/shared/schemas/draws';
import { Form, MoneyField, TextAreaField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';

/** How much of a line is not approved, and why. */
export function ObjectForm({ jobId, draw, line, onClose }: { jobId: string; draw: Draw; line: DrawLine; onClose: () => void }) {
  const id = useNewId(`draw-object-${line.lineId}`);
  const drawn = useDrawn(jobId);
  const act = useActForm({
    name: `draw-object-${line.lineId}`,
    initialValues: { objectedCents: line.thisDrawCents, reason: '' },
    schema: ObjectToLine.omit({ id: true, lineId: true }),
    send: ({ objectedCents, reason }, key) => actOnDraw(jobId, draw.id, 'objections', { id, lineId: line.lineId, objectedCents: Number(objectedCents), reason }, key),
    onDone: (after) => drawn(after, strings.objected),
  });
  return (
    <Form act={act} submitLabel={strings.objectSubmit} aside={<Button variant="subtle" onClick={onClose}>Cancel</Button>}>
      <p className="quiet">{strings.objectExplain(line.thisDrawCents)}</p>
      <MoneyField field={act.field('objectedCents')} label={strings.objectSum} />
      <TextAreaField field={act.field('reason')} label={strings.objectReason} rows={2} />
    </Form>
  );
}
