import { InviteMember, type Members } from '@tallypole/shared/schemas/members';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { writtenInstant } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { DataTable } from '../../../ui/data-table.tsx';
import { FieldRow, Form, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { StateTag } from '../../../ui/state-tag.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnFirmInvitation, inviteMember, membersQuery } from '../api/members.ts';
import { strings } from '../strings.ts';
import classes from './firm.module.css';

type Invitation = Members['invitations'][number];

const { timeZone } = Intl.DateTimeFormat().resolvedOptions();

/** Who is invited into the firm and hasn't come yet. */
export const FirmInvitations = ({ firmId, invitations, mayAct }: { firmId: string; invitations: readonly Invitation[]; mayAct: boolean }) => (
  <DataTable
    caption={strings.invited}
    columns={[
      { key: 'name', head: strings.name, cell: (open: Invitation) => open.name },
      { key: 'role', head: strings.role, cell: (open: Invitation) => open.role },
      { key: 'email', head: strings.address, cell: (open: Invitation) => open.email },
      {
        key: 'until',
        head: strings.goodUntil,
        cell: ({ state, expiresAt }: Invitation) => (
          <>
            <StateTag meaning={state === 'open' ? 'waits' : 'refused'}>{state === 'open' ? strings.open : strings.expired}</StateTag> {writtenInstant(expiresAt, timeZone)}
          </>
        ),
      },
      ...(mayAct ? [{ key: 'acts', head: strings.acts, cell: (open: Invitation) => <Acts firmId={firmId} invitation={open} /> }] : []),
    ]}
    rows={invitations}
    rowKey={({ id }) => id}
  />
);

function Acts({ firmId, invitation: { id, name, expiresAt } }: { firmId: string; invitation: Invitation }) {
  const done = (message: string) => (members: Members) => {
    queryClient.setQueryData(membersQuery(firmId).queryKey, members);
    toast(message);
  };
  return (
    <div className={classes['acts']}>
      <ActButton scope={`firm-again:${id}:${expiresAt}`} label={strings.again} about={name} variant="subtle" send={(key) => actOnFirmInvitation(firmId, id, 'again', key)} onDone={done(strings.sentAgain(name))} />
      <ActButton scope={`firm-revoke:${id}:${expiresAt}`} label={strings.revoke} about={name} variant="subtle" send={(key) => actOnFirmInvitation(firmId, id, 'revoke', key)} onDone={done(strings.revoked)} />
    </div>
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
