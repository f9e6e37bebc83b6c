import { ReopenMilestone } from '@tallypole/shared/schemas/milestones';
import { Form, TextAreaField, useActForm } from '../../../ui/forms/index.ts';
import { actOnMilestone } from '../api/acts.ts';
import { strings } from '../strings.ts';
import { formName, type ActProps } from './act-props.ts';
import { useDone } from './use-done.ts';
import classes from './milestone.module.css';

/** Takes a proof back, with its reason; folded away, since it is seldom meant. */
export function ReopenForm(props: ActProps) {
  const { job, milestone } = props;
  const act = useActForm({
    name: formName('reopen', props),
    initialValues: { reason: '' },
    schema: ReopenMilestone.omit({ version: true }),
    send: ({ reason }, key) => actOnMilestone(job.id, milestone.id, 'reopen', { version: milestone.version, reason }, key),
    onDone: useDone(job.id, strings.reopened),
  });
  return (
    <details className={classes['fold']}>
      <summary>{strings.reopenTitle}</summary>
      <Form act={act} submitLabel={strings.reopen} color="oxide">
        <p className="quiet">{strings.reopenExplain}</p>
        <TextAreaField field={act.field('reason')} label={strings.reason} rows={2} />
      </Form>
    </details>
  );
}
