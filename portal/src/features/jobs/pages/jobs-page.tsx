import { Button } from '@mantine/core';
import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { contractSumSteps } from '@tallypole/shared/changes';
import type { Me } from '@tallypole/shared/schemas/auth';
import type { JobRow } from '@tallypole/shared/schemas/jobs';
import { Link } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { useMe } from '../../../lib/me.ts';
import { DataTable } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Money } from '../../../ui/money.tsx';
import { EmptyState, FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { WaitRow } from '../../../ui/waits.tsx';
import { jobsQuery } from '../api/get-jobs.ts';
import { waitsQuery } from '../api/get-waits.ts';
import { OpenInvitations } from '../components/open-invitations.tsx';

const columns = [
  { key: 'name', head: 'Job', cell: (job: JobRow) => <Link to={`/jobs/${job.id}`}>{job.name}</Link> },
  { key: 'firm', head: 'Builder', cell: (job: JobRow) => job.firmName },
  { key: 'place', head: 'Place', cell: (job: JobRow) => `${job.address.city}, ${job.address.state}` },
  { key: 'by', head: 'Finished by', cell: (job: JobRow) => writtenDate(job.completeBy) },
  { key: 'sum', head: 'Contract sum today', right: true, cell: (job: JobRow) => <ContractSum job={job} /> },
];

function ContractSum({ job }: { job: JobRow }) {
  const steps = contractSumSteps({ id: job.id, name: job.name, asSignedCents: job.contractSumCents, changesApprovedCents: job.approvedChangesCents });
  return <Figure label={`${job.name}, contract sum today`} steps={steps}><Money cents={job.contractSumTodayCents} /></Figure>;
}

export function Component() {
  const me = useMe();
  const { data, error, isPending, refetch, hasNextPage, fetchNextPage } = useInfiniteQuery(jobsQuery);
  const jobs = data?.pages.flatMap((page) => page.items) ?? [];
  const [firm] = me.firms.filter(({ role }) => role === 'principal' || role === 'manager');
  return (
    <main style={{ maxWidth: 1200, margin: '0 auto', padding: '32px clamp(16px, 3vw, 40px)' }} id="main">
      <PageHead title="Your jobs">{firm ? <LinkButtonRow firmId={firm.id} /> : null}</PageHead>
      <OpenInvitations invitations={me.invitations} />
      <Waiting />
      {isPending ? <LoadingState /> : error ? <FailureState error={error} onRetry={() => void refetch()} /> : jobs.length === 0 ? <NoJobs me={me} /> : <DataTable caption="Your jobs" columns={columns} rows={jobs} rowKey={(job) => job.id} />}
      {hasNextPage ? (
        <Button variant="subtle" onClick={() => void fetchNextPage()}>
          Show more
        </Button>
      ) : null}
    </main>
  );
}

/** Who is waited for, oldest first: what is mine, then what others owe an answer to. */
function Waiting() {
  const { data } = useQuery(waitsQuery);
  if (!data || data.items.length === 0) return null;
  const groups = [
    { title: 'Waiting for you', items: data.items.filter(({ mine }) => mine) },
    { title: 'Waiting for others', items: data.items.filter(({ mine }) => !mine) },
  ].filter(({ items }) => items.length > 0);
  return (
    <>
      {groups.map(({ title, items }) => (
        <Section key={title} title={title} ruled={false}>
          {items.map((wait) => (
            <WaitRow key={`${wait.kind} ${wait.id}`} wait={wait} jobId={wait.jobId} jobName={wait.jobName} />
          ))}
        </Section>
      ))}
      <h2 style={{ margin: '36px 0 12px' }}>All jobs</h2>
    </>
  );
}

const LinkButtonRow = ({ firmId }: { firmId: string }) => (
  <div>
    <LinkButton to={`/firms/${firmId}/jobs/new`}>Create a job</LinkButton>
  </div>
);

function NoJobs({ me }: { me: Me }) {
  const [firm] = me.firms;
  if (firm) return <EmptyState>Here will be the jobs of {firm.name}: each with its contract, milestones, changes and draws.</EmptyState>;
  return (
    <EmptyState action={<LinkButton to="/firms/new">Start your firm</LinkButton>}>
      Here will be the jobs that you are on. A builder invites homeowners, lenders and inspectors by mail address; if you expected an invitation, ask which address it went to. If you
      are the builder, start your firm.
    </EmptyState>
  );
}
