import { useSuspenseQuery } from '@tanstack/react-query';
import { may } from '@tallypole/shared/schemas/permissions';
import { jobRoles, type JobRole } from '@tallypole/shared/schemas/roles';
import type { JobPeople } from '@tallypole/shared/schemas/people';
import { useJob } from '../../../lib/job.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { PageHead, Section } from '../../../ui/page.tsx';
import { RowList } from '../../../ui/row-list.tsx';
import { toast } from '../../../ui/toast.ts';
import { peopleQuery, removePerson } from '../api/people.ts';
import { InvitationList } from '../components/invitation-list.tsx';
import { InviteForm } from '../components/invite-form.tsx';
import { strings } from '../strings.ts';

type Person = JobPeople['people'][number];

export function Component() {
  const job = useJob();
  const { data } = useSuspenseQuery(peopleQuery(job.id));
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain(job.name)}</p>
      </PageHead>
      <RowList
        label={strings.people}
        rows={data.people.map((person) => ({
          key: `${person.personId} ${person.role}`,
          name: person.name,
          facts: [strings.roles[person.role], ...(person.email === null ? [] : [person.email])],
          acts: may(job.roles, 'people.remove') ? <Remove jobId={job.id} person={person} /> : null,
        }))}
      />
      {data.invitations.length > 0 ? (
        <Section title={strings.invited}>
          <InvitationList jobId={job.id} invitations={data.invitations} timeZone={job.timeZone} mayAct={may(job.roles, 'people.invite')} />
        </Section>
      ) : null}
      {may(job.roles, 'people.invite') ? (
        <Section title={strings.invite}>
          <InviteForm jobId={job.id} key={data.invitations.length + data.people.length} />
        </Section>
      ) : null}
      {may(job.roles, 'guest_link.read') ? (
        <Section title={strings.inspectors}>
          <p className="quiet" style={{ marginBottom: 12 }}>{strings.inspectorsExplain}</p>
          <LinkButton to={`/jobs/${job.id}/inspectors`} variant="outline">{strings.inspectors}</LinkButton>
        </Section>
      ) : null}
    </>
  );
}

/** People of the firm leave it on the firm's own page. */
function Remove({ jobId, person }: { jobId: string; person: Person }) {
  const role = jobRoles.find((known): known is JobRole => known === person.role);
  if (!role) return null;
  const { personId, name } = person;
  const text = (
    <>
      <p>{strings.removeText}</p>
      {role === 'homeowner' ? <p style={{ marginTop: 12 }}>{strings.removeHomeowner}</p> : null}
    </>
  );
  return (
    <ActButton
      scope={`remove:${jobId}:${personId}:${role}`}
      label={strings.remove}
      about={`${name}, ${role}`}
      variant="subtle"
      send={(key) => removePerson(jobId, personId, { role }, key)}
      onDone={(people) => {
        queryClient.setQueryData(peopleQuery(jobId).queryKey, people);
        void queryClient.invalidateQueries({ queryKey: ['jobs', jobId] });
        toast(strings.removed(name));
      }}
      question={{ title: strings.removeTitle(name, strings.roles[role]), text, confirm: strings.removeConfirm(name) }}
    />
  );
}
