import { Button } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { formatChange } from '@tallypole/shared/money';
import { priceChange } from '@tallypole/shared/pricing';
import { DraftChange, type Change, type CostLine, type PricingTermsInput } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useNavigate } from 'react-router-dom';
import { milestonesQuery } from '../../../lib/milestones.ts';
import { CheckboxField, DateField, FieldRow, Form, NumberField, SelectField, TextAreaField, TextField, useActForm, useNewId, type ActForm } from '../../../ui/forms/index.ts';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { LineSheet } from '../../../ui/line-sheet/line-sheet.tsx';
import { actOnChange, pricingQuery } from '../api/changes.ts';
import { applyEdits, columns, emptyLine } from '../cost-lines.ts';
import { origins, presentations } from '../strings.ts';
import { PictureChoice } from './picture-choice.tsx';
import { TermsFields } from './terms-fields.tsx';
import classes from './changes.module.css';
import { useChanged } from './use-changed.ts';

export interface ChangeEditorProps {
  job: Job;
  /** What is edited or revised; nothing for a new change. */
  from: Change | null;
  as: 'new' | 'edit' | 'revise';
}

const blank = (id: string) => ({
  id,
  title: '',
  reason: '',
  origin: 'homeowner_wish',
  structural: false,
  days: 0 as unknown,
  milestoneId: null as string | null,
  goodUntil: '',
  presentation: 'itemized',
  noCharge: false,
  photoIds: [] as string[],
  lines: [emptyLine()] as CostLine[],
  terms: null as PricingTermsInput | null,
  termsReason: '',
});
export type EditorValues = ReturnType<typeof blank>;

const valuesOf = (id: string, { cost, ...change }: Change): EditorValues => ({
  ...blank(id),
  title: change.title,
  reason: change.reason,
  origin: change.origin,
  structural: change.structural,
  days: change.days,
  milestoneId: change.milestoneId,
  goodUntil: change.goodUntil,
  presentation: change.presentation,
  noCharge: change.noCharge,
  photoIds: change.photos.map(({ id: photoId }) => photoId),
  lines: cost?.lines ?? [],
  terms: cost?.ownTerms ? cost.terms : null,
  termsReason: cost?.termsReason ?? '',
});

/** Prices a change: the reason in plain words, the lines as a sheet, and what it comes to while you type. */
export function ChangeEditor({ job, from, as }: ChangeEditorProps) {
  const id = useNewId(`change-${as}-${from?.id ?? job.id}`);
  const navigate = useNavigate();
  const changed = useChanged(job.id);
  const act = useActForm({
    name: `change-${as}-${from?.id ?? job.id}`,
    initialValues: from ? valuesOf(id, from) : blank(id),
    schema: DraftChange,
    send: (values: EditorValues, key) => send(job.id, from, as, values, key),
    onDone: (after: Change) => {
      changed(after);
      void navigate(`/jobs/${job.id}/changes/${after.id}`);
    },
  });
  const { lines } = act.form.values;
  const setLines = (next: CostLine[]) => act.form.setFieldValue('lines', next);
  return (
    <Form act={act} submitLabel={as === 'edit' ? 'Keep the draft' : as === 'revise' ? 'Make the revision' : 'Keep as draft'}>
      <Words act={act} job={job} />
      <PictureChoice jobId={job.id} milestoneId={act.form.values.milestoneId} chosen={act.form.values.photoIds} onChange={(ids) => act.form.setFieldValue('photoIds', ids)} error={act.field('photoIds').error} />
      <div className={classes['wide']} style={{ width: 'min(860px, 90vw)' }}>
        <h2 style={{ marginBottom: 8 }}>Lines</h2>
        <LineSheet label="Lines of the change" rows={lines} rowKey={(line) => line.id} columns={columns} canGrow onEdit={(edits) => setLines(applyEdits(lines, edits))} />
        <div style={{ display: 'flex', gap: 12, marginTop: 8 }}>
          <Button variant="subtle" onClick={() => setLines([...lines, emptyLine()])}>Add a line</Button>
          {lines.length > 0 ? <Button variant="subtle" color="oxide" onClick={() => setLines(lines.slice(0, -1))}>Take out the last line</Button> : null}
        </div>
      </div>
      <TermsFields act={act} firmId={job.firmId} />
      <SelectField field={act.field('presentation')} label="The homeowner sees the price" options={presentations} />
      <CheckboxField field={act.field('noCharge')} label="At no charge" hint="The firm bears it; what it costs stays with the firm." />
      <LivePrice firmId={job.firmId} values={act.form.values} />
    </Form>
  );
}

function send(jobId: string, from: Change | null, as: ChangeEditorProps['as'], values: EditorValues, key: string): Promise<Change> {
  const body = values;
  if (as === 'new' || !from) return actOnChange(jobId, '', '', body, key);
  if (as === 'revise') return actOnChange(jobId, from.id, 'revisions', body, key);
  const { id: _id, ...fields } = body;
  return actOnChange(jobId, from.id, '', { ...fields, version: from.version }, key);
}

function Words({ act, job }: { act: ActForm<EditorValues>; job: Job }) {
  const { data } = useQuery(milestonesQuery(job.id));
  const milestones = [{ value: '', label: 'The whole job' }, ...(data?.items ?? []).filter(({ state }) => state !== 'proven').map(({ id, name }) => ({ value: id, label: name }))];
  const milestone = act.field('milestoneId');
  return (
    <>
      <TextField field={act.field('title')} label="What it is, in a few words" />
      <TextAreaField field={act.field('reason')} label="Why, in plain words" hint="The homeowner reads this first." />
      <SelectField field={act.field('origin')} label="It comes from" options={origins} />
      <CheckboxField field={act.field('structural')} label="It touches the structure" hint="Joists, beams, posts, walls that carry, footings. It can't be sent out without a review." />
      <SelectField field={{ ...milestone, value: (milestone.value ?? ''), onChange: (event) => act.form.setFieldValue('milestoneId', (event as React.ChangeEvent<HTMLSelectElement>).currentTarget.value || null) }} label="It belongs to" options={milestones} />
      <FieldRow>
        <NumberField field={act.field('days')} label={`More ${job.terms.dayKind} days`} />
        <DateField field={act.field('goodUntil')} label="The price holds until" near={job.today} />
      </FieldRow>
    </>
  );
}

/** What it comes to with the lines as they stand: the same computation as the server's. */
function LivePrice({ firmId, values }: { firmId: string; values: EditorValues }) {
  const { data } = useQuery(pricingQuery(firmId));
  const terms = values.terms ?? data?.terms;
  if (!terms) return null;
  const priced = attempt(() => priceChange({ lines: values.lines, terms, noCharge: values.noCharge }));
  if (!priced) return <p className="quiet">The price appears once every line has its quantity and cost.</p>;
  return (
    <div className={classes['bar']} role="status">
      <strong className="sum" style={{ fontSize: 22 }}>
        <Figure label="Price" steps={priced.steps}>{formatChange(priced.chargedCents)}</Figure>
      </strong>
      <span className="quiet">net cost <Money cents={priced.netCostCents} /> · mark-up <Money cents={priced.markupCents} /></span>
    </div>
  );
}

function attempt<T>(work: () => T): T | null {
  try {
    return work();
  } catch {
    return null;
  }
}
