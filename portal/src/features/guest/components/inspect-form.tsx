import { GuestInspect, type GuestVisit } from '@tallypole/shared/schemas/guest-links';
import { inspectionResults, type InspectionResult } from '@tallypole/shared/schemas/milestones';
import { DateField, FieldRow, Form, PercentField, SelectField, TextAreaField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { inspect } from '../api/guest.ts';
import { strings } from '../strings.ts';
import { useFreshCode } from './use-fresh-code.tsx';

/** Who looks, as they called themselves last. */
export interface Who {
  name: string;
  company: string;
  license: string;
}

interface InspectFormProps {
  milestone: GuestVisit['milestones'][number];
  today: string;
  who: Who;
  onDone: (visit: GuestVisit, who: Who) => void;
}

/** A guest says what they saw: of a claim anything, of work under way a part. */
export function InspectForm({ milestone, today, who, onDone }: InspectFormProps) {
  const name = `guest-inspect:${milestone.id}:${milestone.version}`;
  const id = useNewId(name);
  const { guard, dialog } = useFreshCode();
  const results = milestone.state === 'claimed' ? inspectionResults : (['partial'] as const);
  const act = useActForm<GuestInspect, GuestVisit>({
    name,
    initialValues: { id, version: milestone.version, result: results[0], percent: null, note: '', seenOn: today, ...who },
    schema: GuestInspect,
    send: (values, key) => guard(() => inspect(milestone.id, values, key)),
    onDone: (visit) => onDone(visit, { name: act.form.values.name, company: act.form.values.company, license: act.form.values.license }),
  });
  const { result } = act.form.values;
  const choose = act.field('result');
  const onChoice = (value: unknown) => {
    choose.onChange(value);
    const chosen = typeof value === 'string' ? value : (value as { currentTarget: { value: string } }).currentTarget.value;
    if (chosen !== 'partial') act.form.setFieldValue('percent', null);
  };
  return (
    <>
      <h3>{strings.seenTitle}</h3>
      <Form act={act} submitLabel={strings.act[result]} color={result === 'failed' ? 'oxide' : 'ink'}>
        <p className="quiet">{strings.seenExplain}</p>
        <SelectField field={{ ...choose, onChange: onChoice }} label={strings.result} options={results.map((value: InspectionResult) => ({ value, label: strings.results[value] }))} />
        {result === 'partial' ? <PercentField field={act.field('percent')} label={strings.percent} /> : null}
        <DateField field={act.field('seenOn')} label={strings.seenOn} near={today} />
        <TextAreaField field={act.field('note')} label={strings.note} hint={strings.noteHint} rows={3} />
        <TextField field={act.field('name')} label={strings.name} autoComplete="name" />
        <FieldRow>
          <TextField field={act.field('company')} label={strings.company} autoComplete="organization" />
          <TextField field={act.field('license')} label={strings.license} hint={strings.licenseHint} autoComplete="off" />
        </FieldRow>
      </Form>
      {dialog}
    </>
  );
}
