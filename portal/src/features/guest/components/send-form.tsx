import { Checkbox } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import { countsAsProof, LINK_DAYS, maySendFor, SendInspectorLink, type GuestLinks, type SenderSide } from '@tallypole/shared/schemas/guest-links';
import type { Milestone } from '@tallypole/shared/schemas/milestones';
import { FieldRow, Form, NumberField, SelectField, TextAreaField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { Note, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { linksQuery, sendLink } from '../api/guest-links.ts';
import { strings } from '../strings.ts';
import classes from './guest.module.css';

interface SendFormProps {
  jobId: string;
  side: SenderSide;
  /** Those that are not proven. */
  milestones: readonly Milestone[];
  /** The one that the reader came from. */
  chosen: string | null;
}

export function SendForm({ jobId, side, milestones, chosen }: SendFormProps) {
  const queries = useQueryClient();
  const id = useNewId(`guest-link-${jobId}`);
  const whose = maySendFor[side];
  const act = useActForm<SendInspectorLink, GuestLinks>({
    name: `guest-link-${jobId}`,
    initialValues: { id, milestoneIds: milestones.filter((milestone) => milestone.id === chosen).map((milestone) => milestone.id), name: '', email: '', onBehalf: whose[0] ?? 'town', note: '', days: LINK_DAYS.least },
    schema: SendInspectorLink,
    send: (values, key) => sendLink(jobId, { ...values, id }, key),
    onDone: (links) => {
      queries.setQueryData(linksQuery(jobId).queryKey, links);
      toast(strings.sent);
    },
  });
  const { onBehalf } = act.form.values;
  return (
    <Section title={strings.sendTitle}>
      <Form act={act} submitLabel={strings.send}>
        <MilestoneChoice act={act} milestones={milestones} />
        <FieldRow>
          <TextField field={act.field('name')} label={strings.sendName} autoComplete="off" />
          <TextField field={act.field('email')} label={strings.sendEmail} type="email" inputMode="email" autoComplete="off" spellCheck={false} />
        </FieldRow>
        <SelectField field={act.field('onBehalf')} label={strings.sendFor} options={whose.map((value) => ({ value, label: strings.sendForLabels[value] }))} />
        {side === 'firm' ? <Note>{countsAsProof(side, onBehalf) ? strings.townProof : strings.noProof}</Note> : null}
        <TextAreaField field={act.field('note')} label={strings.sendNote} hint={strings.sendNoteHint} rows={2} />
        <NumberField field={act.field('days')} label={strings.sendDays} hint={strings.sendDaysHint} />
      </Form>
    </Section>
  );
}

function MilestoneChoice({ act, milestones }: { act: ReturnType<typeof useActForm<SendInspectorLink, GuestLinks>>; milestones: readonly Milestone[] }) {
  const { id, error } = act.field('milestoneIds');
  const { milestoneIds } = act.form.values;
  const choose = (milestoneId: string, on: boolean) => act.form.setFieldValue('milestoneIds', on ? [...milestoneIds, milestoneId] : milestoneIds.filter((other) => other !== milestoneId));
  return (
    <fieldset className={classes['choices']} id={id} tabIndex={-1} aria-describedby={error ? `${id}-error` : undefined}>
      <legend>{strings.sendMilestones}</legend>
      {error ? <p className={classes['error']} id={`${id}-error`}>{error}</p> : null}
      {milestones.map((milestone) => (
        <Checkbox key={milestone.id} size="md" label={milestone.name} description={strings.states[milestone.state]} checked={milestoneIds.includes(milestone.id)} onChange={(event) => choose(milestone.id, event.currentTarget.checked)} />
      ))}
    </fieldset>
  );
}
