import type { JobPeople } from '@tallypole/shared/schemas/people';
import { writtenInstant } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { DataTable } from '../../../ui/data-table.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnInvitation, peopleQuery } from '../api/people.ts';
import { strings } from '../strings.ts';

type Invitation = JobPeople['invitations'][number];

interface InvitationListProps {
  jobId: string;
  invitations: readonly Invitation[];
  timeZone: string;
  mayAct: boolean;
}

/** Who is invited and hasn't come yet; an invitation whose time is over can be sent again. */
export const InvitationList = ({ jobId, invitations, timeZone, mayAct }: InvitationListProps) => (
  <DataTable
    caption={strings.invitations}
    columns={[
      { key: 'name', head: strings.name, cell: (open: Invitation) => open.name },
      { key: 'role', head: strings.role, cell: (open: Invitation) => strings.roles[open.role] },
      { key: 'email', head: strings.address, cell: (open: Invitation) => open.email },
      { key: 'until', head: strings.goodUntil, cell: (open: Invitation) => <Until invitation={open} timeZone={timeZone} /> },
      ...(mayAct ? [{ key: 'acts', head: strings.acts, cell: (open: Invitation) => <Acts jobId={jobId} invitation={open} /> }] : []),
    ]}
    rows={invitations}
    rowKey={(open) => open.id}
  />
);

const Until = ({ invitation: { state, expiresAt }, timeZone }: { invitation: Invitation; timeZone: string }) => (
  <>
    <StateTag meaning={state === 'open' ? 'waits' : 'refused'}>{state === 'open' ? strings.open : strings.expired}</StateTag> {writtenInstant(expiresAt, timeZone)}
  </>
);

function Acts({ jobId, invitation: { id, name, sentAt } }: { jobId: string; invitation: Invitation }) {
  const done = (message: string) => (people: JobPeople) => {
    queryClient.setQueryData(peopleQuery(jobId).queryKey, people);
    toast(message);
  };
  return (
    <>
      <ActButton scope={`invitation-again:${id}:${sentAt}`} label={strings.again} about={name} variant="subtle" send={(key) => actOnInvitation(jobId, id, 'again', key)} onDone={done(strings.sentAgain(name))} />
      <ActButton scope={`invitation-revoke:${id}:${sentAt}`} label={strings.revoke} about={name} variant="subtle" send={(key) => actOnInvitation(jobId, id, 'revoke', key)} onDone={done(strings.revoked)} />
    </>
  );
}
