import { ClaimMilestone } from '@tallypole/shared/schemas/milestones';
import { Form, TextAreaField, useActForm } from '../../../ui/forms/index.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Section } from '../../../ui/page.tsx';
import { actOnMilestone } from '../api/acts.ts';
import { strings } from '../strings.ts';
import { formName, type ActProps } from './act-props.ts';
import { useDone } from './use-done.ts';

/** The firm says that it is done; without a photo it is sent to take one. */
export function ClaimForm(props: ActProps) {
  const { job, milestone } = props;
  const { ready, waiting } = milestone.photos;
  const photos = ready + waiting;
  const done = useDone(job.id, strings.claimed);
  const act = useActForm({
    name: formName('claim', props),
    initialValues: { note: '' },
    schema: ClaimMilestone.omit({ version: true }),
    send: ({ note }, key) => actOnMilestone(job.id, milestone.id, 'claim', { version: milestone.version, note }, key),
    onDone: done,
  });
  return (
    <Section title={strings.claimTitle}>
      {photos === 0 ? (
        <>
          <p className="quiet">{strings.claimNeedsPhotos}</p>
          <LinkButton to={`/jobs/${job.id}/site/${milestone.id}`}>{strings.photograph}</LinkButton>
        </>
      ) : (
        <Form act={act} submitLabel={strings.claim}>
          <p className="quiet">{strings.claimExplain(photos)}</p>
          <TextAreaField field={act.field('note')} label={strings.claimNote} hint={strings.claimNoteHint} rows={2} />
        </Form>
      )}
    </Section>
  );
}
