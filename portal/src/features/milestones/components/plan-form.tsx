import { PlanMilestone } from '@tallypole/shared/schemas/milestones';
import { DateField, FieldRow, Form, useActForm } from '../../../ui/forms/index.ts';
import { Section } from '../../../ui/page.tsx';
import { actOnMilestone } from '../api/acts.ts';
import { strings } from '../strings.ts';
import { formName, type ActProps } from './act-props.ts';
import { useDone } from './use-done.ts';

/** When it was planned for, and when it is expected now. */
export function PlanForm(props: ActProps) {
  const { job, milestone } = props;
  const act = useActForm({
    name: formName('plan', props),
    initialValues: { plannedOn: milestone.plannedOn, forecastOn: milestone.forecastOn },
    schema: PlanMilestone.omit({ version: true }),
    send: (values, key) => actOnMilestone(job.id, milestone.id, 'plan', { version: milestone.version, plannedOn: values.plannedOn ?? null, forecastOn: values.forecastOn ?? null }, key),
    onDone: useDone(job.id, strings.planSaved),
  });
  return (
    <Section title={strings.planTitle}>
      <Form act={act} submitLabel={strings.plan}>
        <FieldRow>
          <DateField field={act.field('plannedOn')} label={strings.plannedOn} near={milestone.plannedOn ?? job.today} />
          <DateField field={act.field('forecastOn')} label={strings.forecastOn} hint={strings.forecastHint} near={milestone.plannedOn ?? job.today} />
        </FieldRow>
      </Form>
    </Section>
  );
}
