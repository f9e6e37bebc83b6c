import { Inspect, inspectionResults, type InspectionResult } from '@tallypole/shared/schemas/milestones';
import { DateField, Form, PercentField, SelectField, TextAreaField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { Section } from '../../../ui/page.tsx';
import { actOnMilestone } from '../api/acts.ts';
import { strings } from '../strings.ts';
import { formName, type ActProps } from './act-props.ts';
import { useDone } from './use-done.ts';

/** Somebody from outside the firm says what they saw: of a claim anything, of work under way a part. */
export function InspectForm(props: ActProps) {
  const { job, milestone } = props;
  const id = useNewId(formName('inspect', props));
  const results = milestone.state === 'claimed' ? inspectionResults : (['partial'] as const);
  const act = useActForm<Inspect, Awaited<ReturnType<typeof actOnMilestone>>>({
    name: formName('inspect', props),
    initialValues: { id, version: milestone.version, result: results[0], percent: null, note: '', seenOn: job.today },
    schema: Inspect,
    send: (values, key) => actOnMilestone(job.id, milestone.id, 'inspections', values, key),
    onDone: useDone(job.id, strings.recorded),
  });
  const { result } = act.form.values;
  const choose = act.field('result');
  const onChoice = (value: unknown) => {
    choose.onChange(value);
    const chosen = typeof value === 'string' ? value : (value as { currentTarget: { value: string } }).currentTarget.value;
    if (chosen !== 'partial') act.form.setFieldValue('percent', null);
  };
  return (
    <Section title={strings.inspectTitle}>
      <Form act={act} submitLabel={strings.inspect[result]} color={result === 'failed' ? 'oxide' : 'ink'}>
        <p className="quiet">{strings.inspectExplain}</p>
        <SelectField field={{ ...choose, onChange: onChoice }} label={strings.result} options={results.map((value: InspectionResult) => ({ value, label: strings.results[value] }))} />
        {result === 'partial' ? <PercentField field={act.field('percent')} label={strings.percent} /> : null}
        <DateField field={act.field('seenOn')} label={strings.seenOn} near={job.today} />
        <TextAreaField field={act.field('note')} label={strings.note} hint={strings.noteHint} rows={3} />
      </Form>
    </Section>
  );
}
