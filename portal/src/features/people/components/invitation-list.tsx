import type { JobPeople } from '@tallypole/shared/schemas/people';
import { writtenInstant } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { RowList } from '../../../ui/row-list.tsx';
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
  <RowList
    label={strings.invitations}
    rows={invitations.map((open) => ({
      key: open.id,
      name: open.name,
      facts: [strings.roles[open.role], open.email, <Until key="until" invitation={open} timeZone={timeZone} />],
      acts: mayAct ? <Acts jobId={jobId} invitation={open} /> : null,
    }))}
  />
);

const Until = ({ invitation: { state, expiresAt }, timeZone }: { invitation: Invitation; timeZone: string }) => (
  <>
    <StateTag meaning={state === 'open' ? 'waits' : 'refused'}>{state === 'open' ? strings.open : strings.expired}</StateTag> {strings.goodUntil(writtenInstant(expiresAt, timeZone))}
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
