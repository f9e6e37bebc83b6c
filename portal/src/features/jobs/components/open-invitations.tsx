import { Button } from '@mantine/core';
import { useMutation } from '@tanstack/react-query';
import type { Me } from '@tallypole/shared/schemas/auth';
import { post } from '../../../lib/http.ts';
import { meQuery } from '../../../lib/me.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActRow, FailureState } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { jobsQuery } from '../api/get-jobs.ts';

/** Invitations that came while somebody was signed in already. */
export function OpenInvitations({ invitations }: { invitations: Me['invitations'] }) {
  const { mutate, isPending, error } = useMutation({
    mutationFn: () => post<Me>('invitations/accept', {}),
    onSuccess: async (me) => {
      queryClient.setQueryData(meQuery.queryKey, me);
      await queryClient.invalidateQueries(jobsQuery);
    },
  });
  if (invitations.length === 0) return null;
  return (
    <section aria-label="Invitations" style={{ marginBottom: 24 }}>
      {error ? <FailureState error={error} /> : null}
      {invitations.map((invitation) => (
        <ActRow
          key={invitation.id}
          tag={<StateTag meaning="waits">Invitation</StateTag>}
          title={invitation.jobName}
          action={
            <Button loading={isPending} onClick={() => mutate()}>
              Join the job
            </Button>
          }
        >
          {invitation.firmName} invites you as {invitation.role}.
        </ActRow>
      ))}
    </section>
  );
}
