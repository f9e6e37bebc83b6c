import { FileInput } from '@mantine/core';
import { AttachReview, type Change } from '@tallypole/shared/schemas/changes';
import type { StoredFile } from '@tallypole/shared/schemas/files';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { v7 } from 'uuid';
import { upload } from '../../../lib/upload.ts';
import { DateField, FieldRow, Form, SelectField, TextAreaField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { toast } from '../../../ui/toast.ts';
import { actOnChange } from '../api/changes.ts';
import { reviewKinds } from '../strings.ts';
import { useChanged } from './use-changed.ts';

type Sending = { state: 'none' } | { state: 'on_its_way'; percent: number } | { state: 'arrived' } | { state: 'failed'; why: string };

const said = (sending: Sending): string =>
  sending.state === 'arrived' ? 'The file has arrived.' : sending.state === 'on_its_way' ? `On its way, ${sending.percent} % sent` : 'A PDF or a picture, as it was given to you.';

/** What is wrong with the file: it could not be taken, or the form was sent without it. */
function wrong(sending: Sending, error: unknown): string | null {
  if (sending.state === 'failed') return sending.why;
  if (!error) return null;
  return sending.state === 'on_its_way' ? 'The file is still on its way. Attach the review once it has arrived.' : 'Choose the file.';
}

/** A structural change goes out only with its review: file, name and date. */
export function ReviewForm({ job, change }: { job: Job; change: Change }) {
  const id = useNewId(`review-${change.id}`);
  const changed = useChanged(job.id);
  const [sending, setSending] = useState<Sending>({ state: 'none' });
  const act = useActForm({
    name: `review-${change.id}-${change.reviews.length}`,
    initialValues: { id, kind: 'engineered_sheet', fileId: '', reviewerName: '', license: '', reviewedOn: '', note: '' },
    schema: AttachReview,
    send: (values, key) => actOnChange(job.id, change.id, 'reviews', values, key),
    onDone: (after) => {
      toast('The review is attached.');
      changed(after);
    },
  });
  const file = act.field('fileId');
  const choose = async (chosen: File | null) => {
    act.form.setFieldValue('fileId', '');
    if (!chosen) return setSending({ state: 'none' });
    const form = new FormData();
    form.set('id', v7());
    form.set('purpose', 'review');
    form.set('file', chosen);
    setSending({ state: 'on_its_way', percent: 0 });
    try {
      const stored = await upload<StoredFile>(`jobs/${job.id}/files`, form, { onProgress: (done, total) => setSending({ state: 'on_its_way', percent: Math.round((done / total) * 100) }) });
      act.form.setFieldValue('fileId', stored.id);
      act.form.clearFieldError('fileId');
      setSending({ state: 'arrived' });
    } catch (error) {
      setSending({ state: 'failed', why: error instanceof Error ? error.message : 'The file did not arrive. Choose it again.' });
    }
  };
  return (
    <Form act={act} submitLabel="Attach the review">
      <SelectField field={act.field('kind')} label="What it is" options={reviewKinds} />
      <FileInput id={file.id} label="The file" description={said(sending)} accept="application/pdf,image/*" onChange={(chosen) => void choose(chosen)} error={wrong(sending, file.error)} placeholder="Choose a file" />
      <FieldRow>
        <TextField field={act.field('reviewerName')} label="Who reviewed it" autoComplete="off" />
        <TextField field={act.field('license')} label="License" hint="If they have one" autoComplete="off" />
      </FieldRow>
      <DateField field={act.field('reviewedOn')} label="Reviewed on" near={job.today} />
      <TextAreaField field={act.field('note')} label="Note" rows={2} />
    </Form>
  );
}
