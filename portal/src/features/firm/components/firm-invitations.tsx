import { InviteMember, type Members } from '@tallypole/shared/schemas/members';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { writtenInstant } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { FieldRow, Form, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { RowList } from '../../../ui/row-list.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnFirmInvitation, inviteMember, membersQuery } from '../api/members.ts';
import { strings } from '../strings.ts';

type Invitation = Members['invitations'][number];

const { timeZone } = Intl.DateTimeFormat().resolvedOptions();

/** Who is invited into the firm and hasn't come yet. */
export const FirmInvitations = ({ firmId, invitations, mayAct }: { firmId: string; invitations: readonly Invitation[]; mayAct: boolean }) => (
  <RowList
    label={strings.invited}
    rows={invitations.map((open) => ({
      key: open.id,
      name: open.name,
      facts: [open.role, open.email, <Until key="until" invitation={open} />],
      acts: mayAct ? <Acts firmId={firmId} invitation={open} /> : null,
    }))}
  />
);

const Until = ({ invitation: { state, expiresAt } }: { invitation: Invitation }) => (
  <>
    <StateTag meaning={state === 'open' ? 'waits' : 'refused'}>{state === 'open' ? strings.open : strings.expired}</StateTag> {strings.goodUntil(writtenInstant(expiresAt, timeZone))}
  </>
);

function Acts({ firmId, invitation: { id, name, expiresAt } }: { firmId: string; invitation: Invitation }) {
  const done = (message: string) => (members: Members) => {
    queryClient.setQueryData(membersQuery(firmId).queryKey, members);
    toast(message);
  };
  return (
    <>
      <ActButton scope={`firm-again:${id}:${expiresAt}`} label={strings.again} about={name} variant="subtle" send={(key) => actOnFirmInvitation(firmId, id, 'again', key)} onDone={done(strings.sentAgain(name))} />
      <ActButton scope={`firm-revoke:${id}:${expiresAt}`} label={strings.revoke} about={name} variant="subtle" send={(key) => actOnFirmInvitation(firmId, id, 'revoke', key)} onDone={done(strings.revoked)} />
    </>
  );
}

export function MemberForm({ firmId }: { firmId: string }) {
  const id = useNewId(`invite-member-${firmId}`);
  const act = useActForm({
    name: `invite-member-${firmId}`,
    initialValues: { id, name: '', email: '', role: firmRoles[1] },
    schema: InviteMember,
    send: (values, key) => inviteMember(firmId, { ...values, id }, key),
    onDone: (members) => {
      toast(strings.inviteSent);
      queryClient.setQueryData(membersQuery(firmId).queryKey, members);
    },
  });
  return (
    <Form act={act} submitLabel={strings.inviteSend}>
      <FieldRow>
        <TextField field={act.field('name')} label={strings.name} autoComplete="off" />
        <TextField field={act.field('email')} label={strings.inviteEmail} type="email" inputMode="email" autoComplete="off" spellCheck={false} />
      </FieldRow>
      <SelectField field={act.field('role')} label={strings.inviteAs} options={(['manager', 'site', 'books', 'principal'] as const).map((value) => ({ value, label: strings.roles[value] }))} />
    </Form>
  );
}
