import { useSuspenseQuery } from '@tanstack/react-query';
import { may } from '@tallypole/shared/schemas/permissions';
import type { JobPeople } from '@tallypole/shared/schemas/people';
import { writtenInstant } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { DataTable } from '../../../ui/data-table.tsx';
import { PageHead, Section } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { peopleQuery } from '../api/people.ts';
import { InviteForm } from '../components/invite-form.tsx';

type Person = JobPeople['people'][number];
type Invitation = JobPeople['invitations'][number];

export function Component() {
  const job = useJob();
  const { data } = useSuspenseQuery(peopleQuery(job.id));
  const firmSees = data.people.some(({ email }) => email !== null);
  return (
    <>
      <PageHead title="People">
        <p className="quiet">Who is on {job.name}, and as what.</p>
      </PageHead>
      <DataTable
        caption="People on the job"
        columns={[
          { key: 'name', head: 'Name', cell: (person: Person) => person.name },
          { key: 'role', head: 'Role', cell: (person: Person) => person.role },
          ...(firmSees ? [{ key: 'email', head: 'Address', cell: (person: Person) => person.email }] : []),
        ]}
        rows={data.people}
        rowKey={(person) => `${person.personId} ${person.role}`}
      />
      {data.invitations.length > 0 ? (
        <Section title="Invited, not here yet">
          <DataTable
            caption="Open invitations"
            columns={[
              { key: 'name', head: 'Name', cell: (open: Invitation) => open.name },
              { key: 'role', head: 'Role', cell: (open: Invitation) => open.role },
              { key: 'email', head: 'Address', cell: (open: Invitation) => open.email },
              { key: 'until', head: 'Good until', cell: (open: Invitation) => <StateTag meaning="waits">{writtenInstant(open.expiresAt, job.timeZone)}</StateTag> },
            ]}
            rows={data.invitations}
            rowKey={(open) => open.id}
          />
        </Section>
      ) : null}
      {may(job.roles, 'people.invite') ? (
        <Section title="Invite somebody">
          <InviteForm jobId={job.id} key={data.invitations.length + data.people.length} />
        </Section>
      ) : null}
    </>
  );
}
