import { useSuspenseQuery } from '@tanstack/react-query';
import { InviteMember, type Members } from '@tallypole/shared/schemas/members';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { useParams } from 'react-router-dom';
import { Suspense } from 'react';
import { useMe } from '../../../lib/me.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { DataTable } from '../../../ui/data-table.tsx';
import { FieldRow, Form, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { inviteMember, membersQuery } from '../api/members.ts';

const ROLES = [
  { value: 'manager', label: 'Manager: prices changes, runs jobs' },
  { value: 'site', label: 'Site: photographs, claims milestones' },
  { value: 'books', label: 'Books: draws and payments' },
  { value: 'principal', label: 'Principal: everything' },
];

/** Who belongs to the firm, and who is invited. */
export const Component = () => (
  <main style={{ maxWidth: 900, margin: '0 auto', padding: '32px clamp(16px, 3vw, 40px)' }} id="main">
    <Suspense fallback={<LoadingState />}>
      <Firm />
    </Suspense>
  </main>
);

function Firm() {
  const { firmId = '' } = useParams();
  const me = useMe();
  const { data } = useSuspenseQuery(membersQuery(firmId));
  const firm = me.firms.find(({ id }) => id === firmId);
  return (
    <>
      <PageHead title={firm?.name ?? 'Your firm'}>
        <p className="quiet">Who belongs to the firm and sees all of its jobs.</p>
      </PageHead>
      <DataTable
        caption="Members"
        columns={[
          { key: 'name', head: 'Name', cell: (member: Members['members'][number]) => member.name },
          { key: 'role', head: 'Role', cell: (member: Members['members'][number]) => member.role },
          { key: 'email', head: 'Address', cell: (member: Members['members'][number]) => member.email },
        ]}
        rows={data.members}
        rowKey={({ personId }) => personId}
      />
      {data.invitations.length > 0 ? <p className="quiet" style={{ marginTop: 12 }}>Invited, not here yet: {data.invitations.map(({ name, role }) => `${name} (${role})`).join(', ')}.</p> : null}
      {firm?.role === 'principal' ? (
        <Section title="Invite into the firm">
          <MemberForm firmId={firmId} key={data.invitations.length + data.members.length} />
        </Section>
      ) : null}
    </>
  );
}

function MemberForm({ firmId }: { firmId: string }) {
  const id = useNewId(`invite-member-${firmId}`);
  const act = useActForm({
    name: `invite-member-${firmId}`,
    initialValues: { id, name: '', email: '', role: firmRoles[1] },
    schema: InviteMember,
    send: (values, key) => inviteMember(firmId, { ...values, id }, key),
    onDone: (members) => {
      toast('The invitation is on its way.');
      queryClient.setQueryData(membersQuery(firmId).queryKey, members);
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
