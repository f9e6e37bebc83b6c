import { Invite } from '@tallypole/shared/schemas/people';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import { queryClient } from '../../../lib/query-client.ts';
import { FieldRow, Form, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { toast } from '../../../ui/toast.ts';
import { invite, peopleQuery } from '../api/people.ts';

const ROLES: { value: JobRole; label: string }[] = [
  { value: 'homeowner', label: 'Homeowner: decides, approves, pays' },
  { value: 'lender', label: 'Lender: sees proof, funds draws' },
  { value: 'inspector', label: 'Inspector: records what was seen on site' },
  { value: 'designer', label: 'Designer: reviews structural changes' },
];

/** Invites an address; the mail grants nothing, whoever opens it proves the address by a code. */
export function InviteForm({ jobId }: { jobId: string }) {
  const id = useNewId(`invite-${jobId}`);
  const act = useActForm({
    name: `invite-${jobId}`,
    initialValues: { id, name: '', email: '', role: ROLES[0]?.value ?? 'homeowner' },
    schema: Invite,
    send: (values, key) => invite(jobId, { ...values, id }, key),
    onDone: (people) => {
      toast(`The invitation to ${act.form.values.email} is on its way.`);
      queryClient.setQueryData(peopleQuery(jobId).queryKey, people);
    },
  });
  return (
    <Form act={act} submitLabel="Send the invitation">
      <FieldRow>
        <TextField field={act.field('name')} label="Name" autoComplete="off" />
        <TextField field={act.field('email')} label="Mail address" type="email" inputMode="email" autoComplete="off" spellCheck={false} />
      </FieldRow>
      <SelectField field={act.field('role')} label="As" options={ROLES} />
    </Form>
  );
}
