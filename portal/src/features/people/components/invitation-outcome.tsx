import { useQuery, useQueryClient } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { enter } from '../../../lib/me.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { LoadingState, PageHead } from '../../../ui/page.tsx';
import { acceptInvitations, myInvitationQuery } from '../api/people.ts';
import { strings } from '../strings.ts';

/** What became of an invitation that leads nowhere any more; whoever it was not sent to learns nothing. */
export default function InvitationOutcome({ invitationId, fallback }: { invitationId: string; fallback: ReactNode }) {
  const queries = useQueryClient();
  const { data, isPending } = useQuery(myInvitationQuery(invitationId));
  if (isPending) return <LoadingState lines={2} />;
  if (!data) return fallback;
  const { state, firmName, senderName, jobId, firmId } = data;
  return (
    <>
      <PageHead title={strings.overTitle[state]}>
        <p>{strings.over[state](firmName)}</p>
        <p className="quiet">{strings.sentBy(senderName)}</p>
      </PageHead>
      {state === 'open' ? (
        <ActButton
          scope={`accept:${invitationId}`}
          label={strings.accept}
          about={firmName}
          variant="filled"
          send={acceptInvitations}
          onDone={(me) => {
            enter(me);
            queries.clear();
            window.location.assign(jobId ? `/jobs/${jobId}` : `/firms/${firmId}`);
          }}
        />
      ) : null}
    </>
  );
}
