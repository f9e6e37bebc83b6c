import { StartMilestone } from '@tallypole/shared/schemas/milestones';
import { Form, useActForm } from '../../../ui/forms/index.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { actOnMilestone } from '../api/acts.ts';
import { strings } from '../strings.ts';
import { formName, type ActProps } from './act-props.ts';
import { useDone } from './use-done.ts';

/** Says that work has begun; beside it the way to the camera. */
export function StartButton(props: ActProps) {
  const { job, milestone } = props;
  const act = useActForm({
    name: formName('start', props),
    initialValues: {},
    schema: StartMilestone.omit({ version: true }),
    send: (_values, key) => actOnMilestone(job.id, milestone.id, 'start', { version: milestone.version }, key),
    onDone: useDone(job.id, strings.started),
  });
  return (
    <Form act={act} submitLabel={strings.start} aside={<LinkButton to={`/jobs/${job.id}/site/${milestone.id}`} variant="outline">{strings.photograph}</LinkButton>}>
      {null}
    </Form>
  );
}
